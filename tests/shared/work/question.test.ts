import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { BoreCheck } from '#shared/contracts/work.ts'
import { forecastWear } from '#shared/wear/index.ts'
import {
  countChecks,
  countShifts,
  equivalentHoursOf,
  forecastOf,
  historyOf,
  isPerhapsAnother,
  offBy,
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

const conditions = createConditions()
const events = [createEvent({ at: utc(1, '07:00') })]
/** five hours on each of the first ten days */
const shifts = Array.from({ length: 10 }, (_, i) => createShift(i + 1))

function ask(boreChecks: BoreCheck[], overrides = {}, now = utc(10, '18:00')) {
  const nozzle = createNozzle(overrides)
  const history = historyOf({ nozzles: [nozzle], events })
  const counted = countShifts(shifts, history)
  const hours = equivalentHoursOf(nozzle, counted, conditions)
  return wearQuestionOf(nozzle, { history, counted, hours, checks: countChecks(boreChecks), conditions }, now)
}
function question(...parameters: Parameters<typeof ask>) {
  const asked = ask(...parameters)
  if (asked.kind !== 'question') throw new Error(`no question: ${asked.kind}`)
  return asked
}

describe('the question to the forecast', () => {
  it('has the hours at each check, those before the first shift among them', () => {
    const checks = [
      createBoreCheck(utc(4, '06:30'), { passedMm: 9.525, refusedMm: 9.921875 }),
      createBoreCheck(utc(8, '16:00'), { method: 'taper-gauge', boreMm: 9.8, accuracyMm: 0.05 }),
    ]
    const { question: asked } = question(checks, { hoursBefore: 100 })
    expect(asked.newBoreMm).toBe(9.525)
    expect(asked.equivalentHoursNow).toBeCloseTo(150, 9)
    expect(asked.checks).toEqual([
      { kind: 'bits', equivalentHours: expect.closeTo(115, 9), passedMm: 9.525, refusedMm: 9.921875 },
      { kind: 'gauge', equivalentHours: expect.closeTo(140, 9), boreMm: 9.8, accuracyMm: 0.05 },
    ])
  })

  it('counts today’s shifts until midnight on the clock of whoever asks, and none of tomorrow’s', () => {
    const hoursAt = (now: string) => question([], {}, now).question.equivalentHoursNow
    expect(hoursAt(utc(4, '06:00'))).toBeCloseTo(20, 9)
    // there the fourth ends at ten in the morning by UTC
    expect(hoursAt('2026-01-04T01:00:00+14:00')).toBeCloseTo(15, 9)
  })

  it('leaves out a check that was corrected', () => {
    const wrong = createBoreCheck(utc(8), { passedMm: 12.7, refusedMm: 13.1 })
    const right = createBoreCheck(utc(9), { passedMm: 9.525, refusedMm: 9.921875, supersedesId: wrong.id })
    const { question: asked, checks } = question([wrong, right])
    expect(checks.map(({ check }) => check.id)).toEqual([right.id])
    expect(asked.checks).toHaveLength(1)
  })

  it('of checks in any order, any repeated, is the same', () => {
    const drawn = fc
      .array(fc.record({ day: fc.integer({ min: 1, max: 10 }), bit: fc.integer({ min: 22, max: 30 }) }), {
        maxLength: 6,
      })
      .map((all) =>
        all.map(({ day, bit }, i) =>
          createBoreCheck(utc(day), {
            id: `${i}`,
            passedMm: (bit * 25.4) / 64,
            refusedMm: ((bit + 1) * 25.4) / 64,
          }),
        ),
      )
    const shuffled = drawn.chain((all) =>
      fc.record({
        all: fc.constant(all),
        again: fc.shuffledSubarray([...all, ...all], { minLength: 2 * all.length }),
      }),
    )
    fc.assert(
      fc.property(shuffled, ({ all, again }) => {
        expect(ask(again)).toEqual(ask(all))
      }),
      { seed, numRuns: 100 },
    )
  })

  it('is not asked of a nozzle whose new bore nobody knows', () => {
    const asked = ask([createBoreCheck(utc(8), { passedMm: 9.525 })], { newBoreMm: null })
    expect(asked).toMatchObject({ kind: 'ask', ask: 'new-bore' })
    expect(asked.checks).toHaveLength(1)
  })

  it('retires a cracked nozzle, whatever the bit says and whatever else is unknown', () => {
    const cracked = createBoreCheck(utc(5), { refusedMm: 9.921875, isCracked: true })
    const fine = createBoreCheck(utc(6), { passedMm: 9.525, refusedMm: 9.921875 })
    const retire = { kind: 'retire', because: 'cracked', checkId: cracked.id }
    expect(ask([cracked, fine])).toMatchObject(retire)
    expect(ask([cracked], { newBoreMm: null, hoursBefore: null })).toMatchObject(retire)
  })

  it('takes of an oval bore only what went through, of a pin too, and asks for a gauge', () => {
    const checks = [
      createBoreCheck(utc(5), { passedMm: 9.525, refusedMm: 9.921875, looksOval: true }),
      createBoreCheck(utc(6), { method: 'pin', boreMm: 9.6, accuracyMm: 0.02, looksOval: true }),
      createBoreCheck(utc(7), { method: 'taper-gauge', boreMm: 9.9, accuracyMm: 0.05, looksOval: true }),
      createBoreCheck(utc(8), { refusedMm: 10.3, looksOval: true }),
    ]
    const asked = question(checks)
    expect(asked.question.checks.map(({ kind }) => kind)).toEqual(['bits', 'bits', 'gauge'])
    expect(asked.question.checks[0]).toMatchObject({ passedMm: 9.525, refusedMm: null })
    expect(asked.question.checks[1]).toMatchObject({ passedMm: 9.6, refusedMm: null })
    expect(asked.notes).toContain('oval')
  })

  it('says when the liner is not known or the table has no row for it', () => {
    expect(question([], { liner: null }).notes).toEqual(['liner-not-known'])
    expect(question([], { liner: null }).question.rate.logSigma).toBe(1)
    expect(question([], { liner: 'steel' }).notes).toEqual(['no-data'])
    expect(question([]).notes).toEqual([])
  })
})

describe('a nozzle whose hours nobody knows', () => {
  const first = createBoreCheck(utc(4, '06:30'), { passedMm: 10.31875, refusedMm: 10.715625 })

  it('is asked for a first check', () => {
    expect(ask([], { hoursBefore: null })).toMatchObject({ kind: 'ask', ask: 'first-check' })
  })

  it('counts from its first check, and is known no better than that', () => {
    const later = createBoreCheck(utc(8, '16:00'), { passedMm: 10.31875 })
    const asked = question([first, later], { hoursBefore: null })
    expect(asked.notes).toContain('counted-from-first-check')
    expect(asked.question.newBoreMm).toBeCloseTo((10.31875 + 10.715625) / 2, 9)
    expect(asked.baselineHalfWidthMm).toBeCloseTo(0.1984375, 9)
    expect(asked.question.equivalentHoursNow).toBeCloseTo(35, 9)
    expect(asked.question.checks).toEqual([
      { kind: 'bits', equivalentHours: expect.closeTo(25, 9), passedMm: 10.31875, refusedMm: null },
    ])
    const { boreNowMm, hoursToLimit } = forecastOf(asked, 12)
    const alone = forecastWear({ ...asked.question, limitBoreMm: 12 })
    expect(boreNowMm.p10).toBeLessThan(alone.boreNowMm.p10 - 0.15)
    expect(boreNowMm.p90).toBeGreaterThan(alone.boreNowMm.p90 + 0.15)
    expect(boreNowMm.p50).toBe(alone.boreNowMm.p50)
    expect(hoursToLimit.p10).toBeLessThan(alone.hoursToLimit.p10)
    expect(hoursToLimit.p90).toBeGreaterThan(alone.hoursToLimit.p90)
  })

  it.each([
    ['that nothing was refused at: to a sixteenth more', { passedMm: 10.31875 }, 10.31875, 11.90625],
    ['that nothing went through at: from its new bore', { refusedMm: 10.31875 }, 9.525, 10.31875],
    ['said to be under its new bore: that one', { passedMm: 7.9375, refusedMm: 8.334375 }, 9.525, 9.525],
    ['of a gauge: as far as that is good', { method: 'caliper', boreMm: 10, accuracyMm: 0.3 }, 9.7, 10.3],
  ] as const)('counts from a first check %s', (_, overrides, lowMm, highMm) => {
    const check = createBoreCheck(utc(4, '06:30'), overrides)
    const { question: asked, baselineHalfWidthMm } = question([check], { hoursBefore: null })
    expect(asked.newBoreMm - baselineHalfWidthMm).toBeCloseTo(lowMm, 9)
    expect(asked.newBoreMm + baselineHalfWidthMm).toBeCloseTo(highMm, 9)
  })

  it('forecasts exactly as the wear model does where the hours are known', () => {
    const asked = question([first])
    expect(forecastOf(asked, 11)).toEqual(forecastWear({ ...asked.question, limitBoreMm: 11 }))
  })
})

describe('a check that does not go with the rest is kept and questioned', () => {
  const doubts = (checks: BoreCheck[], overrides = {}) =>
    ask(checks, overrides).doubts.map(({ code, checkId, otherCheckId }) => [code, checkId, otherCheckId])
  const passed = createBoreCheck(utc(4), { passedMm: 10.31875 })

  it('where the bore would have shrunk, beside the check it is furthest from', () => {
    const larger = createBoreCheck(utc(5), { passedMm: 10.715625 })
    const refused = createBoreCheck(utc(6), { refusedMm: 9.921875 })
    expect(doubts([passed, larger, refused])).toEqual([['shrank', refused.id, larger.id]])
    const smaller = createBoreCheck(utc(5, '13:00'), { passedMm: 10.318750001 })
    expect(doubts([larger, smaller, refused])).toEqual([['shrank', refused.id, larger.id]])
  })

  it('and not where the feel of a bit explains it', () => {
    expect(doubts([passed, createBoreCheck(utc(6), { refusedMm: 10.31875 - 0.2 })])).toEqual([])
    expect(doubts([passed, createBoreCheck(utc(6), { refusedMm: 10.31875 - 0.22 })])).toHaveLength(1)
  })

  it('where it is under the new bore', () => {
    const small = createBoreCheck(utc(4), { refusedMm: 9.128125 })
    expect(doubts([small])).toEqual([['under-new-bore', small.id, null]])
    expect(doubts([small], { newBoreMm: null })).toEqual([])
  })

  it('where it was measured on a rig on which the nozzle was not', () => {
    const elsewhere = createBoreCheck(utc(4), { passedMm: 9.525, rigId: 'other' })
    expect(doubts([elsewhere])).toEqual([['mounted-elsewhere', elsewhere.id, null]])
    expect(doubts([{ ...elsewhere, rigId: 'rig' }])).toEqual([])
  })

  it('and it still counts in the forecast', () => {
    const small = createBoreCheck(utc(4), { refusedMm: 9.128125 })
    expect(question([small]).question.checks).toHaveLength(1)
  })
})

describe('is this T-14?', () => {
  const felt = (passedMm: number | null, refusedMm: number | null, looksOval = false) => ({
    method: 'bits' as const,
    passedMm,
    refusedMm,
    boreMm: null,
    looksOval,
  })

  it('is asked of a check that is off by over 1/32 in, 0.79375 mm', () => {
    expect(isPerhapsAnother(felt(10.31875, null), 9.525)).toBe(false)
    expect(isPerhapsAnother(felt(10.31876, null), 9.525)).toBe(true)
    expect(isPerhapsAnother(felt(null, 9.525), 10.31875)).toBe(false)
    expect(isPerhapsAnother(felt(null, 9.525), 10.31876)).toBe(true)
  })

  it('is not asked where the bore may be what was expected', () => {
    expect(offBy(felt(9.525, 11.1125), 10.9)).toBe(0)
    expect(offBy(felt(9.525, null), 14)).toBe(0)
    expect(offBy(felt(9.525, 9.921875, true), 14)).toBe(0)
  })

  it('is asked of a gauge on either side', () => {
    const gauge = { ...felt(null, null), method: 'caliper' as const, boreMm: 9.5 }
    expect(offBy(gauge, 10.5)).toBeCloseTo(-1, 9)
    expect(offBy(gauge, 8.5)).toBeCloseTo(1, 9)
    expect(isPerhapsAnother(gauge, 10.5)).toBe(true)
  })
})
