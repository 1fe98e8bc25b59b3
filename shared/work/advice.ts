import { noGoBit, orderBit } from '../catalogue/drillBits.ts'
import type { Bit, BitSet } from '../catalogue/drillBits.ts'
import type { BoreCheck } from '../contracts/work.ts'
import type { WearForecast } from '../wear/index.ts'
import { boundsOf } from './checksOfNozzle.ts'
import type { DatedCheck } from './checksOfNozzle.ts'
import { addDays } from './instants.ts'
import type { WearAsked } from './question.ts'

export type Advice = 'good-today' | 'measure-first' | 'change-it'

/** What the advice stands on. */
export type AdviceGround =
  /** nothing was blasted since this check */
  | { code: 'measured'; check: BoreCheck }
  /** hours by the clock since this check */
  | { code: 'estimated'; hoursSince: number; check: BoreCheck }
  /** never measured; hours by the clock that were written down */
  | { code: 'never-measured'; hours: number }
  | { code: 'cracked'; check: BoreCheck }
  /** a new one is over the limit bore already */
  | { code: 'new-is-over-limit' }
  /** no bore at all holds the target */
  | { code: 'no-bore-holds' }

/** Local dates. Past ones are today's. */
export interface ChangeDates {
  /** "change around 12 May": as likely before as after; null: not within ten years */
  around: string | null
  /** "could be 28 April": one in ten is earlier */
  couldBe: string | null
  /** nine in ten are earlier */
  latest: string | null
  isPast: boolean
}

export interface NozzleAdvice {
  advice: Advice
  ground: AdviceGround
  /** null at no hours a week, or where nothing can be forecast */
  change: ChangeDates | null
  noGoBit: Bit | null
  orderBit: Bit | null
  /** the order bit goes through by now, more likely than not, or went through at the last check */
  isTimeToOrder: boolean
}

const mostDays = 3650

/**
 * Days on which the limit bore is reached.
 *
 * Inputs   weeks to the limit, signed · today, a local date
 * Checked  tests/shared/work/advice.test.ts
 */
export function changeDatesOf(
  weeksToLimit: NonNullable<WearForecast['weeksToLimit']>,
  today: string,
): ChangeDates {
  const dateAfter = (weeks: number) => {
    const days = Math.max(0, weeks * 7)
    return days > mostDays ? null : addDays(today, days)
  }
  const { p10, p50, p90 } = weeksToLimit
  return {
    around: dateAfter(p50),
    couldBe: dateAfter(p10),
    latest: dateAfter(p90),
    isPast: p50 < 0,
  }
}

/** Good up to one chance in ten that it is over the limit, to be changed from nine in ten on. */
function adviceOfRange(lowMm: number, highMm: number, limitBoreMm: number): Advice {
  if (highMm <= limitBoreMm) return 'good-today'
  return lowMm > limitBoreMm ? 'change-it' : 'measure-first'
}

function groundOf(asked: WearAsked): AdviceGround {
  const last = lastMeasured(asked)
  if (!last) return { code: 'never-measured', hours: asked.blastHoursNow }
  const hoursSince = asked.blastHoursNow - last.blastHours
  if (hoursSince <= 1e-9) return { code: 'measured', check: last.check }
  return { code: 'estimated', hoursSince, check: last.check }
}

function lastMeasured({ checks }: WearAsked): DatedCheck | undefined {
  return checks.findLast(({ check }) => {
    const { lowMm, highMm } = boundsOf(check)
    return lowMm !== null || highMm !== null
  })
}

/**
 * Good today, Measure first or Change it, and what that stands on.
 *
 *   good today   the bore is at or under the limit with nine chances in ten: p90 ≤ limit
 *   change it    it is over it with nine in ten: p10 > limit; it is cracked; or a new one is over it
 *   measure      between the two; or nothing can be forecast and something was blasted since the last check
 *
 * Inputs   what was asked, and the forecast against this limit, null where there is none · the limit bore mm, null where
 *          no bore holds the target · new bore mm, null where nobody knows · the bits in the box · today, a local date
 * Result   codes and figures; sentences are made from them
 * Checked  tests/shared/work/advice.test.ts
 */
export function adviceOf(
  asked: WearAsked,
  forecast: WearForecast | null,
  rig: { limitBoreMm: number | null; newBoreMm: number | null; bitSet: BitSet },
  today: string,
): NozzleAdvice {
  const { limitBoreMm, newBoreMm, bitSet } = rig
  const noBits = { change: null, noGoBit: null, orderBit: null, isTimeToOrder: true }
  if (asked.kind === 'retire') {
    const { check } = asked.checks.find(({ check: { id } }) => id === asked.checkId)!
    return { advice: 'change-it', ground: { code: 'cracked', check }, ...noBits }
  }
  if (limitBoreMm === null) return { advice: 'change-it', ground: { code: 'no-bore-holds' }, ...noBits }
  if (newBoreMm !== null && limitBoreMm < newBoreMm) {
    return { advice: 'change-it', ground: { code: 'new-is-over-limit' }, ...noBits }
  }
  const ground = groundOf(asked)
  const order = newBoreMm === null ? null : orderBit(limitBoreMm, newBoreMm, bitSet)
  const bits = { noGoBit: noGoBit(limitBoreMm, bitSet), orderBit: order }
  const bounds = ground.code === 'measured' ? boundsOf(ground.check) : null
  const lastLowMm = (check: DatedCheck | undefined) => (check && boundsOf(check.check).lowMm) ?? 0
  if (!forecast) {
    const advice = bounds
      ? adviceOfRange(bounds.lowMm ?? 0, bounds.highMm ?? Infinity, limitBoreMm)
      : 'measure-first'
    const isTimeToOrder = order !== null && lastLowMm(lastMeasured(asked)) >= order.mm - boreToleranceMm
    return { advice, ground, change: null, ...bits, isTimeToOrder }
  }
  const { boreNowMm, weeksToLimit } = forecast
  return {
    advice: adviceOfRange(boreNowMm.p10, boreNowMm.p90, limitBoreMm),
    ground,
    change: weeksToLimit && changeDatesOf(weeksToLimit, today),
    ...bits,
    // without a bit between the new bore and the limit there is no warning: the next one is ordered now
    isTimeToOrder:
      order === null ||
      boreNowMm.p50 >= order.mm ||
      lastLowMm(lastMeasured(asked)) >= order.mm - boreToleranceMm,
  }
}

const boreToleranceMm = 0.0005
