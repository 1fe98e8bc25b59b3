import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { NozzleEvent } from '#shared/contracts/nozzles.ts'
import { historyOf, mountedAt } from '#shared/work/index.ts'
import { createEvent, createNozzle, seed, utc } from './madeUp.ts'

const nozzles = ['a', 'b', 'c'].map((id) => createNozzle({ id }))
const read = (events: NozzleEvent[]) => historyOf({ nozzles, events })
const stateOf = (events: NozzleEvent[], id = 'a') => read(events).nozzles.get(id)!.state
const span = (events: NozzleEvent[], id = 'a') =>
  read(events)
    .nozzles.get(id)!
    .mounts.map(({ rigId, outletIndex, from, until }) => [rigId, outletIndex, from, until])

describe('the history of a nozzle', () => {
  it('begins as a spare', () => {
    expect(stateOf([])).toEqual({ kind: 'spare' })
  })

  it('is in service where it was mounted last', () => {
    const events = [createEvent({ at: utc(1) })]
    expect(stateOf(events)).toEqual({ kind: 'in-service', rigId: 'rig', outletIndex: 0, since: utc(1) })
  })

  it('goes from rig to rig without anybody writing that it came off', () => {
    const events = [createEvent({ at: utc(1) }), createEvent({ at: utc(5), rigId: 'other', outletIndex: 1 })]
    expect(span(events)).toEqual([
      ['rig', 0, utc(1), utc(5)],
      ['other', 1, utc(5), null],
    ])
  })

  it('ends on an outlet where another is mounted, and is spare then', () => {
    const events = [createEvent({ at: utc(1) }), createEvent({ at: utc(5), nozzleId: 'b' })]
    expect(span(events)).toEqual([['rig', 0, utc(1), utc(5)]])
    expect(stateOf(events)).toEqual({ kind: 'spare' })
    expect(stateOf(events, 'b').kind).toBe('in-service')
  })

  it('breaks, is put back and is retired', () => {
    const mounted = createEvent({ at: utc(1) })
    const broken = createEvent({ at: utc(2), kind: 'broken', breakage: 'chipped' })
    const back = createEvent({ at: utc(3), kind: 'put-back', rigId: null, outletIndex: null })
    const retired = createEvent({ at: utc(4), kind: 'retired', rigId: null, outletIndex: null })
    expect(stateOf([mounted, broken])).toEqual({ kind: 'broken', since: utc(2), breakage: 'chipped' })
    expect(stateOf([mounted, broken, back])).toEqual({ kind: 'spare' })
    expect(stateOf([mounted, broken, back, retired])).toEqual({ kind: 'retired', since: utc(4) })
    expect(span([mounted, broken, back, retired])).toEqual([['rig', 0, utc(1), utc(2)]])
  })

  it('stays where it is when it is taken off where it is not', () => {
    const events = [
      createEvent({ at: utc(1) }),
      createEvent({ at: utc(2), kind: 'taken-off', rigId: 'other' }),
      createEvent({ at: utc(3), kind: 'taken-off', outletIndex: 1 }),
    ]
    expect(span(events)).toEqual([['rig', 0, utc(1), null]])
  })

  it('that broke in a box stays broken when somebody takes it off', () => {
    const broken = createEvent({
      at: utc(1),
      kind: 'broken',
      rigId: null,
      outletIndex: null,
      breakage: 'other',
    })
    const off = createEvent({ at: utc(2), kind: 'taken-off', rigId: null, outletIndex: null })
    expect(stateOf([broken, off]).kind).toBe('broken')
  })

  it('takes a swap of one instant as one thing, whichever id is smaller', () => {
    for (const [offId, onId] of [
      ['1', '2'],
      ['2', '1'],
    ] as const) {
      const events = [
        createEvent({ at: utc(1), nozzleId: 'a' }),
        createEvent({ at: utc(1), nozzleId: 'b', rigId: 'other' }),
        createEvent({ at: utc(5), nozzleId: 'a', kind: 'taken-off', id: offId }),
        createEvent({ at: utc(5), nozzleId: 'b', id: onId }),
        createEvent({ at: utc(5), nozzleId: 'b', id: `${offId} b`, kind: 'taken-off', rigId: 'other' }),
      ]
      expect(stateOf(events)).toEqual({ kind: 'spare' })
      expect(stateOf(events, 'b')).toEqual({
        kind: 'in-service',
        rigId: 'rig',
        outletIndex: 0,
        since: utc(5),
      })
      expect(read(events).disagreements).toEqual([])
    }
  })

  it('goes by the instant, not by how the clock of the phone writes it', () => {
    const inDenver = createEvent({ at: '2026-01-05T08:00:00-07:00' })
    const earlier = createEvent({ at: '2026-01-05T14:00:00Z', nozzleId: 'b' })
    expect(mountedAt(read([inDenver, earlier]), 'rig', 0, Date.parse('2026-01-05T14:30:00Z'))!.nozzleId).toBe(
      'b',
    )
    expect(mountedAt(read([inDenver, earlier]), 'rig', 0, Date.parse('2026-01-05T15:00:00Z'))!.nozzleId).toBe(
      'a',
    )
  })
})

describe('two phones', () => {
  const codes = (events: NozzleEvent[]) =>
    read(events).disagreements.map(({ code, isSettled }) => [code, isSettled])
  const first = createEvent({ at: utc(1, '08:00'), receivedAt: utc(1, '18:00') })

  it('that mount two nozzles on one outlet, neither knowing, are listed, and the later counts', () => {
    const other = createEvent({ at: utc(1, '09:00'), nozzleId: 'b', by: 'Ben' })
    expect(codes([first, other])).toEqual([['two-on-outlet', false]])
    expect(stateOf([first, other], 'b').kind).toBe('in-service')
  })

  it('that mount one nozzle on two rigs are listed', () => {
    const other = createEvent({ at: utc(1, '09:00'), rigId: 'other', by: 'Ben' })
    expect(codes([first, other])).toEqual([['nozzle-on-two', false]])
  })

  it('of which one takes off what the other has moved are listed', () => {
    const before = createEvent({ at: utc(0) })
    const moved = createEvent({ ...first, id: 'moved', rigId: 'other' })
    const off = createEvent({ at: utc(1, '09:00'), kind: 'taken-off', by: 'Ben' })
    expect(codes([before, moved, off])).toEqual([['taken-off-elsewhere', false]])
    expect(stateOf([before, moved, off]).kind).toBe('in-service')
  })

  it('do not disagree where the second could know of the first: that is a swap', () => {
    const other = createEvent({ at: utc(1, '19:00'), nozzleId: 'b', by: 'Ben' })
    expect(codes([first, other])).toEqual([])
  })

  it('of one person do not disagree', () => {
    expect(codes([first, createEvent({ at: utc(1, '09:00'), nozzleId: 'b' })])).toEqual([])
  })

  it('are settled by whoever says what is there, knowing of both', () => {
    const other = createEvent({ at: utc(1, '09:00'), nozzleId: 'b', by: 'Ben' })
    const settled = createEvent({ at: utc(2), nozzleId: 'c', by: 'Cy' })
    expect(codes([first, other, settled])).toEqual([['two-on-outlet', true]])
  })

  it('and a broken nozzle that is mounted is asked about, whoever did it', () => {
    const broken = createEvent({ at: utc(2), kind: 'broken', breakage: 'cracked' })
    expect(codes([first, broken, createEvent({ at: utc(3) })])).toEqual([['mounted-when-gone', false]])
  })
})

const kinds = ['mounted', 'mounted', 'mounted', 'taken-off', 'broken', 'retired', 'put-back'] as const
const eventsDrawn = fc
  .array(
    fc.record({
      nozzleId: fc.constantFrom('a', 'b', 'c', 'unlisted'),
      kind: fc.constantFrom(...kinds),
      rigId: fc.constantFrom('rig', 'other'),
      outletIndex: fc.integer({ min: 0, max: 1 }),
      namesPlace: fc.boolean(),
      hour: fc.integer({ min: 0, max: 20 }),
      lateHours: fc.integer({ min: 0, max: 9 }),
      by: fc.constantFrom('Ana', 'Ben', 'Cy'),
    }),
    { maxLength: 16 },
  )
  .map((drawn) =>
    drawn.map(({ namesPlace, hour, lateHours, ...event }, i) => {
      const isPlaced = event.kind === 'mounted' || namesPlace
      return createEvent({
        ...event,
        ...(isPlaced ? {} : { rigId: null, outletIndex: null }),
        id: String((i * 7) % 17),
        at: utc(1, `${hour}:00`),
        receivedAt: utc(1, `${hour + lateHours}:30`),
      })
    }),
  )

describe('any events', () => {
  it('in any order, any of them repeated, make the same history', () => {
    const shuffled = eventsDrawn.chain((events) =>
      fc.record({
        events: fc.constant(events),
        again: fc.shuffledSubarray([...events, ...events], { minLength: 2 * events.length }),
      }),
    )
    fc.assert(
      fc.property(shuffled, ({ events, again }) => {
        const history = read(events)
        const other = historyOf({ nozzles: nozzles.toReversed(), events: again })
        expect(other).toEqual(history)
        expect([...other.nozzles.keys()]).toEqual([...history.nozzles.keys()])
      }),
      { seed, numRuns: 500 },
    )
  })

  it('leave on each outlet what was mounted there last, unless that nozzle has gone since', () => {
    const order = { 'taken-off': 0, 'put-back': 0, mounted: 1, broken: 2, retired: 2 }
    fc.assert(
      fc.property(eventsDrawn, fc.integer({ min: 0, max: 21 }), (events, hour) => {
        const instant = Date.parse(utc(1, `${hour}:00`))
        const past = events
          .filter(({ at }) => Date.parse(at) <= instant)
          .sort(
            (a, b) =>
              Date.parse(a.at) - Date.parse(b.at) || order[a.kind] - order[b.kind] || (a.id < b.id ? -1 : 1),
          )
        for (const rigId of ['rig', 'other']) {
          for (const outletIndex of [0, 1]) {
            const isHere = (event: NozzleEvent) => event.rigId === rigId && event.outletIndex === outletIndex
            const index = past.findLastIndex((event) => event.kind === 'mounted' && isHere(event))
            const nozzleId = past[index]?.nozzleId
            const isGone = past
              .slice(index + 1)
              .some(
                (event) =>
                  event.nozzleId === nozzleId &&
                  (event.kind !== 'taken-off' || event.rigId === null || isHere(event)),
              )
            const found = mountedAt(read(events), rigId, outletIndex, instant)
            expect(found?.nozzleId).toBe(isGone ? undefined : nozzleId)
          }
        }
      }),
      { seed, numRuns: 500 },
    )
  })

  it('never have a nozzle in two places, and it is in service exactly where its last mount is open', () => {
    fc.assert(
      fc.property(eventsDrawn, (events) => {
        const { nozzles: all, outlets } = read(events)
        const lists = [...[...all.values()].map(({ mounts }) => mounts), ...outlets.values()]
        for (const mounts of lists) {
          mounts.forEach((mount, i) => {
            expect(mount.fromMs).toBeLessThan(mount.untilMs)
            if (i > 0) expect(mounts[i - 1]!.untilMs).toBeLessThanOrEqual(mount.fromMs)
          })
        }
        for (const { state, mounts } of all.values()) {
          expect(mounts.at(-1)?.until === null).toBe(state.kind === 'in-service')
        }
      }),
      { seed, numRuns: 500 },
    )
  })
})
