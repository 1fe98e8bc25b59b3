import { massFlowAtGauge } from './nozzle.ts'
import type { Reason } from './operatingPoint.ts'
import { requireTarget } from './pressureCheck.ts'
import type { TargetTrial } from './pressureCheck.ts'
import { prepareRig } from './preparedRig.ts'
import type { PreparedOutlet, PreparedRig } from './preparedRig.ts'
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

/** A bore squared that was tried, m², and how far past the edge it was. */
interface Trial {
  square: number
  excess: number
}

function edgeOfChord(a: Trial, b: Trial): number {
  return (a.square * b.excess - b.square * a.excess) / (b.excess - a.excess)
}

/**
 * Where three bores behind a choke point to: the square of the bore is a parabola of how far the air line is from its
 * choke, which is the root of the excess. A held flow makes the parabola, one that goes with the pressure the straight
 * line.
 */
function edgeOfChoke(reached: Trial[]): number {
  const [a, b, c] = reached.map(({ square, excess }) => ({ square, slack: Math.sqrt(-excess) }))
  const ab = (a!.square * b!.slack - b!.square * a!.slack) / (b!.slack - a!.slack)
  const bc = (b!.square * c!.slack - c!.square * b!.slack) / (c!.slack - b!.slack)
  return (ab * c!.slack - bc * a!.slack) / (c!.slack - a!.slack)
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
  const requireAt = (square: number): TargetTrial => {
    nozzle.conductance = perSquare * square
    return requireTarget(trial, targetGaugePa, false)
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
  // the air that the other nozzles and the air taken first leave at the target
  let left = rig.openMassFlow - rig.firstMassFlow
  rig.outlets.forEach((other, i) => {
    if (i !== outletIndex) left -= massFlowAtGauge(other.nozzle, targetGaugePa)
  })
  const behindChoke: Trial[] = []
  let isBehindChoke = false
  let earlier: Trial = { square: smallestBoreM ** 2, excess: least.excess }
  let missed: Trial | null = null
  let ahead = Infinity
  const root = findRoot({
    evaluate(square) {
      const { obstacle, reason, excess } = requireAt(square)
      isBehindChoke = obstacle === 'air-line' && reason === null
      return excess
    },
    propose(square, excess) {
      const trial = { square, excess }
      const earlierMiss = missed
      if (excess >= 0) missed = trial
      // past the edge of an obstacle that begins with a jump: where the bores within it pointed, or the ones past it
      if (square > earlier.square && excess > -earlier.excess) {
        if (ahead < square) return ahead
        return earlierMiss ? edgeOfChord(earlierMiss, trial) : NaN
      }
      let next = edgeOfChord(earlier, trial)
      if (isBehindChoke && behindChoke.push(trial) > 2) next = edgeOfChoke(behindChoke.slice(-3))
      if (excess < 0) ahead = next
      earlier = trial
      return next
    },
    low: smallestBoreM ** 2,
    high: most ** 2,
    guess: (left * most ** 2) / massFlowAtGauge(nozzle, targetGaugePa),
    widthTolerance: 1e-10,
    // where an obstacle begins the excess may jump, or begin at nothing: the bracket alone tells
    residualTolerance: Infinity,
    zeroTolerance: -1,
  })
  const square = requireAt(root.high).reason === null ? root.high : root.low
  return {
    boreM: Math.sqrt(square),
    limitedBy: requireAt(square * (1 + 4e-9)).obstacle ?? 'air',
    reason: null,
  }
}

function areAlike(a: PreparedOutlet, b: PreparedOutlet): boolean {
  return (
    a.boreM === b.boreM &&
    a.nozzle.conductance === b.nozzle.conductance &&
    a.regulatorGaugePa === b.regulatorGaugePa &&
    a.line.length === b.line.length &&
    a.line.every((element, i) => {
      const { insideDiameterM, relativeRoughness, lengthRatio, lossK } = b.line[i]!
      return (
        element.insideDiameterM === insideDiameterM &&
        element.relativeRoughness === relativeRoughness &&
        element.lengthRatio === lengthRatio &&
        element.lossK === lossK
      )
    })
  )
}

/** The limit bore of every outlet. Outlets that are alike have one, and it is searched once; reasons name their own. */
export function limitBoresPrepared(rig: PreparedRig, targetGaugePa: number): LimitBore[] {
  const limits: LimitBore[] = []
  rig.outlets.forEach((outlet, i) => {
    const twin = limits[rig.outlets.findIndex((other) => areAlike(other, outlet))]
    limits.push(twin && twin.boreM !== null ? twin : limitBorePrepared(rig, targetGaugePa, i))
  })
  return limits
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
  const targetGaugePa = Math.max(0, targetNozzlePressurePa - prepared.ambient.pressurePa)
  return limitBorePrepared(prepared, targetGaugePa, outletIndex)
}
