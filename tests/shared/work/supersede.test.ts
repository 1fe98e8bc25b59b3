import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { dropSuperseded } from '#shared/work/index.ts'
import { seed, utc } from './madeUp.ts'

const record = (id: string, day: number, supersedesId: string | null = null) => ({
  id,
  at: utc(day),
  supersedesId,
})
const currentIds = (records: ReturnType<typeof record>[]) =>
  dropSuperseded(records).map(({ current }) => current.id)

describe('of records that correct each other', () => {
  it('the last correction of a chain counts, and remembers what was written first', () => {
    const chain = [record('c', 3, 'b'), record('a', 1), record('b', 2, 'a')]
    expect(dropSuperseded(chain)).toEqual([{ current: chain[0], first: chain[1] }])
  })

  it('a correction counts though its clock is behind that of what it corrects', () => {
    expect(currentIds([record('a', 5), record('b', 2, 'a')])).toEqual(['b'])
  })

  it('the later of two people’s corrections counts, and not both', () => {
    expect(currentIds([record('a', 1), record('b', 4, 'a'), record('c', 3, 'a')])).toEqual(['b'])
  })

  it('two corrections of one that has not arrived are still of one', () => {
    expect(currentIds([record('b', 2, 'a'), record('c', 3, 'a')])).toEqual(['c'])
  })

  it('a ring of corrections ends in its latest', () => {
    expect(currentIds([record('a', 1, 'b'), record('b', 2, 'a'), record('c', 3, 'c')])).toEqual(['b', 'c'])
  })

  it('any order and repeats give the same, and as many as there are things that nothing joins', () => {
    const ids = ['a', 'b', 'c', 'd', 'e', 'f', 'g', 'h']
    const records = fc
      .array(
        fc.record({ day: fc.integer({ min: 1, max: 9 }), of: fc.option(fc.integer({ min: 0, max: 7 })) }),
        {
          minLength: 8,
          maxLength: 8,
        },
      )
      .map((drawn) => drawn.map(({ day, of }, i) => record(ids[i]!, day, of === null ? null : ids[of]!)))
    const shuffled = records.chain((all) =>
      fc.record({
        all: fc.constant(all),
        again: fc.shuffledSubarray([...all, ...all], { minLength: 16, maxLength: 16 }),
      }),
    )
    fc.assert(
      fc.property(shuffled, ({ all, again }) => {
        expect(dropSuperseded(again)).toEqual(dropSuperseded(all))
        // things that are joined, counted by spreading the smallest number along the corrections
        const groups = new Map(all.map(({ id }, i) => [id, i]))
        for (let round = 0; round < all.length; round++) {
          for (const { id, supersedesId } of all) {
            const least = Math.min(groups.get(id)!, groups.get(supersedesId ?? id)!)
            groups.set(id, least)
            groups.set(supersedesId ?? id, least)
          }
        }
        expect(dropSuperseded(all)).toHaveLength(new Set(groups.values()).size)
      }),
      { seed, numRuns: 300 },
    )
  })
})
