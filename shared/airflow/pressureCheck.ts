import { feedOutlets, findBalance, marchOutlets } from './balance.ts'
import type { OutletFlows } from './balance.ts'
import { deliveryAt, fullLoadDeliveryAt } from './compressor.ts'
import { marchBack, restartMarch, startMarch } from './line.ts'
import type { LineFlow } from './line.ts'
import { massFlowAtGauge } from './nozzle.ts'
import { solvePrepared } from './operatingPoint.ts'
import type { OperatingPoint, Reason } from './operatingPoint.ts'
import { prepareRig } from './preparedRig.ts'
import type { PreparedRig } from './preparedRig.ts'
import type { Rig, Site } from './rig.ts'
import { findRoot } from './rootFinding.ts'

export type Verdict = 'holds' | 'barely-holds' | 'falls-short' | 'cannot-run'

/** Air margin from which a rig holds without a doubt: about the uncertainty of the gauges and of the nameplate. */
export const safeAirMargin = 0.05
/** of full-load delivery: what the operating point's own tolerance leaves */
const marginSlack = 1e-9
/** what rounding makes of a target that is the regulator's own pressure */
const regulatorSlack = 1e-12

export interface AtTarget {
  /** kg/s, air taken first included */
  requiredMassFlow: number
  /** Pa absolute */
  requiredCompressorPressurePa: number
  /** Pa absolute, after the air line */
  manifoldPressurePa: number
  /** kg/s at the required compressor pressure */
  deliveredMassFlow: number
  /** kg/s the machine would give there were it not throttled above set */
  fullLoadMassFlow: number
  /** (delivered − required) / full load */
  airMargin: number
}

export interface TargetResult {
  atTarget: AtTarget | null
  reason: Reason | null
  /** where the obstacle is, when there is one */
  obstacle: 'air' | 'line' | 'regulator' | 'air-line' | null
}

export interface PressureCheck extends TargetResult {
  verdict: Verdict
  operatingPoint: OperatingPoint | null
}

/** A target tried, with what a search for its edge needs. */
export interface TargetTrial extends TargetResult {
  /** how far past its nearest edge, in that edge's own measure: negative when reached with something left */
  excess: number
}

/**
 * What the rig needs for every nozzle to see at least the target.
 *
 * The manifold stands at the largest pressure that any outlet needs; the others then run above the target. Where the
 * air line is choked at that pressure and open at a higher one, as behind a held regulator, that one is taken, and the
 * air line stays the obstacle to any more.
 *
 *   air margin = (S − N) / D
 *   N  nozzles + air taken first,  S  delivery at the compressor pressure this needs,  D  full-load delivery there
 *
 * Inputs   rig, prepared · target Pa gauge, positive · are the figures of a target reached behind a choke wanted? (a
 *          search for the edge does without)
 * Checked  tests/shared/airflow/laws.test.ts
 */
export function requireTarget(rig: PreparedRig, targetGaugePa: number, wantsFigures = true): TargetTrial {
  const ambientPa = rig.ambient.pressurePa
  const march = startMarch()
  const flows: OutletFlows = { massFlows: [], feedGaugesPa: [] }
  let manifoldGauge = 0
  let nearest = -Infinity
  for (let i = 0; i < rig.outlets.length; i++) {
    const outlet = rig.outlets[i]!
    const flow = massFlowAtGauge(outlet.nozzle, targetGaugePa)
    restartMarch(march, targetGaugePa)
    marchBack(outlet.line, flow, ambientPa, march)
    if (march.choked) return choked(march.choked, 'line', march.tightness)
    const excess = march.gaugePa / (outlet.regulatorGaugePa * (1 + regulatorSlack)) - 1
    nearest = Math.max(nearest, excess, march.tightness - 1)
    if (excess > 0) return { atTarget: null, reason: `regulator:${i + 1}`, obstacle: 'regulator', excess }
    flows.massFlows.push(flow)
    flows.feedGaugesPa.push(march.gaugePa)
    manifoldGauge = Math.max(manifoldGauge, march.gaugePa)
  }
  let total = flows.massFlows[0]!
  if (rig.outlets.length > 1) {
    total = feedOutlets(rig, manifoldGauge, flows)
    marchOutlets(rig, flows.massFlows, march)
    if (march.choked) return choked(march.choked, 'line', march.tightness)
    nearest = Math.max(nearest, march.tightness - 1)
  }
  restartMarch(march, manifoldGauge)
  marchBack(rig.airLine, total, ambientPa, march)
  if (!march.choked) {
    const weighed = weighAir(rig, total, manifoldGauge, march.gaugePa)
    return { ...weighed, excess: Math.max(weighed.excess, nearest, march.tightness - 1) }
  }

  if (rig.outlets.every((outlet) => outlet.regulatorGaugePa === Infinity)) {
    return choked(march.choked, 'air-line', march.tightness)
  }
  // carried through the choke, the air is short here already: the balance lies below
  const carried = weighAir(rig, total, manifoldGauge, march.gaugePa)
  if (carried.excess >= 0)
    return { ...choked(march.choked, 'air-line', march.tightness), excess: carried.excess }
  const heldExcess = weighAllHeld(rig, flows)
  if (heldExcess < 0 && !wantsFigures) {
    return { atTarget: null, reason: null, obstacle: 'air-line', excess: heldExcess }
  }
  const balance = findBalance(rig)
  if (balance.choked || balance.manifoldGaugePa <= manifoldGauge) {
    const excess = heldExcess < Infinity ? heldExcess : Math.max(march.tightness, balance.tightness) - 1
    return { ...choked(march.choked, 'air-line', march.tightness), excess }
  }
  // at the edge the manifold leaves the choke like a root: squared it comes in straight
  const behindChoke = { reason: null, obstacle: 'air-line', excess: -((1 - balance.tightness) ** 2) } as const
  if (!wantsFigures) return { atTarget: null, ...behindChoke }
  const opened = openAirLine(rig, manifoldGauge, balance.manifoldGaugePa, flows)
  total = feedOutlets(rig, opened, flows)
  restartMarch(march, opened)
  marchBack(rig.airLine, total, ambientPa, march)
  return { ...weighAir(rig, total, opened, march.gaugePa), ...behindChoke }
}

function choked(element: LineFlow, obstacle: 'line' | 'air-line', tightness: number): TargetTrial {
  return { atTarget: null, reason: `choked:${element.name}`, obstacle, excess: tightness - 1 }
}

/**
 * The shortage of air, of full-load delivery, with every regulator holding: below 0 the rig runs above all of them, and
 * the air line is open there, for the compressor's pressure is over the least that passes the flow. Infinity where an
 * outlet has no regulator.
 */
function weighAllHeld(rig: PreparedRig, flows: OutletFlows): number {
  const gauge = Math.max(...rig.outlets.map((outlet) => outlet.regulatorGaugePa))
  if (gauge === Infinity) return Infinity
  const total = feedOutlets(rig, gauge, flows)
  const march = startMarch(gauge)
  marchBack(rig.airLine, total, rig.ambient.pressurePa, march)
  return weighAir(rig, total, gauge, march.gaugePa).excess
}

/** The air at a target whose lines are all open: total flow of the nozzles kg/s, pressures Pa gauge. */
function weighAir(
  rig: PreparedRig,
  total: number,
  manifoldGaugePa: number,
  compressorGaugePa: number,
): TargetTrial {
  const ambientPa = rig.ambient.pressurePa
  const compressorPa = ambientPa + compressorGaugePa
  const required = total + rig.firstMassFlow
  const delivered = deliveryAt(rig.delivery, compressorPa)
  const fullLoad = fullLoadDeliveryAt(rig.delivery, compressorPa)
  const airMargin = (delivered - required) / fullLoad
  const isShort = airMargin < -marginSlack
  const unloadPa = rig.delivery.pressuresPa[rig.delivery.pressuresPa.length - 1]!
  const shortReason = compressorPa >= unloadPa ? 'above-unload' : 'short-of-air'
  return {
    atTarget: {
      requiredMassFlow: required,
      requiredCompressorPressurePa: compressorPa,
      manifoldPressurePa: ambientPa + manifoldGaugePa,
      deliveredMassFlow: delivered,
      fullLoadMassFlow: fullLoad,
      airMargin,
    },
    reason: isShort ? shortReason : null,
    obstacle: isShort ? 'air' : null,
    excess: -airMargin,
  }
}

/**
 * A manifold pressure from which the air line is open, between a closed one and the open one of the balance, so that
 * the verdict agrees with the operating point; all Pa gauge.
 */
function openAirLine(
  rig: PreparedRig,
  closedGaugePa: number,
  openGaugePa: number,
  flows: OutletFlows,
): number {
  const ambientPa = rig.ambient.pressurePa
  const march = startMarch()
  let earlierGauge = openGaugePa
  let earlierSlack = NaN
  const slackAt = (gauge: number) => {
    restartMarch(march, gauge)
    marchBack(rig.airLine, feedOutlets(rig, gauge, flows), ambientPa, march)
    return 1 - march.tightness
  }
  return findRoot({
    evaluate: slackAt,
    propose(gauge, slack) {
      const next = gauge - (slack * (gauge - earlierGauge)) / (slack - earlierSlack)
      earlierGauge = gauge
      earlierSlack = slack
      return next
    },
    low: closedGaugePa,
    high: openGaugePa,
    guess: (closedGaugePa + openGaugePa) / 2,
    widthTolerance: 1e-9,
    residualTolerance: 1e-8,
    zeroTolerance: 0,
    offset: ambientPa,
  }).high
}

/** The check of a rig already prepared; see checkPressure. */
export function checkPrepared(rig: PreparedRig, targetGaugePa: number): PressureCheck {
  const { operatingPoint, reason } = solvePrepared(rig)
  if (reason === 'air-taken-first' || reason === 'no-nozzle') {
    return { verdict: 'cannot-run', operatingPoint, atTarget: null, reason, obstacle: 'air' }
  }
  const target = requireTarget(rig, targetGaugePa)
  const isReached = target.atTarget !== null && target.reason === null
  const isSafe = isReached && target.atTarget!.airMargin >= safeAirMargin
  return {
    verdict: isSafe ? 'holds' : isReached ? 'barely-holds' : 'falls-short',
    operatingPoint,
    atTarget: target.atTarget,
    reason: target.reason,
    obstacle: target.obstacle,
  }
}

/**
 * Will this rig hold that nozzle pressure?
 *
 *   Holds         air margin ≥ 5 %
 *   Barely holds  0 to 5 %
 *   Falls short   below 0, or at unload and above, or a regulator or a choked element in the way
 *   Can't run     air taken first is all that is delivered, or more; or there is no nozzle
 *
 * Inputs   rig and site (SI) · target nozzle pressure Pa absolute; below the site's it is taken as the site's
 * Result   verdict, the operating point, the state at the target and the reason when it is not reached
 * Errors   none for input in the declared ranges        Checked  tests/shared/airflow/laws.test.ts
 */
export function checkPressure(rig: Rig, site: Site, targetNozzlePressurePa: number): PressureCheck {
  const prepared = prepareRig(rig, site)
  return checkPrepared(prepared, Math.max(0, targetNozzlePressurePa - prepared.ambient.pressurePa))
}
