import type { BoreCheck } from '../contracts/work.ts'
import { defaultBitFeelMm } from '../wear/index.ts'
import type { BoreCheck as WearCheck } from '../wear/index.ts'
import type { History } from './history.ts'
import type { NozzleHours } from './hours.ts'
import { millisecondsOf, sortMade } from './instants.ts'
import { dropSuperseded } from './supersede.ts'

/** A check that counts, with the hours its nozzle had by then. */
export interface DatedCheck {
  check: BoreCheck
  equivalentHours: number
  blastHours: number
}

/** The checks that count, of all nozzles, in order; a correction may be of another nozzle than what it corrects. */
export function countChecks(checks: readonly BoreCheck[]): BoreCheck[] {
  return sortMade(dropSuperseded(checks).map(({ current }) => current))
}

/** Those of one nozzle, with its hours. */
export function checksOf(nozzleId: string, counted: readonly BoreCheck[], hours: NozzleHours): DatedCheck[] {
  return counted
    .filter((check) => check.nozzleId === nozzleId)
    .map((check) => ({ check, ...hours.at(millisecondsOf(check.at)) }))
}

/** mm, a bore that is known to lie between two; null: no bound */
export interface BoreBounds {
  lowMm: number | null
  highMm: number | null
}

/**
 * Between what a check says the bore to be, the feel of a bit and the ± of a gauge left out.
 *
 * A bit or a pin that feels the narrowest of an oval says how small the bore is at least, and not how large: air sees
 * its area. So of an oval only what went through counts.
 */
export function boundsOf({ method, passedMm, refusedMm, boreMm, looksOval }: FeltOrRead): BoreBounds {
  if (method === 'bits') return { lowMm: passedMm, highMm: looksOval ? null : refusedMm }
  return { lowMm: boreMm, highMm: looksOval && method === 'pin' ? null : boreMm }
}

export type FeltOrRead = Pick<BoreCheck, 'method' | 'passedMm' | 'refusedMm' | 'boreMm' | 'looksOval'>

/** A check as the forecast weighs it; null where it says nothing. */
export function wearCheckOf({ check, equivalentHours }: DatedCheck): WearCheck | null {
  const { lowMm, highMm } = boundsOf(check)
  if (check.method !== 'bits' && highMm !== null && check.accuracyMm !== null) {
    return { kind: 'gauge', equivalentHours, boreMm: highMm, accuracyMm: check.accuracyMm }
  }
  if (lowMm === null && highMm === null) return null
  return { kind: 'bits', equivalentHours, passedMm: lowMm, refusedMm: highMm }
}

/** What a check says that the rest of the history does not. It is kept, and questioned. */
export interface CheckDoubt {
  code:
    /** a later check says the bore to be smaller */
    | 'shrank'
    /** the bore is said to be smaller than new */
    | 'under-new-bore'
    /** it was measured on a rig where, by the history, the nozzle was not */
    | 'mounted-elsewhere'
  checkId: string
  /** the check it does not go with */
  otherCheckId: string | null
  /** how far apart the two say the bore to be, or how far it is under new; null where it is not about a bore */
  byMm: number | null
}

const mostFeels = 3
const halfWidth95 = 1.96

const deviationOf = ({ method, accuracyMm }: BoreCheck) =>
  method === 'bits' || accuracyMm === null ? defaultBitFeelMm : accuracyMm / halfWidth95

/**
 * Which checks do not go with the new bore, with an earlier check or with where the nozzle was.
 *
 * A bore does not shrink: what one check says it had at least, less what a later one says it has at most, is over three
 * standard deviations of the two together. Each check is held against the earlier one it is furthest from.
 *
 * Inputs   the nozzle's checks in order · its new bore mm, null where nobody knows · the history
 * Result   in order of the checks
 * Source   three deviations: a choice of our own
 * Checked  tests/shared/work/question.test.ts
 */
export function findDoubts(
  checks: readonly DatedCheck[],
  newBoreMm: number | null,
  history: History,
): CheckDoubt[] {
  const doubts: CheckDoubt[] = []
  checks.forEach(({ check }, index) => {
    const { highMm } = boundsOf(check)
    const deviation = deviationOf(check)
    if (highMm !== null) {
      const underMm = newBoreMm === null ? 0 : newBoreMm - highMm
      if (underMm > mostFeels * deviation) {
        doubts.push({ code: 'under-new-bore', checkId: check.id, otherCheckId: null, byMm: underMm })
      }
      let furthest: { excess: number; id: string; byMm: number } | null = null
      for (const earlier of checks.slice(0, index)) {
        const { lowMm } = boundsOf(earlier.check)
        if (lowMm === null) continue
        const byMm = lowMm - highMm
        const excess = byMm - mostFeels * Math.hypot(deviation, deviationOf(earlier.check))
        if (excess > (furthest?.excess ?? 0)) furthest = { excess, id: earlier.check.id, byMm }
      }
      if (furthest) {
        doubts.push({ code: 'shrank', checkId: check.id, otherCheckId: furthest.id, byMm: furthest.byMm })
      }
    }
    if (check.rigId !== null && !wasOn(check, check.rigId, history)) {
      doubts.push({ code: 'mounted-elsewhere', checkId: check.id, otherCheckId: null, byMm: null })
    }
  })
  return doubts
}

/** On that rig when it was measured; or on none, and it was only lying in its box. */
function wasOn({ nozzleId, at }: BoreCheck, rigId: string, history: History): boolean {
  const instant = millisecondsOf(at)
  const mount = history.nozzles
    .get(nozzleId)
    ?.mounts.find(({ fromMs, untilMs }) => fromMs <= instant && instant < untilMs)
  return mount === undefined || mount.rigId === rigId
}

/** By how much a check is off the bore that was expected; 0 where it may be just that. */
export function offBy(check: FeltOrRead, expectedBoreMm: number): number {
  const { lowMm, highMm } = boundsOf(check)
  if (lowMm !== null && lowMm > expectedBoreMm) return lowMm - expectedBoreMm
  if (highMm !== null && highMm < expectedBoreMm) return highMm - expectedBoreMm
  return 0
}

const thirtySecondMm = 25.4 / 32

/** Whether to ask "is this T-14?": the check is off the bore that was expected by over 1/32 in. */
export function isPerhapsAnother(check: FeltOrRead, expectedBoreMm: number): boolean {
  return Math.abs(offBy(check, expectedBoreMm)) > thirtySecondMm + 1e-9
}
