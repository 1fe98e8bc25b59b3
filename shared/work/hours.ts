import { LIFE_MEDIA_MOHS, MEDIA_HARDNESS } from '../catalogue/liners.ts'
import type { LinerId, LinerLife } from '../catalogue/liners.ts'
import type { AbrasiveId } from '../catalogue/media.ts'
import { maxOutlets } from '../contracts/limits.ts'
import type { MediumRecord } from '../contracts/media.ts'
import type { Liner, NozzleRecord } from '../contracts/nozzles.ts'
import type { Shift, Work } from '../contracts/work.ts'
import { KPA_PER_PSI } from '../units/quantities.ts'
import { severityOf } from '../wear/index.ts'
import type { WearMedia } from '../wear/index.ts'
import { outletKey } from './history.ts'
import type { History } from './history.ts'
import {
  compareText,
  dayMs,
  hourMs,
  localDateOf,
  millisecondsOf,
  offsetMinutesOf,
  startOfDay,
} from './instants.ts'
import { dropSuperseded } from './supersede.ts'

/** A shift on one outlet and the moment it is counted at. */
export interface CountedShift {
  shift: Shift
  outletIndex: number
  /** the nozzle that was there */
  nozzleId: string
  countedAtMs: number
}

const noonMs = 12 * hourMs

/**
 * The nozzles that a shift wore, and the moment it counts at on each outlet.
 *
 * The moment is noon of its day on the clock of whoever wrote it first, or when that was written, if it was written
 * earlier that same day. Where nothing sat on the outlet then, what was mounted first on the rest of that day did it.
 *
 * Ignores  a swap during the shift: all of its hours go to one nozzle
 */
function placeShift(current: Shift, first: Shift, history: History): CountedShift[] {
  const start = startOfDay(current.localDate, offsetMinutesOf(first.at))
  const isSameDay = localDateOf(first.at) === current.localDate
  const moment = isSameDay ? Math.min(start + noonMs, millisecondsOf(first.at)) : start + noonMs
  const counted: CountedShift[] = []
  for (let outletIndex = 0; outletIndex < maxOutlets; outletIndex++) {
    const mounts = history.outlets.get(outletKey(current.rigId, outletIndex))
    const mount = mounts?.find(({ untilMs }) => untilMs > moment)
    if (!mount || mount.fromMs >= start + dayMs) continue
    counted.push({
      shift: current,
      outletIndex,
      nozzleId: mount.nozzleId,
      countedAtMs: Math.max(moment, mount.fromMs),
    })
  }
  return counted
}

/**
 * The shifts that count, on each nozzle that was blasting in them.
 *
 * Inputs   shifts in any order, corrections among them · the history of the nozzles
 * Result   by nozzle, in order of the moment they count at; a shift on two outlets is there twice, with all its hours
 * Errors   none        Checked  tests/shared/work/hours.test.ts
 */
export function countShifts(shifts: Work['shifts'], history: History): CountedShift[] {
  return dropSuperseded(shifts)
    .flatMap(({ current, first }) => placeShift(current, first, history))
    .sort(
      (a, b) =>
        a.countedAtMs - b.countedAtMs || compareText(a.shift.id, b.shift.id) || a.outletIndex - b.outletIndex,
    )
}

/** What shifts do not say of themselves. */
export interface BlastConditions {
  media: readonly MediumRecord[]
  /** the air's own pressure where the shift blasted, kPa absolute */
  ambientKpa: (shift: Shift) => number
  /** what the check of that rig expects at the nozzle, kPa gauge; null where there is no check */
  expectedNozzlePressureKpa: (shift: Shift, outletIndex: number) => number | null
  /** what the rig usually blasts with; null: not known */
  usualAbrasive: (rigId: string) => AbrasiveId | null
  /** wet life over dry life; absent 1, no source */
  wetLifeFactor?: number
  /** the company's own life table; absent ours */
  lives?: readonly LinerLife[]
}

/** What had to be supposed of a shift. */
export type ShiftNote =
  /** by the rig's usual abrasive, or, where that is not known either, as sand or slag */
  | 'medium-not-said'
  /** the pressure is what the check expects */
  | 'pressure-expected'
  /** nothing expects a pressure: 100 psi */
  | 'pressure-not-known'

export interface WeighedShift extends CountedShift {
  media: WearMedia
  severity: number
  equivalentHours: number
  notes: ShiftNote[]
}

const referencePressureKpa = 100 * KPA_PER_PSI

/** A liner as the life table knows it. One that nobody knows counts as the commonest, tungsten carbide. */
export function linerIdOf(liner: Liner | null): LinerId {
  return liner === 'alumina' ? 'alumina-ceramic' : (liner ?? 'tungsten-carbide')
}

/** A medium of the company's list as wear sees it: its type's own column of the life table, its own hardness. */
export function wearMediaOf({
  abrasive,
  mohsHardness,
}: Pick<MediumRecord, 'abrasive' | 'mohsHardness'>): WearMedia {
  const { lifeMedia, mohs } = MEDIA_HARDNESS[abrasive]
  return { lifeMedia, mohs: mohsHardness ?? mohs }
}

const referenceMedia: WearMedia = { lifeMedia: 'sand-or-slag', mohs: LIFE_MEDIA_MOHS['sand-or-slag'] }

function weigh(counted: CountedShift, liner: LinerId, conditions: BlastConditions): WeighedShift {
  const { shift, outletIndex } = counted
  const notes: ShiftNote[] = []
  const medium = conditions.media.find(({ id }) => id === shift.mediumId)
  const usual = medium ? null : conditions.usualAbrasive(shift.rigId)
  if (!medium) notes.push('medium-not-said')
  const media = medium
    ? wearMediaOf(medium)
    : usual
      ? wearMediaOf({ abrasive: usual, mohsHardness: null })
      : referenceMedia
  const expected =
    shift.nozzlePressureKpa === null ? conditions.expectedNozzlePressureKpa(shift, outletIndex) : null
  if (shift.nozzlePressureKpa === null)
    notes.push(expected === null ? 'pressure-not-known' : 'pressure-expected')
  const severity = severityOf({
    liner,
    media,
    isWet: shift.isWet,
    nozzlePressureKpaAbsolute:
      (shift.nozzlePressureKpa ?? expected ?? referencePressureKpa) + conditions.ambientKpa(shift),
    ...(conditions.wetLifeFactor === undefined ? {} : { wetLifeFactor: conditions.wetLifeFactor }),
    ...(conditions.lives === undefined ? {} : { lives: conditions.lives }),
  })
  return { ...counted, media, severity, equivalentHours: shift.blastHours * severity, notes }
}

/** How long a nozzle has blasted: hours by the clock, and as many in dry slag or sand at 100 psi. */
export interface NozzleHours {
  /** what it had before the first shift written down; 0 where that is not known */
  hoursBefore: number
  isHoursBeforeKnown: boolean
  /** in order of the moment they count at */
  shifts: WeighedShift[]
  equivalentHours: number
  blastHours: number
  /** at an instant, in milliseconds: with all that counts at it or before */
  at: (milliseconds: number) => { equivalentHours: number; blastHours: number }
}

/**
 * Equivalent hours of a nozzle, now and at any instant.
 *
 *   H(t) = hours before + Σ blast hours · severity(media, wet or dry, p) over the shifts up to t        h
 *   p      the shift's own gauge pressure, or the one expected, over the site's own        kPa absolute
 *
 * Inputs   the nozzle · all that `countShifts` counted · what the shifts do not say
 * Result   see above; a correction of a shift changes it and everything after it
 * Ignores  a swap during a shift
 * Source   severity as in shared/wear: common practice, no source
 * Errors   none        Checked  tests/shared/work/hours.test.ts
 */
export function equivalentHoursOf(
  nozzle: Pick<NozzleRecord, 'id' | 'liner' | 'hoursBefore'>,
  counted: readonly CountedShift[],
  conditions: BlastConditions,
): NozzleHours {
  const liner = linerIdOf(nozzle.liner)
  const shifts = counted
    .filter(({ nozzleId }) => nozzleId === nozzle.id)
    .map((shift) => weigh(shift, liner, conditions))
  const hoursBefore = nozzle.hoursBefore ?? 0
  const sums = [{ equivalentHours: hoursBefore, blastHours: 0 }]
  for (const { shift, equivalentHours } of shifts) {
    const last = sums.at(-1)!
    sums.push({
      equivalentHours: last.equivalentHours + equivalentHours,
      blastHours: last.blastHours + shift.blastHours,
    })
  }
  return {
    hoursBefore,
    isHoursBeforeKnown: nozzle.hoursBefore !== null,
    shifts,
    ...sums.at(-1)!,
    at: (milliseconds) => sums[shifts.findLastIndex(({ countedAtMs }) => countedAtMs <= milliseconds) + 1]!,
  }
}

/**
 * How fast hours come, per week, over the last eight weeks.
 *
 * On a rig it is what that outlet blasted, whichever nozzle sat there, as this liner would have felt it: "if it stays
 * on". A spare has its own. Where the record begins later it is divided by the weeks since then, at least one.
 *
 * Inputs   the nozzle's liner and where it is · all counted shifts · now in milliseconds
 * Result   equivalent hours per week; 0 where nothing was blasted
 * Checked  tests/shared/work/hours.test.ts
 */
export function weeklyHoursOf(
  nozzle: Pick<NozzleRecord, 'id' | 'liner'>,
  place: { rigId: string; outletIndex: number } | null,
  counted: readonly CountedShift[],
  conditions: BlastConditions,
  nowMs: number,
): number {
  const own = counted.filter(({ nozzleId, outletIndex, shift }) =>
    place ? shift.rigId === place.rigId && outletIndex === place.outletIndex : nozzleId === nozzle.id,
  )
  const first = own[0]
  if (!first) return 0
  const from = nowMs - mostWeeks * weekMs
  const liner = linerIdOf(nozzle.liner)
  const hours = own
    .filter(({ countedAtMs }) => countedAtMs > from && countedAtMs <= nowMs)
    .reduce((sum, shift) => sum + weigh(shift, liner, conditions).equivalentHours, 0)
  const weeks = Math.min(mostWeeks, Math.max(1, (nowMs - first.countedAtMs) / weekMs))
  return hours / weeks
}

const weekMs = 7 * dayMs
const mostWeeks = 8
