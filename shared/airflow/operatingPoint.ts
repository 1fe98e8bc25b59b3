import { pressureAtDelivery, deliveryAt } from './compressor.ts'
import type { Delivery } from './compressor.ts'
import { elementOutletPressure, marchBack } from './line.ts'
import type { LineFlow, March } from './line.ts'
import { criticalFlowFunction, gaugeAtMassFlow, isThroatSonic } from './nozzle.ts'
import { findOutletChoke, marchOutlet, outletMassFlow, prepareRig } from './preparedRig.ts'
import type { PreparedRig } from './preparedRig.ts'
import type { Rig, Site } from './rig.ts'
import { findRoot } from './rootFinding.ts'

/** Why there is no balance; sentences are made from these in every language. */
export type Reason =
  | 'short-of-air'
  | 'above-unload'
  | 'air-taken-first'
  | 'bore-range'
  | `choked:${string}`
  | `regulator:${number}`

export interface OutletState {
  /** Pa absolute */
  nozzlePressurePa: number
  /** kg/s */
  massFlow: number
  /** is the throat sonic */
  isChoked: boolean
}

export interface OperatingPoint {
  /** Pa absolute */
  compressorPressurePa: number
  /** Pa absolute, after the air line */
  manifoldPressurePa: number
  /** kg/s, air taken first included */
  massFlow: number
  /** m³/s at the site, air taken first included */
  freeAirM3S: number
  outlets: OutletState[]
  /** marches from the nozzles back to the compressor that it took */
  marches: number
}

export interface OperatingPointResult {
  operatingPoint: OperatingPoint | null
  reason: Reason | null
}

/** Gauge pressures of a balance. */
interface Balance {
  compressorGaugePa: number
  manifoldGaugePa: number
  massFlows: number[]
  marches: number
}

const widthTolerance = 1e-9
const imbalanceTolerance = 1e-8
/** of full-load delivery at set pressure: what rounding leaves where the guess is exact */
const roundingTolerance = 2e-15

/**
 * Where a straight draw meets a compressor: the model solved between marches. The compressor is exact in it; only the
 * rig is replaced by two chords.
 *
 *   flow = flow0 + flowSlope x,  pressure = pressure0 + pressureSlope x,  flow + first = delivery(pressure)
 *
 * Result   x; NaN when the chords do not rise
 */
function meetDelivery(
  delivery: Delivery,
  firstMassFlow: number,
  flow0: number,
  flowSlope: number,
  pressure0: number,
  pressureSlope: number,
): number {
  const { pressuresPa, massFlows } = delivery
  const drawn = firstMassFlow + flow0
  let x = (massFlows[0]! - drawn) / flowSlope
  if (pressure0 + pressureSlope * x <= pressuresPa[0]!) return x
  for (let i = 1; i < pressuresPa.length; i++) {
    const from = pressuresPa[i - 1]!
    const slope = (massFlows[i]! - massFlows[i - 1]!) / (pressuresPa[i]! - from)
    x = (massFlows[i - 1]! + slope * (pressure0 - from) - drawn) / (flowSlope - slope * pressureSlope)
    if (pressure0 + pressureSlope * x <= pressuresPa[i]!) return x
  }
  return (pressuresPa[pressuresPa.length - 1]! - pressure0) / pressureSlope
}

/** What a guess makes of the rig: total flow of the outlets and the pressures it takes. */
interface RigState {
  massFlow: number
  manifoldGaugePa: number
  compressorGaugePa: number
  choked: LineFlow | null
}

interface RigSearch {
  /** sets the state at x */
  march: (x: number, state: RigState) => void
  low: number
  high: number
  guess: number
  /** x of the point from which the first chord is drawn: no flow, no pressure absolute */
  origin: number
  /** ambient pressure where x is a gauge pressure, 0 where it is a flow */
  offset: number
}

/** One variable, chords through the last two marches, the compressor met exactly: see meetDelivery and findRoot. */
function balance(rig: PreparedRig, search: RigSearch) {
  const { delivery, firstMassFlow } = rig
  const ambientPa = rig.ambient.pressurePa
  const fullLoad = delivery.massFlows[delivery.massFlows.length - 2]!
  const state: RigState = { massFlow: 0, manifoldGaugePa: 0, compressorGaugePa: 0, choked: null }
  const best = { ...state }
  let bestImbalance = Infinity
  let earlierX = search.origin
  let earlierFlow = 0
  let earlierPa = 0
  const root = findRoot({
    evaluate(x) {
      search.march(x, state)
      const delivered = deliveryAt(delivery, ambientPa + state.compressorGaugePa)
      const imbalance = (state.massFlow + firstMassFlow - delivered) / fullLoad
      if (Math.abs(imbalance) < bestImbalance) {
        bestImbalance = Math.abs(imbalance)
        Object.assign(best, state)
      }
      return imbalance
    },
    propose(x) {
      const pressurePa = ambientPa + state.compressorGaugePa
      const step = x - earlierX
      const flowSlope = (state.massFlow - earlierFlow) / step
      const pressureSlope = (pressurePa - earlierPa) / step
      earlierX = x
      earlierFlow = state.massFlow
      earlierPa = pressurePa
      if (!(flowSlope >= 0 && pressureSlope > 0)) return NaN
      return meetDelivery(
        delivery,
        firstMassFlow,
        state.massFlow - flowSlope * x,
        flowSlope,
        pressurePa - pressureSlope * x,
        pressureSlope,
      )
    },
    low: search.low,
    high: search.high,
    guess: search.guess,
    widthTolerance,
    residualTolerance: imbalanceTolerance,
    zeroTolerance: roundingTolerance,
    offset: search.offset,
  })
  return { ...best, x: root.x, marches: root.evaluations }
}

/** One outlet: its flow is the variable, the nozzle pressure and every pressure before it follow. */
function balanceOneOutlet(rig: PreparedRig): Balance | Reason {
  const outlet = rig.outlets[0]!
  const ambientPa = rig.ambient.pressurePa
  const { delivery, firstMassFlow } = rig
  const choked = outlet.nozzle.conductance * criticalFlowFunction
  const high = rig.openMassFlow - firstMassFlow
  const back: March = { gaugePa: 0, choked: null }
  const found = balance(rig, {
    march(flow, state) {
      marchOutlet(outlet, flow, back)
      state.manifoldGaugePa = back.gaugePa
      marchBack(rig.airLine, flow, ambientPa, back)
      state.massFlow = flow
      state.compressorGaugePa = back.gaugePa
      state.choked = back.choked
    },
    low: 0,
    high,
    guess: Math.min(high, meetDelivery(delivery, firstMassFlow, 0, 1, 0, 1 / choked)),
    origin: 0,
    offset: 0,
  })
  if (found.manifoldGaugePa > outlet.regulatorGaugePa) return balanceHeldOutlet(rig, found.marches)
  return found.choked ? `choked:${found.choked.name}` : { ...found, massFlows: [found.massFlow] }
}

/** One outlet whose regulator holds: its flow is known, so the compressor's pressure is too, and the march goes down. */
function balanceHeldOutlet(rig: PreparedRig, marches: number): Balance | Reason {
  const outlet = rig.outlets[0]!
  const ambientPa = rig.ambient.pressurePa
  const massFlow = outletMassFlow(outlet, outlet.regulatorGaugePa, NaN)
  const choked = findOutletChoke(outlet, massFlow)
  if (choked) return `choked:${choked.name}`
  const compressorPa = pressureAtDelivery(rig.delivery, massFlow + rig.firstMassFlow)
  let pressurePa = compressorPa
  for (const element of rig.airLine) {
    const outletPa = elementOutletPressure(element, massFlow, pressurePa)
    if (Number.isNaN(outletPa)) return `choked:${element.name}`
    pressurePa = outletPa
  }
  return {
    compressorGaugePa: compressorPa - ambientPa,
    manifoldGaugePa: pressurePa - ambientPa,
    massFlows: [massFlow],
    marches: marches + 1,
  }
}

/** Flows of all outlets fed at one gauge pressure; the earlier flows are the first guesses. */
export function outletFlows(rig: PreparedRig, manifoldGaugePa: number, flows: number[]): number {
  let total = 0
  for (let i = 0; i < rig.outlets.length; i++) {
    flows[i] = outletMassFlow(rig.outlets[i]!, manifoldGaugePa, flows[i]!)
    total += flows[i]!
  }
  return total
}

/** The first outlet line that is choked at these flows names its element; null when all are open. */
export function findOutletsChoke(rig: PreparedRig, flows: readonly number[]): LineFlow | null {
  for (let i = 0; i < rig.outlets.length; i++) {
    const choked = findOutletChoke(rig.outlets[i]!, flows[i]!)
    if (choked) return choked
  }
  return null
}

/** Several outlets: the manifold's gauge pressure is the variable, each outlet's flow an inner search. */
function balanceManifold(rig: PreparedRig): Balance | Reason {
  const { outlets, delivery, firstMassFlow } = rig
  const ambientPa = rig.ambient.pressurePa
  const flows: number[] = outlets.map(() => NaN)
  const back: March = { gaugePa: 0, choked: null }
  let lastGauge = NaN
  let conductance = 0
  for (const outlet of outlets) conductance += outlet.nozzle.conductance
  const found = balance(rig, {
    march(gauge, state) {
      const scale = (ambientPa + gauge) / (ambientPa + lastGauge)
      for (let i = 0; i < flows.length; i++) flows[i]! *= scale
      lastGauge = gauge
      state.manifoldGaugePa = gauge
      state.massFlow = outletFlows(rig, gauge, flows)
      back.gaugePa = gauge
      back.choked = null
      marchBack(rig.airLine, state.massFlow, ambientPa, back)
      state.compressorGaugePa = back.gaugePa
      state.choked = back.choked
    },
    low: 0,
    high: delivery.pressuresPa[delivery.pressuresPa.length - 1]! - ambientPa,
    guess: meetDelivery(delivery, firstMassFlow, 0, conductance * criticalFlowFunction, 0, 1) - ambientPa,
    origin: -ambientPa,
    offset: ambientPa,
  })
  outletFlows(rig, found.x, flows)
  const choked = findOutletsChoke(rig, flows) ?? found.choked
  return choked ? `choked:${choked.name}` : { ...found, massFlows: flows }
}

/** The operating point of a rig already prepared; see solveOperatingPoint. */
export function solvePrepared(rig: PreparedRig): OperatingPointResult {
  if (rig.firstMassFlow >= rig.openMassFlow) return { operatingPoint: null, reason: 'air-taken-first' }
  const found = rig.outlets.length === 1 ? balanceOneOutlet(rig) : balanceManifold(rig)
  if (typeof found === 'string') return { operatingPoint: null, reason: found }
  const ambientPa = rig.ambient.pressurePa
  let massFlow = rig.firstMassFlow
  const outlets = rig.outlets.map((outlet, i) => {
    const flow = found.massFlows[i]!
    massFlow += flow
    const nozzleGauge = gaugeAtMassFlow(outlet.nozzle, flow)
    return {
      nozzlePressurePa: ambientPa + nozzleGauge,
      massFlow: flow,
      isChoked: isThroatSonic(ambientPa, nozzleGauge),
    }
  })
  return {
    operatingPoint: {
      compressorPressurePa: ambientPa + found.compressorGaugePa,
      manifoldPressurePa: ambientPa + found.manifoldGaugePa,
      massFlow,
      freeAirM3S: massFlow / rig.ambient.dryAirDensity,
      outlets,
      marches: found.marches,
    },
    reason: null,
  }
}

/**
 * Where the draw of the nozzles and of the air taken first equals what the compressor delivers.
 *
 * The march goes from the nozzle back: for one outlet a guessed flow gives the nozzle pressure and every pressure
 * before it, so the balance is one search in one variable; for several outlets the manifold pressure is guessed and
 * each outlet is one more. A flat nameplate working below its set pressure is met by the first guess.
 *
 * Inputs   rig and site (SI, pressures absolute)
 * Result   the point, balanced to 1e-8 of full-load delivery in a bracket of 1e-9; or null with the reason: air taken
 *          first is all there is, or the balance lies beyond a choked element
 * Errors   none for input in the declared ranges        Checked  tests/shared/airflow/laws.test.ts
 */
export function solveOperatingPoint(rig: Rig, site: Site): OperatingPointResult {
  return solvePrepared(prepareRig(rig, site))
}
