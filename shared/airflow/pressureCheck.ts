import { deliveryAt, fullLoadDeliveryAt } from './compressor.ts'
import { findChokedElement, marchBack } from './line.ts'
import type { LineFlow, March } from './line.ts'
import { massFlowAtGauge } from './nozzle.ts'
import { findOutletsChoke, outletFlows, solvePrepared } from './operatingPoint.ts'
import type { OperatingPoint, Reason } from './operatingPoint.ts'
import { prepareRig } from './preparedRig.ts'
import type { PreparedRig } from './preparedRig.ts'
import type { Rig, Site } from './rig.ts'

export type Verdict = 'holds' | 'barely-holds' | 'falls-short' | 'cannot-run'

/** Air margin from which a rig holds without a doubt: about the uncertainty of the gauges and of the nameplate. */
export const safeAirMargin = 0.05
/** of full-load delivery: what the operating point's own tolerance leaves */
const marginSlack = 1e-9

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
 * Inputs   rig, prepared · target Pa gauge, positive
 */
export function requireTarget(rig: PreparedRig, targetGaugePa: number): TargetResult {
  const ambientPa = rig.ambient.pressurePa
  const march: March = { gaugePa: 0, choked: null }
  const flows: number[] = []
  let manifoldGauge = 0
  for (let i = 0; i < rig.outlets.length; i++) {
    const outlet = rig.outlets[i]!
    const flow = massFlowAtGauge(outlet.nozzle, targetGaugePa)
    march.gaugePa = targetGaugePa
    marchBack(outlet.line, flow, ambientPa, march)
    if (march.choked) return closedAt(march.choked, 'line')
    if (march.gaugePa > outlet.regulatorGaugePa * (1 + 1e-12)) {
      return { atTarget: null, reason: `regulator:${i + 1}`, obstacle: 'regulator' }
    }
    flows.push(flow)
    manifoldGauge = Math.max(manifoldGauge, march.gaugePa)
  }
  let total = flows[0]!
  if (rig.outlets.length > 1) {
    total = outletFlows(rig, manifoldGauge, flows)
    const choked = findOutletsChoke(rig, flows)
    if (choked) return closedAt(choked, 'line')
  }
  march.gaugePa = manifoldGauge
  marchBack(rig.airLine, total, ambientPa, march)
  const isOpenedHigher = march.choked !== null
  if (march.choked) {
    const opened = openAirLine(rig, manifoldGauge, flows)
    if (opened === null) return closedAt(march.choked, 'air-line')
    manifoldGauge = opened
    total = outletFlows(rig, manifoldGauge, flows)
    march.gaugePa = manifoldGauge
    marchBack(rig.airLine, total, ambientPa, march)
  }
  const compressorPa = ambientPa + march.gaugePa
  const required = total + rig.firstMassFlow
  const delivered = deliveryAt(rig.delivery, compressorPa)
  const fullLoad = fullLoadDeliveryAt(rig.delivery, compressorPa)
  const isShort = delivered - required < -marginSlack * fullLoad
  const unloadPa = rig.delivery.pressuresPa[rig.delivery.pressuresPa.length - 1]!
  const shortReason = compressorPa >= unloadPa ? 'above-unload' : 'short-of-air'
  return {
    atTarget: {
      requiredMassFlow: required,
      requiredCompressorPressurePa: compressorPa,
      manifoldPressurePa: ambientPa + manifoldGauge,
      deliveredMassFlow: delivered,
      fullLoadMassFlow: fullLoad,
      airMargin: (delivered - required) / fullLoad,
    },
    reason: isShort ? shortReason : null,
    obstacle: isOpenedHigher ? 'air-line' : isShort ? 'air' : null,
  }
}

function closedAt(element: LineFlow, obstacle: 'line' | 'air-line'): TargetResult {
  return { atTarget: null, reason: `choked:${element.name}`, obstacle }
}

/**
 * A manifold pressure over a closed one from which the air line is open, Pa gauge: between the closed one and the
 * operating point, so that the verdict agrees with it; null when the rig does not run above the closed pressure.
 */
function openAirLine(rig: PreparedRig, closedGaugePa: number, flows: number[]): number | null {
  const ambientPa = rig.ambient.pressurePa
  const { operatingPoint } = solvePrepared(rig)
  let closed = closedGaugePa
  let open = operatingPoint ? operatingPoint.manifoldPressurePa - ambientPa : 0
  if (open <= closed) return null
  while (open - closed > 1e-10 * (ambientPa + open)) {
    const middle = (open + closed) / 2
    if (findChokedElement(rig.airLine, outletFlows(rig, middle, flows), middle, ambientPa)) closed = middle
    else open = middle
  }
  return open
}

/** The check of a rig already prepared; see checkPressure. */
export function checkPrepared(rig: PreparedRig, targetGaugePa: number): PressureCheck {
  const { operatingPoint, reason } = solvePrepared(rig)
  if (reason === 'air-taken-first') {
    return { verdict: 'cannot-run', operatingPoint, atTarget: null, reason, obstacle: 'air' }
  }
  const target = requireTarget(rig, targetGaugePa)
  const isReached = target.atTarget !== null && target.reason === null
  const isSafe = isReached && target.atTarget!.airMargin >= safeAirMargin
  return {
    ...target,
    verdict: isSafe ? 'holds' : isReached ? 'barely-holds' : 'falls-short',
    operatingPoint,
  }
}

/**
 * Will this rig hold that nozzle pressure?
 *
 *   Holds         air margin ≥ 5 %
 *   Barely holds  0 to 5 %
 *   Falls short   below 0, or at unload and above, or a regulator or a choked element in the way
 *   Can't run     air taken first is all that is delivered, or more
 *
 * Inputs   rig and site (SI) · target nozzle pressure Pa absolute, above the site's pressure
 * Result   verdict, the operating point, the state at the target and the reason when it is not reached
 * Errors   none for input in the declared ranges        Checked  tests/shared/airflow/laws.test.ts
 */
export function checkPressure(rig: Rig, site: Site, targetNozzlePressurePa: number): PressureCheck {
  const prepared = prepareRig(rig, site)
  return checkPrepared(prepared, targetNozzlePressurePa - prepared.ambient.pressurePa)
}
