import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { BoreCheck } from '#shared/contracts/work.ts'
import type { Quantiles, WearForecast } from '#shared/wear/index.ts'
import {
  adviceOf,
  changeDatesOf,
  countChecks,
  countShifts,
  equivalentHoursOf,
  forecastOf,
  historyOf,
  wearQuestionOf,
} from '#shared/work/index.ts'
import {
  createBoreCheck,
  createConditions,
  createEvent,
  createNozzle,
  createShift,
  seed,
  utc,
} from './madeUp.ts'

const today = '2026-05-03'
const conditions = createConditions()
const shifts = Array.from({ length: 10 }, (_, i) => createShift(i + 1, { blastHours: 4.6 }))

function ask(boreChecks: BoreCheck[], overrides = {}) {
  const nozzle = createNozzle(overrides)
  const history = historyOf({ nozzles: [nozzle], events: [createEvent({ at: utc(1, '07:00') })] })
  const counted = countShifts(shifts, history)
  const hours = equivalentHoursOf(nozzle, counted, conditions)
  return wearQuestionOf(
    nozzle,
    { history, counted, hours, checks: countChecks(boreChecks), conditions },
    utc(10, '18:00'),
  )
}
const range = (p10: number, p50: number, p90: number): Quantiles => ({ p10, p50, p90 })
const createForecast = (boreNowMm: Quantiles, weeksToLimit: Quantiles | null = null): WearForecast => ({
  boreNowMm,
  hoursToLimit: range(0, 0, 0),
  weeksToLimit,
  contradictsPrior: false,
})
const rig = { limitBoreMm: 10.5, newBoreMm: 9.525, bitSet: 'fractional-64' } as const
const after = createBoreCheck(utc(10, '17:30'), { passedMm: 9.525, refusedMm: 9.921875 })
const before = createBoreCheck(utc(1, '06:00'), { passedMm: 9.525, refusedMm: 9.921875 })

describe('the advice', () => {
  it.each([
    [range(9.6, 9.9, 10.5), 'good-today'],
    [range(9.6, 9.9, 10.51), 'measure-first'],
    [range(10.5, 10.6, 10.9), 'measure-first'],
    [range(10.51, 10.6, 10.9), 'change-it'],
  ])('of a bore of %j against 10.5 mm is %s', (boreNowMm, advice) => {
    expect(adviceOf(ask([]), createForecast(boreNowMm), rig, today).advice).toBe(advice)
  })

  it('stands on the last check where nothing was blasted since', () => {
    expect(adviceOf(ask([before, after]), createForecast(range(9.6, 9.7, 9.8)), rig, today).ground).toEqual({
      code: 'measured',
      check: after,
    })
  })

  it('else on the hours since: ten shifts of 4.6 are "estimated, 46 hours since measured"', () => {
    const { ground } = adviceOf(ask([before]), createForecast(range(9.6, 9.7, 9.8)), rig, today)
    expect(ground).toEqual({ code: 'estimated', check: before, hoursSince: expect.closeTo(46, 9) })
  })

  it('or on no check at all, also where the only one said nothing of the bore', () => {
    const seen = createBoreCheck(utc(4), { refusedMm: 10, looksOval: true })
    for (const checks of [[], [seen]]) {
      const { ground } = adviceOf(ask(checks), createForecast(range(9.6, 9.7, 9.8)), rig, today)
      expect(ground).toEqual({ code: 'never-measured', hours: expect.closeTo(46, 9) })
    }
  })

  it('is to change a cracked nozzle, one over its limit when new, and any where no bore holds', () => {
    const cracked = createBoreCheck(utc(4), { refusedMm: 9.921875, isCracked: true })
    const fine = createForecast(range(9.6, 9.7, 9.8))
    const codes = [
      adviceOf(ask([cracked]), null, rig, today),
      adviceOf(ask([]), fine, { ...rig, limitBoreMm: 9.4 }, today),
      adviceOf(ask([]), fine, { ...rig, limitBoreMm: null }, today),
    ].map(({ advice, ground }) => [advice, ground.code])
    expect(codes).toEqual([
      ['change-it', 'cracked'],
      ['change-it', 'new-is-over-limit'],
      ['change-it', 'no-bore-holds'],
    ])
  })

  it('without a forecast stands on a check that nothing was blasted since, and else is to measure', () => {
    const unknown = { newBoreMm: null, hoursBefore: null }
    const advise = (check: BoreCheck, limitBoreMm = 10.5) =>
      adviceOf(ask([check], unknown), null, { ...rig, newBoreMm: null, limitBoreMm }, today).advice
    expect(advise(after)).toBe('good-today')
    expect(advise(after, 9.7)).toBe('measure-first')
    expect(advise(after, 9.5)).toBe('change-it')
    expect(advise(before)).toBe('measure-first')
    expect(advise({ ...after, looksOval: true })).toBe('measure-first')
  })

  it('names the bits of the limit, and says when it is time to order', () => {
    const advise = (boreNowMm: Quantiles, checks: BoreCheck[] = [], limitBoreMm = 10.5) =>
      adviceOf(ask(checks), createForecast(boreNowMm), { ...rig, limitBoreMm }, today)
    const early = advise(range(9.6, 9.7, 9.8))
    expect([early.orderBit?.name, early.noGoBit?.name, early.isTimeToOrder]).toEqual([
      '13/32',
      '27/64',
      false,
    ])
    expect(advise(range(10.2, 10.32, 10.4)).isTimeToOrder).toBe(true)
    const passes = createBoreCheck(utc(10, '17:30'), { passedMm: 10.31875 })
    expect(advise(range(10.1, 10.3, 10.4), [passes]).isTimeToOrder).toBe(true)
    const none = advise(range(9.6, 9.7, 9.8), [], 9.7)
    expect([none.orderBit, none.isTimeToOrder]).toEqual([null, true])
  })

  it('of a real forecast never grows worse with a larger limit', () => {
    const asked = ask([after])
    if (asked.kind !== 'question') throw new Error('no question')
    const order = ['change-it', 'measure-first', 'good-today']
    const limit = fc.integer({ min: 9600, max: 13000 }).map((thousandths) => thousandths / 1000)
    fc.assert(
      fc.property(limit, limit, (one, other) => {
        const [low, high] = [Math.min(one, other), Math.max(one, other)]
        const advise = (limitBoreMm: number) =>
          order.indexOf(
            adviceOf(asked, forecastOf(asked, limitBoreMm), { ...rig, limitBoreMm }, today).advice,
          )
        expect(advise(low)).toBeLessThanOrEqual(advise(high))
      }),
      { seed, numRuns: 50 },
    )
  })
})

describe('the dates to change it', () => {
  it('are so many weeks from today: around 12 May, could be 28 April', () => {
    expect(changeDatesOf(range(10 / 7, 24 / 7, 40 / 7), '2026-04-18')).toEqual({
      couldBe: '2026-04-28',
      around: '2026-05-12',
      latest: '2026-05-28',
      isPast: false,
    })
  })

  it('that are past are today’s', () => {
    expect(changeDatesOf(range(-3, -1, 0.5), today)).toEqual({
      couldBe: today,
      around: today,
      latest: '2026-05-06',
      isPast: true,
    })
  })

  it('that are over ten years away are none', () => {
    expect(changeDatesOf(range(30, 500, 900), '2028-02-28')).toMatchObject({
      around: '2037-09-28',
      latest: null,
    })
  })

  it('are none at no hours a week', () => {
    expect(adviceOf(ask([]), createForecast(range(9.6, 9.7, 9.8)), rig, today).change).toBeNull()
  })
})
