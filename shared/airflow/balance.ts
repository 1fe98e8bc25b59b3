import { deliveryAt, pressureAtDelivery } from './compressor.ts'
import type { Delivery } from './compressor.ts'
import { elementOutletPressure, marchBack, restartMarch, startMarch } from './line.ts'
import type { LineFlow, March } from './line.ts'
import { criticalFlowFunction } from './nozzle.ts'
import { marchOutlet, outletMassFlow, roughPressurePerFlow } from './preparedRig.ts'
import type { PreparedRig } from './preparedRig.ts'
import { findRoot } from './rootFinding.ts'

/** A balance, in gauge pressures; where an element is choked in it, no number of it is an answer. */
export interface Balance {
  compressorGaugePa: number
  manifoldGaugePa: number
  massFlows: number[]
  marches: number
  choked: LineFlow | null
  /** as a march has it */
  tightness: number
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
  tightness: number
}

function startState(): RigState {
  return { massFlow: 0, manifoldGaugePa: 0, compressorGaugePa: 0, choked: null, tightness: 0 }
}

function readMarch(march: March, state: RigState): void {
  state.compressorGaugePa = march.gaugePa
  state.choked = march.choked
  state.tightness = march.tightness
}

function toBalance(state: RigState, massFlows: number[], marches: number): Balance {
  const { compressorGaugePa, manifoldGaugePa, choked, tightness } = state
  return { compressorGaugePa, manifoldGaugePa, massFlows, marches, choked, tightness }
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
  /** of the imbalance, a part of full load, over x */
  leastSlope: number
}

/** One variable, chords through the last two marches, the compressor met exactly: see meetDelivery and findRoot. */
function balance(rig: PreparedRig, search: RigSearch) {
  const { delivery, firstMassFlow } = rig
  const ambientPa = rig.ambient.pressurePa
  const fullLoad = delivery.massFlows[delivery.massFlows.length - 2]!
  const [one, other] = [startState(), startState()]
  let state = one
  let best = other
  let bestImbalance = Infinity
  let earlierX = search.origin
  let earlierFlow = 0
  let earlierPa = 0
  const root = findRoot({
    evaluate(x) {
      state = best === one ? other : one
      search.march(x, state)
      const delivered = deliveryAt(delivery, ambientPa + state.compressorGaugePa)
      const imbalance = (state.massFlow + firstMassFlow - delivered) / fullLoad
      if (Math.abs(imbalance) < bestImbalance) {
        bestImbalance = Math.abs(imbalance)
        best = state
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
    leastSlope: search.leastSlope,
  })
  return { state: best, marches: root.evaluations }
}

/** One outlet: its flow is the variable, the nozzle pressure and every pressure before it follow. */
function balanceOneOutlet(rig: PreparedRig): Balance {
  const outlet = rig.outlets[0]!
  const ambientPa = rig.ambient.pressurePa
  const { delivery, firstMassFlow } = rig
  const high = rig.openMassFlow - firstMassFlow
  const march = startMarch()
  const { state, marches } = balance(rig, {
    march(flow, state) {
      marchOutlet(outlet, flow, march)
      state.manifoldGaugePa = march.gaugePa
      marchBack(rig.airLine, flow, ambientPa, march)
      state.massFlow = flow
      readMarch(march, state)
    },
    low: 0,
    high,
    guess: Math.min(high, meetDelivery(delivery, firstMassFlow, 0, 1, 0, roughPressurePerFlow(rig))),
    origin: 0,
    offset: 0,
    // a pressure never falls where a flow rises, nor does a delivery rise with the pressure
    leastSlope: 1 / delivery.massFlows[delivery.massFlows.length - 2]!,
  })
  if (state.manifoldGaugePa > outlet.regulatorGaugePa) {
    return balanceHeld(rig, [outletMassFlow(outlet, outlet.regulatorGaugePa, NaN)], marches)
  }
  return toBalance(state, [state.massFlow], marches)
}

/** What each outlet passes, and the gauge pressure its line is fed at: what is known of it is not searched again. */
export interface OutletFlows {
  massFlows: number[]
  feedGaugesPa: number[]
}

/** Brings the flows of all outlets to one manifold pressure, the earlier ones as guesses, and adds them up. */
export function feedOutlets(rig: PreparedRig, manifoldGaugePa: number, known: OutletFlows): number {
  const ambientPa = rig.ambient.pressurePa
  let total = 0
  for (let i = 0; i < rig.outlets.length; i++) {
    const outlet = rig.outlets[i]!
    const feedGauge = Math.min(manifoldGaugePa, outlet.regulatorGaugePa)
    const earlierGauge = known.feedGaugesPa[i]!
    if (feedGauge !== earlierGauge) {
      const guess = (known.massFlows[i]! * (ambientPa + feedGauge)) / (ambientPa + earlierGauge)
      known.massFlows[i] = outletMassFlow(outlet, feedGauge, guess)
      known.feedGaugesPa[i] = feedGauge
    }
    total += known.massFlows[i]!
  }
  return total
}

/** Marches every outlet at its flow and leaves in `march` the one that is tightest. */
export function marchOutlets(rig: PreparedRig, flows: readonly number[], march: March): void {
  let tightness = 0
  let choked: LineFlow | null = null
  for (let i = 0; i < rig.outlets.length; i++) {
    marchOutlet(rig.outlets[i]!, flows[i]!, march)
    tightness = Math.max(tightness, march.tightness)
    choked ??= march.choked
  }
  march.tightness = tightness
  march.choked = choked
}

/**
 * Every regulator holds: the flows are known, so the compressor's pressure is too, and the march goes down the air
 * line to the pressure left over. The highest compressor pressure that delivers so much is the one that counts.
 */
function balanceHeld(rig: PreparedRig, massFlows: number[], marches: number): Balance {
  const ambientPa = rig.ambient.pressurePa
  const march = startMarch()
  marchOutlets(rig, massFlows, march)
  let massFlow = 0
  for (const flow of massFlows) massFlow += flow
  const compressorPa = pressureAtDelivery(rig.delivery, massFlow + rig.firstMassFlow)
  let pressurePa = compressorPa
  for (const element of rig.airLine) {
    pressurePa = elementOutletPressure(element, massFlow, pressurePa)
    const ratio = (massFlow * element.chokePerFlow) / pressurePa
    if (ratio < 1) march.tightness = Math.max(march.tightness, ratio)
    else {
      march.choked ??= element
      march.tightness = 1
    }
  }
  return {
    compressorGaugePa: compressorPa - ambientPa,
    manifoldGaugePa: pressurePa - ambientPa,
    massFlows,
    marches: marches + 1,
    choked: march.choked,
    tightness: march.tightness,
  }
}

/** Several outlets: the manifold's gauge pressure is the variable, each outlet's flow an inner search. */
function balanceManifold(rig: PreparedRig): Balance {
  const { outlets, delivery, firstMassFlow } = rig
  const ambientPa = rig.ambient.pressurePa
  const flows: OutletFlows = { massFlows: outlets.map(() => NaN), feedGaugesPa: outlets.map(() => NaN) }
  const march = startMarch()
  let conductance = 0
  for (const outlet of outlets) conductance += outlet.nozzle.conductance
  const marchAt = (gauge: number, state: RigState) => {
    state.manifoldGaugePa = gauge
    state.massFlow = feedOutlets(rig, gauge, flows)
    restartMarch(march, gauge)
    marchBack(rig.airLine, state.massFlow, ambientPa, march)
    readMarch(march, state)
  }
  let high = delivery.pressuresPa[delivery.pressuresPa.length - 1]! - ambientPa
  const allHeldGauge = Math.max(...outlets.map((outlet) => outlet.regulatorGaugePa))
  if (allHeldGauge < high) {
    const held = startState()
    marchAt(allHeldGauge, held)
    const delivered = deliveryAt(delivery, ambientPa + held.compressorGaugePa)
    if (held.massFlow + firstMassFlow < delivered) return balanceHeld(rig, flows.massFlows, 1)
    high = allHeldGauge
  }
  const { state, marches } = balance(rig, {
    march: marchAt,
    low: 0,
    high,
    guess: meetDelivery(delivery, firstMassFlow, 0, conductance * criticalFlowFunction, 0, 1) - ambientPa,
    origin: -ambientPa,
    offset: ambientPa,
    leastSlope: 0,
  })
  feedOutlets(rig, state.manifoldGaugePa, flows)
  marchOutlets(rig, flows.massFlows, march)
  state.choked = march.choked ?? state.choked
  state.tightness = Math.max(march.tightness, state.tightness)
  return toBalance(state, flows.massFlows, marches)
}

/**
 * The balance of a rig whose air taken first leaves some over, carried through chokes: it is one search, and has one
 * answer, because no pressure falls where a flow rises. An open balance, where there is one, is that answer; so behind
 * a held regulator it is the one at the highest pressure.
 */
export function findBalance(rig: PreparedRig): Balance {
  return rig.outlets.length === 1 ? balanceOneOutlet(rig) : balanceManifold(rig)
}
