import type { NozzleRecord } from '../contracts/nozzles.ts'
import type { BoreCheck } from '../contracts/work.ts'
import { applicationDrift, forecastWear, ratePriorOf } from '../wear/index.ts'
import type { Quantiles, WearForecast, WearHistory, WearQuestion } from '../wear/index.ts'
import { boundsOf, checksOf, findDoubts, wearCheckOf } from './checksOfNozzle.ts'
import type { CheckDoubt, DatedCheck } from './checksOfNozzle.ts'
import type { History } from './history.ts'
import { linerIdOf, weeklyHoursOf } from './hours.ts'
import type { BlastConditions, CountedShift, NozzleHours, ShiftNote } from './hours.ts'
import { dayMs, localDateOf, offsetMinutesOf, startOfDay } from './instants.ts'

export type WearNote =
  | ShiftNote
  /** nobody knows the liner: tungsten carbide, with a wide range */
  | 'liner-not-known'
  /** the life table has no row for the liner or no column for a medium: the nearest by hardness */
  | 'no-data'
  /** nobody knows how long it had blasted: it counts from its first check */
  | 'counted-from-first-check'
  /** bits read an oval bore small: measure with a taper gauge, or by the needle gauge */
  | 'oval'

/** What is asked of the forecast but the limit bore, which the rig, the compressor and the site give. */
export type WearCase = Omit<WearQuestion, 'limitBoreMm'> & WearHistory

interface Asked {
  /** in order; what they say counts also where nothing can be forecast */
  checks: DatedCheck[]
  doubts: CheckDoubt[]
  notes: WearNote[]
  /** equivalent hours and hours by the clock, by the end of today */
  equivalentHoursNow: number
  blastHoursNow: number
}

export type WearAsked =
  /** baselineHalfWidthMm: how well the bore that the question begins with is known; 0 for a new bore */
  | (Asked & { kind: 'question'; question: WearCase; baselineHalfWidthMm: number })
  /** nothing can be forecast before somebody says or measures this */
  | (Asked & { kind: 'ask'; ask: 'new-bore' | 'first-check' })
  /** cracked: it is retired, whatever the bit says */
  | (Asked & { kind: 'retire'; because: 'cracked'; checkId: string })

const sixteenthMm = 25.4 / 16

/**
 * The bore at a check by that check alone: its middle and half its width, mm. What went through says the bore to be at
 * most a sixteenth larger where nothing was refused; what did not, that it is between that and the new bore.
 */
function baselineOf(
  { check }: DatedCheck,
  newBoreMm: number,
): { boreMm: number; halfWidthMm: number } | null {
  const { lowMm, highMm } = boundsOf(check)
  if (lowMm === null && highMm === null) return null
  const low = Math.max(newBoreMm, lowMm ?? newBoreMm)
  const high = Math.max(low, highMm ?? low + sixteenthMm)
  return { boreMm: (low + high) / 2, halfWidthMm: Math.max((high - low) / 2, check.accuracyMm ?? 0) }
}

/**
 * What the records say of a nozzle's wear, as the question that `forecastWear` answers.
 *
 * Where the hours before the first shift are not known, the question begins at the first check: with the bore that was
 * measured then, its half-width beside it, and the hours since.
 *
 * Inputs   the nozzle · the history · the shifts that count · its hours · the checks that count · now, an instant with its offset
 * Result   the question; or what to ask for; or that a crack retires it. What today's shifts add counts until midnight.
 * Ignores  needle-gauge readings
 * Source   shared/wear: common practice, no source
 * Checked  tests/shared/work/question.test.ts
 */
export function wearQuestionOf(
  nozzle: Pick<NozzleRecord, 'id' | 'liner' | 'newBoreMm' | 'hoursBefore'>,
  facts: {
    history: History
    counted: readonly CountedShift[]
    hours: NozzleHours
    /** all that `countChecks` counted */
    checks: readonly BoreCheck[]
    conditions: BlastConditions
  },
  now: string,
): WearAsked {
  const { history, counted, hours, conditions } = facts
  const checks = checksOf(nozzle.id, facts.checks, hours)
  const endOfToday = startOfDay(localDateOf(now), offsetMinutesOf(now)) + dayMs - 1
  const { equivalentHours: equivalentHoursNow, blastHours: blastHoursNow } = hours.at(endOfToday)
  const found = ratePriorOf(linerIdOf(nozzle.liner), {
    medias: hours.shifts.map(({ media }) => media),
    ...(conditions.lives === undefined ? {} : { lives: conditions.lives }),
  })
  const notes = new Set<WearNote>(hours.shifts.flatMap((shift) => shift.notes))
  if (nozzle.liner === null) notes.add('liner-not-known')
  if (!found.hasData) notes.add('no-data')
  if (checks.at(-1)?.check.looksOval) notes.add('oval')
  const asked = (): Asked => ({
    checks,
    doubts: findDoubts(checks, nozzle.newBoreMm, history),
    notes: [...notes].sort(),
    equivalentHoursNow,
    blastHoursNow,
  })

  const cracked = checks.find(({ check }) => check.isCracked)
  if (cracked) return { kind: 'retire', because: 'cracked', checkId: cracked.check.id, ...asked() }
  if (nozzle.newBoreMm === null) return { kind: 'ask', ask: 'new-bore', ...asked() }

  const state = history.nozzles.get(nozzle.id)?.state
  const place = state?.kind === 'in-service' ? state : null
  const base = {
    rate: {
      medianMmPerHour: found.medianMmPerHour,
      logSigma: nozzle.liner === null ? Math.max(1, found.logSigma) : found.logSigma,
    },
    drift: applicationDrift,
    equivalentHoursPerWeek: weeklyHoursOf(nozzle, place, counted, conditions, endOfToday),
  }
  const wearChecks = checks.flatMap((check) => wearCheckOf(check) ?? [])
  if (hours.isHoursBeforeKnown) {
    const question = { ...base, newBoreMm: nozzle.newBoreMm, checks: wearChecks, equivalentHoursNow }
    return { kind: 'question', question, baselineHalfWidthMm: 0, ...asked() }
  }
  const { newBoreMm } = nozzle
  const firstIndex = checks.findIndex((check) => baselineOf(check, newBoreMm) !== null)
  const first = checks[firstIndex]
  if (!first) return { kind: 'ask', ask: 'first-check', ...asked() }
  notes.add('counted-from-first-check')
  const { boreMm, halfWidthMm } = baselineOf(first, newBoreMm)!
  const since = (equivalentHours: number) => Math.max(0, equivalentHours - first.equivalentHours)
  const question: WearCase = {
    ...base,
    newBoreMm: boreMm,
    checks: checks
      .slice(firstIndex + 1)
      .flatMap((check) => wearCheckOf({ ...check, equivalentHours: since(check.equivalentHours) }) ?? []),
    equivalentHoursNow: since(equivalentHoursNow),
  }
  return { kind: 'question', question, baselineHalfWidthMm: halfWidthMm, ...asked() }
}

/**
 * The forecast of a question against a limit bore.
 *
 * Result   `forecastWear`; where the bore it begins with is not known for sure, the widest range of the two ends and the
 *          middle, so at least 80 %
 * Checked  tests/shared/work/question.test.ts
 */
export function forecastOf(
  { question, baselineHalfWidthMm }: { question: WearCase; baselineHalfWidthMm: number },
  limitBoreMm: number,
): WearForecast {
  const at = (offMm: number) =>
    forecastWear({ ...question, newBoreMm: question.newBoreMm + offMm, limitBoreMm })
  const middle = at(0)
  if (baselineHalfWidthMm === 0) return middle
  const all = [at(-baselineHalfWidthMm), middle, at(baselineHalfWidthMm)]
  const widest = (find: (forecast: WearForecast) => Quantiles): Quantiles => ({
    p10: Math.min(...all.map((forecast) => find(forecast).p10)),
    p50: find(middle).p50,
    p90: Math.max(...all.map((forecast) => find(forecast).p90)),
  })
  return {
    boreNowMm: widest(({ boreNowMm }) => boreNowMm),
    hoursToLimit: widest(({ hoursToLimit }) => hoursToLimit),
    weeksToLimit: middle.weeksToLimit && widest(({ weeksToLimit }) => weeksToLimit!),
    contradictsPrior: all.every(({ contradictsPrior }) => contradictsPrior),
  }
}
