import { pressureAtDelivery, deliveryAt } from './compressor.ts'
import type { Delivery } from './compressor.ts'
import { elementOutletPressure, findChokedElement, gaugeBeforeLine } from './line.ts'
import { criticalFlowFunction, gaugeAtMassFlow, isThroatSonic } from './nozzle.ts'
import { entryGauge, findOutletChoke, outletMassFlow, prepareRig } from './preparedRig.ts'
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
/** of full-load delivery: what rounding leaves where the guess is exact */
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

interface March {
  /** total flow of the outlets kg/s and gauge pressure at the compressor, at x; NaN pressure when choked */
  at: (x: number) => { massFlow: number; compressorGaugePa: number }
  low: number
  high: number
  guess: number
  /** x of the point from which the first chord is drawn: no flow, no pressure absolute */
  origin: number
  /** is x a gauge pressure (else a flow) */
  offset: number
  closedSide: 'low' | 'high'
}

/** One variable, chords through the last two marches, the compressor met exactly: see meetDelivery and findRoot. */
function balance(rig: PreparedRig, march: March) {
  const { delivery, firstMassFlow, openMassFlow } = rig
  const ambientPa = rig.ambient.pressurePa
  let massFlow = 0
  let pressurePa = 0
  let earlierX = march.origin
  let earlierFlow = 0
  let earlierPa = 0
  const root = findRoot({
    evaluate(x) {
      const state = march.at(x)
      massFlow = state.massFlow
      pressurePa = ambientPa + state.compressorGaugePa
      return (massFlow + firstMassFlow - deliveryAt(delivery, pressurePa)) / openMassFlow
    },
    propose(x) {
      const step = x - earlierX
      const flowSlope = (massFlow - earlierFlow) / step
      const pressureSlope = (pressurePa - earlierPa) / step
      earlierX = x
      earlierFlow = massFlow
      earlierPa = pressurePa
      if (!(flowSlope >= 0 && pressureSlope > 0)) return NaN
      return meetDelivery(
        delivery,
        firstMassFlow,
        massFlow - flowSlope * x,
        flowSlope,
        pressurePa - pressureSlope * x,
        pressureSlope,
      )
    },
    low: march.low,
    high: march.high,
    guess: march.guess,
    widthTolerance,
    residualTolerance: imbalanceTolerance,
    zeroTolerance: roundingTolerance,
    offset: march.offset,
    closedSide: march.closedSide,
  })
  return root
}

/** One outlet: its flow is the variable, the nozzle pressure and every pressure before it follow. */
function balanceOneOutlet(rig: PreparedRig): Balance | Reason {
  const outlet = rig.outlets[0]!
  const ambientPa = rig.ambient.pressurePa
  const { delivery, firstMassFlow } = rig
  const choked = outlet.nozzle.conductance * criticalFlowFunction
  const high = rig.openMassFlow - firstMassFlow
  const state = { massFlow: 0, compressorGaugePa: 0 }
  const root = balance(rig, {
    at(flow) {
      state.massFlow = flow
      state.compressorGaugePa = gaugeBeforeLine(rig.airLine, flow, entryGauge(outlet, flow), ambientPa)
      return state
    },
    low: 0,
    high,
    guess: Math.min(high, meetDelivery(delivery, firstMassFlow, 0, 1, 0, 1 / choked)),
    origin: 0,
    offset: 0,
    closedSide: 'high',
  })
  const marches = root.evaluations
  if (root.isMet) {
    const manifoldGaugePa = entryGauge(outlet, root.x)
    if (manifoldGaugePa <= outlet.regulatorGaugePa) {
      const compressorGaugePa = gaugeBeforeLine(rig.airLine, root.x, manifoldGaugePa, ambientPa)
      return { compressorGaugePa, manifoldGaugePa, massFlows: [root.x], marches }
    }
  } else if (outlet.regulatorGaugePa === Infinity) {
    return chokedReason(rig, root.high)
  }
  return balanceHeldOutlet(rig, root.isMet ? null : chokedReason(rig, root.high), marches)
}

/** One outlet whose regulator holds: its flow is known, so the compressor's pressure is too, and the march goes down. */
function balanceHeldOutlet(rig: PreparedRig, unregulated: Reason | null, marches: number): Balance | Reason {
  const outlet = rig.outlets[0]!
  const ambientPa = rig.ambient.pressurePa
  const massFlow = outletMassFlow(outlet, outlet.regulatorGaugePa, NaN)
  if (Number.isNaN(massFlow)) return `choked:${findOutletChoke(outlet, outlet.regulatorGaugePa)!.name}`
  const compressorPa = pressureAtDelivery(rig.delivery, massFlow + rig.firstMassFlow)
  let pressurePa = compressorPa
  for (const element of rig.airLine) {
    const outletPa = elementOutletPressure(element, massFlow, pressurePa)
    if (Number.isNaN(outletPa)) return unregulated ?? `choked:${element.name}`
    pressurePa = outletPa
  }
  const manifoldGaugePa = pressurePa - ambientPa
  if (!(manifoldGaugePa >= outlet.regulatorGaugePa * (1 - 1e-9))) return unregulated ?? 'short-of-air'
  return {
    compressorGaugePa: compressorPa - ambientPa,
    manifoldGaugePa,
    massFlows: [massFlow],
    marches: marches + 1,
  }
}

function chokedReason(rig: PreparedRig, closedFlow: number): Reason {
  const outlet = rig.outlets[0]!
  const ambientPa = rig.ambient.pressurePa
  const own = findChokedElement(outlet.line, closedFlow, gaugeAtMassFlow(outlet.nozzle, closedFlow), ambientPa)
  const element =
    own ?? findChokedElement(rig.airLine, closedFlow, entryGauge(outlet, closedFlow), ambientPa)
  return `choked:${element!.name}`
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

/** Several outlets: the manifold's gauge pressure is the variable, each outlet's flow an inner search. */
function balanceManifold(rig: PreparedRig): Balance | Reason {
  const { outlets, delivery, firstMassFlow } = rig
  const ambientPa = rig.ambient.pressurePa
  const flows: number[] = outlets.map(() => NaN)
  const state = { massFlow: 0, compressorGaugePa: 0 }
  let lastGauge = NaN
  const at = (gauge: number) => {
    const scale = (ambientPa + gauge) / (ambientPa + lastGauge)
    for (let i = 0; i < flows.length; i++) flows[i]! *= scale
    lastGauge = gauge
    state.massFlow = outletFlows(rig, gauge, flows)
    state.compressorGaugePa = gaugeBeforeLine(rig.airLine, state.massFlow, gauge, ambientPa)
    return state
  }
  let conductance = 0
  for (const outlet of outlets) conductance += outlet.nozzle.conductance
  const high = delivery.pressuresPa[delivery.pressuresPa.length - 1]! - ambientPa
  const guess = meetDelivery(delivery, firstMassFlow, 0, conductance * criticalFlowFunction, 0, 1) - ambientPa
  const shape = { at, high, guess, origin: -ambientPa, offset: ambientPa }
  let root = balance(rig, { ...shape, low: 0, closedSide: 'high' })
  let marches = root.evaluations
  const closedGauge = root.high
  if (!root.isMet && outlets.some((outlet) => outlet.regulatorGaugePa < high)) {
    root = balance(rig, { ...shape, low: closedGauge, guess: high, closedSide: 'low' })
    marches += root.evaluations
  }
  if (!root.isMet) return chokedManifoldReason(rig, closedGauge)
  at(root.x)
  return {
    compressorGaugePa: state.compressorGaugePa,
    manifoldGaugePa: root.x,
    massFlows: flows,
    marches,
  }
}

/** The element that closes a manifold pressure: one of an outlet's line, or one of the air line. */
export function chokedManifoldReason(rig: PreparedRig, manifoldGaugePa: number): Reason {
  let total = 0
  for (const outlet of rig.outlets) {
    const flow = outletMassFlow(outlet, manifoldGaugePa, NaN)
    if (Number.isNaN(flow)) return `choked:${findOutletChoke(outlet, manifoldGaugePa)?.name ?? ''}`
    total += flow
  }
  const element = findChokedElement(rig.airLine, total, manifoldGaugePa, rig.ambient.pressurePa)
  return element ? `choked:${element.name}` : 'short-of-air'
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
