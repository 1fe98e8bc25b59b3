import { deliveryAt, fullLoadDeliveryAt } from './compressor.ts'
import { findChokedElement, gaugeBeforeLine } from './line.ts'
import { gaugeAtMassFlow, massFlowAtGauge } from './nozzle.ts'
import { chokedManifoldReason, outletFlows, solvePrepared } from './operatingPoint.ts'
import type { OperatingPoint, Reason } from './operatingPoint.ts'
import { entryGauge, prepareRig } from './preparedRig.ts'
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
 * air line is choked at that pressure and a regulator holds some outlet, the smallest higher pressure at which it
 * opens is taken.
 *
 *   air margin = (S − N) / D
 *   N  nozzles + air taken first,  S  delivery at the compressor pressure this needs,  D  full-load delivery there
 *
 * Inputs   rig, prepared · target Pa gauge, positive
 */
export function requireTarget(rig: PreparedRig, targetGaugePa: number): TargetResult {
  const ambientPa = rig.ambient.pressurePa
  let manifoldGauge = 0
  const flows: number[] = []
  for (let i = 0; i < rig.outlets.length; i++) {
    const outlet = rig.outlets[i]!
    const flow = massFlowAtGauge(outlet.nozzle, targetGaugePa)
    const entry = entryGauge(outlet, flow)
    if (Number.isNaN(entry)) {
      const nozzleGauge = gaugeAtMassFlow(outlet.nozzle, flow)
      const element = findChokedElement(outlet.line, flow, nozzleGauge, ambientPa)!
      return { atTarget: null, reason: `choked:${element.name}`, obstacle: 'line' }
    }
    if (entry > outlet.regulatorGaugePa * (1 + 1e-12)) {
      return { atTarget: null, reason: `regulator:${i + 1}`, obstacle: 'regulator' }
    }
    flows.push(flow)
    manifoldGauge = Math.max(manifoldGauge, entry)
  }
  let total = rig.outlets.length === 1 ? flows[0]! : outletFlows(rig, manifoldGauge, flows)
  if (Number.isNaN(total)) {
    return { atTarget: null, reason: chokedManifoldReason(rig, manifoldGauge), obstacle: 'line' }
  }
  let compressorGauge = gaugeBeforeLine(rig.airLine, total, manifoldGauge, ambientPa)
  if (Number.isNaN(compressorGauge)) {
    const opened = openAirLine(rig, manifoldGauge, flows)
    if (opened === null) {
      const element = findChokedElement(rig.airLine, total, manifoldGauge, ambientPa)!
      return { atTarget: null, reason: `choked:${element.name}`, obstacle: 'air-line' }
    }
    manifoldGauge = opened
    total = outletFlows(rig, manifoldGauge, flows)
    compressorGauge = gaugeBeforeLine(rig.airLine, total, manifoldGauge, ambientPa)
  }
  const compressorPa = ambientPa + compressorGauge
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
    obstacle: isShort ? 'air' : null,
  }
}

/** The smallest manifold pressure over a closed one at which held regulators let the air line pass, Pa gauge, or null. */
function openAirLine(rig: PreparedRig, closedGaugePa: number, flows: number[]): number | null {
  const ambientPa = rig.ambient.pressurePa
  const isOpen = (gauge: number) =>
    !Number.isNaN(gaugeBeforeLine(rig.airLine, outletFlows(rig, gauge, flows), gauge, ambientPa))
  if (!rig.outlets.some((outlet) => outlet.regulatorGaugePa < Infinity)) return null
  let closed = closedGaugePa
  let open = rig.delivery.pressuresPa[rig.delivery.pressuresPa.length - 1]! - ambientPa
  if (open <= closed || !isOpen(open)) return null
  for (let step = 0; step < 60; step++) {
    const middle = (open + closed) / 2
    if (isOpen(middle)) open = middle
    else closed = middle
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
