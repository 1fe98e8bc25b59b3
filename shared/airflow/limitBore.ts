import { massFlowAtGauge } from './nozzle.ts'
import type { Reason } from './operatingPoint.ts'
import { requireTarget } from './pressureCheck.ts'
import type { TargetResult } from './pressureCheck.ts'
import { prepareRig } from './preparedRig.ts'
import type { PreparedRig } from './preparedRig.ts'
import type { Rig, Site } from './rig.ts'
import { findRoot } from './rootFinding.ts'

export const smallestBoreM = 0.001
export const largestBoreM = 0.06
/** 95 %: discharge coefficient 3 % and free air 2.5 %, one standard deviation each; bore goes with the root of both. */
export const limitBoreUncertainty = 0.04

export interface LimitBore {
  /** m; null when no bore of 1 mm or more reaches the target */
  boreM: number | null
  /** what stops a larger bore; null where the range of bores ends first */
  limitedBy: 'air' | 'line' | 'regulator' | 'air-line' | null
  reason: Reason | null
}

/** The limit bore of a rig already prepared; see limitBore. */
export function limitBorePrepared(rig: PreparedRig, targetGaugePa: number, outletIndex: number): LimitBore {
  if (rig.firstMassFlow >= rig.openMassFlow)
    return { boreM: null, limitedBy: 'air', reason: 'air-taken-first' }
  const outlet = rig.outlets[outletIndex]!
  const nozzle = { ...outlet.nozzle }
  const trial: PreparedRig = {
    ...rig,
    outlets: rig.outlets.map((other, i) => (i === outletIndex ? { ...outlet, nozzle } : other)),
  }
  const perSquare = outlet.nozzle.conductance / outlet.boreM ** 2
  const requireAt = (square: number): TargetResult => {
    nozzle.conductance = perSquare * square
    return requireTarget(trial, targetGaugePa)
  }
  const narrowest = outlet.line.reduce((least, element) => Math.min(least, element.insideDiameterM), Infinity)
  const most = Math.min(largestBoreM, narrowest)
  const least = requireAt(smallestBoreM ** 2)
  if (least.reason) return { boreM: null, limitedBy: least.obstacle, reason: least.reason }
  if (requireAt(most ** 2).reason === null) {
    return most === narrowest
      ? { boreM: most, limitedBy: 'line', reason: null }
      : { boreM: most, limitedBy: null, reason: 'bore-range' }
  }
  let earlierSquare = smallestBoreM ** 2
  let earlierShortage = -least.atTarget!.airMargin
  const root = findRoot({
    evaluate: (square) => -(requireAt(square).atTarget?.airMargin ?? NaN),
    propose(square, shortage) {
      const next = square - (shortage * (square - earlierSquare)) / (shortage - earlierShortage)
      earlierSquare = square
      earlierShortage = shortage
      return next
    },
    low: smallestBoreM ** 2,
    high: most ** 2,
    guess: (rig.openMassFlow - rig.firstMassFlow) / (massFlowAtGauge(nozzle, targetGaugePa) / most ** 2),
    widthTolerance: 1e-10,
    residualTolerance: 1e-9,
    zeroTolerance: 1e-14,
  })
  if (root.isMet) {
    return { boreM: Math.sqrt(root.x), limitedBy: requireAt(root.x).obstacle ?? 'air', reason: null }
  }
  return { boreM: Math.sqrt(root.low), limitedBy: requireAt(root.high).obstacle, reason: null }
}

/**
 * The largest bore of one outlet at which the rig still reaches its target, the other outlets as they are.
 *
 * At that bore the lowest nozzle pressure of the rig equals the target. Its uncertainty is about ±4 % (95 %), a quarter
 * of a sixteenth at No. 6.
 *
 * Inputs   rig and site (SI) · target Pa absolute · which outlet
 * Result   m, capped by the smallest bore of the outlet's own line, by its regulator, by a choke, or by 60 mm; null with
 *          the reason when no bore of 1 mm or more reaches the target
 * Errors   none for input in the declared ranges        Checked  tests/shared/airflow/laws.test.ts
 */
export function limitBore(
  rig: Rig,
  site: Site,
  targetNozzlePressurePa: number,
  outletIndex: number,
): LimitBore {
  const prepared = prepareRig(rig, site)
  return limitBorePrepared(prepared, targetNozzlePressurePa - prepared.ambient.pressurePa, outletIndex)
}
