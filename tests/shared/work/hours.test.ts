import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { Shift } from '#shared/contracts/work.ts'
import { countShifts, equivalentHoursOf, historyOf, linerIdOf, weeklyHoursOf } from '#shared/work/index.ts'
import {
  createConditions,
  createEvent,
  createMedium,
  createNozzle,
  createShift,
  dateOf,
  seed,
  utc,
} from './madeUp.ts'

const nozzles = ['a', 'b', 'c'].map((id) => createNozzle({ id }))
const conditions = createConditions()
const mounted = createEvent({ at: utc(1, '07:00') })

function read(events: ReturnType<typeof createEvent>[], shifts: Shift[]) {
  const counted = countShifts(shifts, historyOf({ nozzles, events }))
  return {
    counted,
    of: (id: string, overrides = {}) =>
      equivalentHoursOf(createNozzle({ id, ...overrides }), counted, conditions),
  }
}
const clockHours = (events: ReturnType<typeof createEvent>[], shifts: Shift[]) => {
  const { of } = read(events, shifts)
  return ['a', 'b'].map((id) => of(id).blastHours)
}

describe('the hours of a shift', () => {
  it('count on what was mounted at noon', () => {
    const swapBefore = createEvent({ at: utc(2, '11:00'), nozzleId: 'b' })
    const swapAfter = createEvent({ at: utc(2, '13:00'), nozzleId: 'b' })
    expect(clockHours([mounted, swapBefore], [createShift(2)])).toEqual([0, 5])
    expect(clockHours([mounted, swapAfter], [createShift(2)])).toEqual([5, 0])
  })

  it('written in the morning count on what was mounted when they were written', () => {
    const swap = createEvent({ at: utc(2, '11:00'), nozzleId: 'b' })
    const shift = createShift(2, { at: utc(2, '10:00') })
    expect(clockHours([mounted, swap], [shift])).toEqual([5, 0])
    const correction = createShift(2, { id: 'corrected', supersedesId: shift.id, blastHours: 3 })
    expect(clockHours([mounted, swap], [shift, correction])).toEqual([3, 0])
  })

  it('count on the first nozzle of that day where none was on at noon, and on none of the day after', () => {
    expect(clockHours([createEvent({ at: utc(2, '14:00') })], [createShift(2)])).toEqual([5, 0])
    expect(clockHours([createEvent({ at: utc(3, '00:00') })], [createShift(2)])).toEqual([0, 0])
  })

  it('go by noon on the clock of whoever wrote them', () => {
    const swap = createEvent({ at: utc(2, '14:00'), nozzleId: 'b' })
    const inDenver = createShift(2, { at: `${dateOf(2)}T17:00:00-07:00` })
    expect(clockHours([mounted, swap], [inDenver])).toEqual([0, 5])
  })

  it('written days later count on what was mounted on their day', () => {
    const swap = createEvent({ at: utc(3, '07:00'), nozzleId: 'b' })
    expect(clockHours([mounted, swap], [createShift(2, { at: utc(6, '08:00') })])).toEqual([5, 0])
  })

  it('count whole on each outlet', () => {
    const second = createEvent({ at: utc(1, '07:00'), nozzleId: 'b', outletIndex: 1 })
    expect(clockHours([mounted, second], [createShift(2)])).toEqual([5, 5])
  })

  it('follow the nozzle from rig to rig', () => {
    const events = [
      mounted,
      createEvent({ at: utc(1, '07:00'), nozzleId: 'b', rigId: 'other' }),
      createEvent({ at: utc(5, '07:00'), nozzleId: 'a', rigId: 'other' }),
      createEvent({ at: utc(5, '07:00'), nozzleId: 'b' }),
    ]
    const shifts = [2, 6].flatMap((day) => [
      createShift(day, { blastHours: 1 }),
      createShift(day, { id: `other ${day}`, rigId: 'other', blastHours: day }),
    ])
    expect(clockHours(events, shifts)).toEqual([1 + 6, 2 + 1])
  })
})

describe('equivalent hours', () => {
  it('are the hours themselves with slag at 100 psi at sea level, and add to those before', () => {
    const hours = read([mounted], [createShift(2), createShift(3)]).of('a', { hoursBefore: 40 })
    expect(hours.equivalentHours).toBeCloseTo(50, 9)
    expect(hours.blastHours).toBe(10)
    expect(hours.at(Date.parse(utc(2, '11:59'))).equivalentHours).toBe(40)
    expect(hours.at(Date.parse(utc(2, '12:00'))).equivalentHours).toBeCloseTo(45, 9)
  })

  it('of tungsten carbide with aluminium oxide are 12.2 times those with slag: √(300·400)/√(20·40)', () => {
    const media = [createMedium({ id: 'oxide', abrasive: 'aluminium-oxide' })]
    const { counted } = read([mounted], [createShift(2, { mediumId: 'oxide' })])
    const hours = equivalentHoursOf(nozzles[0]!, counted, createConditions({ media }))
    expect(hours.equivalentHours / 5).toBeCloseTo(Math.sqrt(150), 9)
  })

  it('go with the absolute pressure: 85 psi gauge at 12.2 psia is 97.2 of 114.7', () => {
    const psi = 6.894757293168361
    const { counted } = read([mounted], [createShift(2, { nozzlePressureKpa: 85 * psi })])
    const hours = equivalentHoursOf(nozzles[0]!, counted, createConditions({ ambientKpa: () => 12.2 * psi }))
    expect(hours.equivalentHours / 5).toBeCloseTo(97.2 / 114.7, 9)
  })

  it('take what is not said from the rig, and say so', () => {
    const { counted } = read([mounted], [createShift(2, { nozzlePressureKpa: null, mediumId: null })])
    const supposed = createConditions({
      expectedNozzlePressureKpa: () => 2 * 689.4757293168361 + 14.7 * 6.894757293168361,
      usualAbrasive: () => 'aluminium-oxide',
    })
    const [shift] = equivalentHoursOf(nozzles[0]!, counted, supposed).shifts
    expect(shift!.severity).toBeCloseTo(2 * Math.sqrt(150), 9)
    expect(shift!.notes).toEqual(['medium-not-said', 'pressure-expected'])
    const [bare] = equivalentHoursOf(nozzles[0]!, counted, conditions).shifts
    expect(bare!.severity).toBeCloseTo(1, 9)
    expect(bare!.notes).toEqual(['medium-not-said', 'pressure-not-known'])
  })

  it('wet are less by the life that wet adds', () => {
    const { counted } = read([mounted], [createShift(2, { isWet: true })])
    const hours = equivalentHoursOf(nozzles[0]!, counted, createConditions({ wetLifeFactor: 4 }))
    expect(hours.equivalentHours).toBeCloseTo(5 / 4, 9)
  })

  it('after a corrected shift are all computed anew', () => {
    const shifts = [createShift(2), createShift(3), createShift(4)]
    const correction = createShift(2, { id: 'corrected', at: utc(9), blastHours: 2, supersedesId: 'shift 2' })
    const before = read([mounted], shifts).of('a')
    const after = read([mounted], [...shifts, correction]).of('a')
    for (const day of [2, 3, 4]) {
      const instant = Date.parse(utc(day, '12:00'))
      expect(before.at(instant).equivalentHours - after.at(instant).equivalentHours).toBeCloseTo(3, 9)
    }
  })

  it('call alumina what the life table calls it, and an unknown liner tungsten carbide', () => {
    expect([linerIdOf('alumina'), linerIdOf('steel'), linerIdOf(null)]).toEqual([
      'alumina-ceramic',
      'steel',
      'tungsten-carbide',
    ])
  })
})

describe('any shifts and swaps', () => {
  const drawn = fc.record({
    events: fc.array(
      fc.record({
        nozzleId: fc.constantFrom('a', 'b', 'c'),
        rigId: fc.constantFrom('rig', 'other'),
        outletIndex: fc.integer({ min: 0, max: 1 }),
        day: fc.integer({ min: 1, max: 9 }),
        hour: fc.integer({ min: 0, max: 23 }),
      }),
      { maxLength: 8 },
    ),
    shifts: fc.array(
      fc.record({
        rigId: fc.constantFrom('rig', 'other'),
        day: fc.integer({ min: 1, max: 9 }),
        lateDays: fc.integer({ min: 0, max: 2 }),
        hour: fc.integer({ min: 0, max: 23 }),
        blastHours: fc.integer({ min: 0, max: 10 }),
        of: fc.option(fc.integer({ min: 0, max: 9 })),
      }),
      { maxLength: 10 },
    ),
  })
  const make = ({ events, shifts }: typeof drawn extends fc.Arbitrary<infer T> ? T : never) => ({
    events: events.map(({ day, hour, ...event }, i) =>
      createEvent({ ...event, id: `${i}`, at: utc(day, `${hour}:30`) }),
    ),
    shifts: shifts.map(({ day, lateDays, hour, of, ...shift }, i) =>
      createShift(day, {
        ...shift,
        id: `${i}`,
        at: utc(day + lateDays, `${hour}:00`),
        supersedesId: of === null ? null : `${of}`,
      }),
    ),
  })

  it('in any order, any repeated, give each nozzle the same hours', () => {
    const shuffled = drawn.map(make).chain(({ events, shifts }) =>
      fc.record({
        events: fc.constant(events),
        shifts: fc.constant(shifts),
        again: fc.shuffledSubarray([...shifts, ...shifts], { minLength: 2 * shifts.length }),
      }),
    )
    fc.assert(
      fc.property(shuffled, ({ events, shifts, again }) => {
        expect(read(events.toReversed(), again).counted).toEqual(read(events, shifts).counted)
      }),
      { seed, numRuns: 300 },
    )
  })

  it('are counted once on an outlet at most, on a nozzle that was there on that day', () => {
    fc.assert(
      fc.property(drawn.map(make), ({ events, shifts }) => {
        const history = historyOf({ nozzles, events })
        const { counted } = read(events, shifts)
        const keys = counted.map(({ shift, outletIndex }) => `${shift.id} ${outletIndex}`)
        expect(new Set(keys).size).toBe(keys.length)
        for (const { shift, nozzleId, outletIndex, countedAtMs } of counted) {
          const mount = history.nozzles
            .get(nozzleId)!
            .mounts.find(({ fromMs, untilMs }) => fromMs <= countedAtMs && countedAtMs < untilMs)
          expect([mount!.rigId, mount!.outletIndex]).toEqual([shift.rigId, outletIndex])
          expect(new Date(countedAtMs).toISOString().slice(0, 10)).toBe(shift.localDate)
        }
      }),
      { seed, numRuns: 300 },
    )
  })
})

describe('hours a week', () => {
  const now = Date.parse(utc(101))
  const weekly = (
    shifts: Shift[],
    place: { rigId: string; outletIndex: number } | null,
    events = [mounted],
  ) => weeklyHoursOf(nozzles[1]!, place, read(events, shifts).counted, conditions, now)
  const place = { rigId: 'rig', outletIndex: 0 }

  it('are those of the outlet over the last eight weeks, whichever nozzle was on', () => {
    const shifts = [createShift(10, { blastHours: 9 }), ...[50, 60, 70, 100].map((day) => createShift(day))]
    expect(weekly(shifts, place)).toBeCloseTo(20 / 8, 9)
    expect(weekly(shifts, { ...place, outletIndex: 1 })).toBe(0)
  })

  it('of a record that is younger are over the weeks since its first shift, at least one', () => {
    expect(weekly([createShift(87), createShift(94)], place)).toBeCloseTo(10 / 2, 9)
    expect(weekly([createShift(100)], place)).toBeCloseTo(5, 9)
  })

  it('of a spare are its own', () => {
    const swap = createEvent({ at: utc(70, '07:00'), nozzleId: 'b' })
    const shifts = [50, 60, 80].map((day) => createShift(day, { blastHours: 8 }))
    expect(weekly(shifts, null, [mounted, swap])).toBeCloseTo(8 / 3, 9)
  })
})
