import { LIFE_MEDIA_MOHS, LINER_HARDNESS, LINER_LIVES } from '#shared/catalogue/liners.ts'
import type { HourRange, LifeMedia, LinerId, LinerLife } from '#shared/catalogue/liners.ts'
import { KPA_PER_PSI, MM_PER_INCH } from '#shared/units/quantities.ts'
import type { RatePrior } from './contradiction.ts'

/** A media as wear sees it: the column of the life table that is its own, or null, and its Mohs hardness. */
export interface WearMedia {
  lifeMedia: LifeMedia | null
  mohs: number
}

export interface LifeFound extends HourRange {
  /** the row and the column that were taken */
  liner: LinerId
  lifeMedia: LifeMedia
  /** false where the liner or the media has none of its own and the nearest by hardness stands in: "no data" */
  hasData: boolean
}

/** A table with a single row left still has a nearest one. */
function nearest<T>(items: readonly T[], distance: (item: T) => number): T {
  const [first, ...others] = items
  if (first === undefined) throw new RangeError('the life table is empty; it needs at least one row')
  return others.reduce((best, item) => (distance(item) < distance(best) ? item : best), first)
}

function findRow(liner: LinerId, lives: readonly LinerLife[]): LinerLife {
  const own = lives.find((life) => life.liner === liner)
  if (own) return own
  const { knoop, mohs } = LINER_HARDNESS[liner]
  const comparable = lives.filter((life) => knoop !== null && LINER_HARDNESS[life.liner].knoop !== null)
  return comparable.length > 0
    ? nearest(comparable, (life) => Math.abs(LINER_HARDNESS[life.liner].knoop! - knoop!))
    : nearest(lives, (life) => Math.abs(LINER_HARDNESS[life.liner].mohs - mohs))
}

/**
 * Hours of dry blasting at 100 psi until the bore has grown by 1/16 in, from the life table.
 *
 * Inputs   liner · media: absent is the reference, sand or slag · lives: the company's own table, absent ours
 * Result   the range of the row; where there is none, of the liner nearest by Knoop hardness, by Mohs where a Knoop
 *          is not known, and of the media nearest by Mohs
 * Source   common practice, no source
 * Checked  tests/shared/wear/severity.test.ts
 */
export function findLife(
  liner: LinerId,
  media: WearMedia = { lifeMedia: 'sand-or-slag', mohs: LIFE_MEDIA_MOHS['sand-or-slag'] },
  lives: readonly LinerLife[] = LINER_LIVES,
): LifeFound {
  const row = findRow(liner, lives)
  const columns = Object.keys(LIFE_MEDIA_MOHS) as LifeMedia[]
  const lifeMedia = media.lifeMedia ?? nearest(columns, (id) => Math.abs(LIFE_MEDIA_MOHS[id] - media.mohs))
  const hasData = row.liner === liner && media.lifeMedia !== null
  return { ...row.hours[lifeMedia], liner: row.liner, lifeMedia, hasData }
}

const middleOf = ({ lowHours, highHours }: HourRange) => Math.sqrt(lowHours * highHours)

/** 100 psi over sea level's 14.7 psi. */
const referencePressureKpa = 114.7 * KPA_PER_PSI

export interface BlastMode {
  liner: LinerId
  media: WearMedia
  isWet: boolean
  /** absolute, at the nozzle: gauge pressure and the site's own */
  nozzlePressureKpaAbsolute: number
  /** wet life over dry life; absent 1, no source */
  wetLifeFactor?: number
  lives?: readonly LinerLife[]
}

/**
 * How fast a shift wears a nozzle beside the reference mode, dry slag or sand at 100 psi.
 *
 *   severity = life(reference)/(life(media) · wet factor if wet) · p/114.7 psi        –
 *
 * Inputs   life in hours, the geometric middle of the table's range · p kPa absolute at the nozzle
 * Valid    about 60 to 130 psi gauge: that wear goes with absolute pressure is not stated by a source
 * Ignores  size and shape of the grain, how rich the media is fed
 * Source   common practice, no source; the wet factor has none at all
 * Checked  tests/shared/wear/severity.test.ts
 */
export function severityOf(mode: BlastMode): number {
  const { liner, media, isWet, nozzlePressureKpaAbsolute, wetLifeFactor = 1, lives } = mode
  const life = middleOf(findLife(liner, media, lives)) * (isWet ? wetLifeFactor : 1)
  return (
    (middleOf(findLife(liner, undefined, lives)) / life) * (nozzlePressureKpaAbsolute / referencePressureKpa)
  )
}

/** Hours of a shift as so many in the reference mode: hours · severity. */
export function equivalentHours(hours: number, mode: BlastMode): number {
  return hours * severityOf(mode)
}

/** A tenth of a normal lies over so many standard deviations. */
const z90 = 1.2815515655446004
/** No table without a source is better than this. */
const leastLogSigma = 0.35
const noDataLogSigma = 1

export interface LinerRatePrior extends RatePrior {
  /** false: show "no data" beside the forecast */
  hasData: boolean
  /** the row that was taken */
  liner: LinerId
}

/**
 * What is known of a liner's wear in the reference mode before any check.
 *
 *   median = 1/16 in / √(low · high)        mm per equivalent hour
 *   σ      = max(0.35, ln(high/low)/(2 · 1.2816)): the range is taken as 80 %; 1 where there is no data
 *
 * Inputs   liner · medias: what it has been used with, so that one without a row widens the prior; absent none ·
 *          lives: the company's own table, absent ours
 * Source   common practice, no source; the 80 %, the 0.35 and the 1 are choices of our own
 * Checked  tests/shared/wear/severity.test.ts
 */
export function ratePriorOf(
  liner: LinerId,
  { medias = [], lives }: { medias?: readonly WearMedia[]; lives?: readonly LinerLife[] } = {},
): LinerRatePrior {
  const life = findLife(liner, undefined, lives)
  const hasData = life.hasData && medias.every((media) => media.lifeMedia !== null)
  return {
    medianMmPerHour: MM_PER_INCH / 16 / middleOf(life),
    logSigma: hasData
      ? Math.max(leastLogSigma, Math.log(life.highHours / life.lowHours) / (2 * z90))
      : noDataLogSigma,
    hasData,
    liner: life.liner,
  }
}
