import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { BIT_SETS, bitsOf } from '#shared/catalogue/drillBits.ts'
import { bitsAround, nextBit } from '#shared/work/index.ts'
import { seed } from './madeUp.ts'

const names = (...parameters: Parameters<typeof bitsAround>) =>
  bitsAround(...parameters).bits.map(({ name }) => name)

describe('the row of bits', () => {
  it('has the biggest that should go through in its middle', () => {
    expect(names('fractional-64', 9.6)).toEqual(['11/32', '23/64', '3/8', '25/64', '13/32'])
    expect(bitsAround('fractional-64', 9.6).expectedIndex).toBe(2)
    expect(names('metric-0.5', 9.6, 3)).toEqual(['9 mm', '9.5 mm', '10 mm'])
  })

  it('takes a bore of exactly a bit as one that it passes', () => {
    const { bits, expectedIndex } = bitsAround('fractional-64', 9.525)
    expect(bits[expectedIndex]!.name).toBe('3/8')
  })

  it('is moved at the ends of the set, not cut', () => {
    expect(names('fractional-64', 3)).toEqual(['3/16', '13/64', '7/32', '15/64', '1/4'])
    expect(bitsAround('fractional-64', 3).expectedIndex).toBe(-1)
    const { bits, expectedIndex } = bitsAround('fractional-32', 40)
    expect(bits[expectedIndex]!.name).toBe('3/4')
    expect(bits).toHaveLength(5)
  })

  it('is a piece of the set that holds the expected bore, whatever bore that is', () => {
    const drawn = fc.record({
      set: fc.constantFrom(...BIT_SETS),
      bore: fc.integer({ min: 4800, max: 19000 }).map((thousandths) => thousandths / 1000),
      count: fc.integer({ min: 2, max: 9 }),
    })
    fc.assert(
      fc.property(drawn, ({ set, bore, count }) => {
        const { bits, expectedIndex } = bitsAround(set, bore, count)
        const all = bitsOf(set)
        const from = all.indexOf(bits[0]!)
        expect(bits).toEqual(all.slice(from, from + count))
        if (expectedIndex < 0) expect(all[0]!.mm).toBeGreaterThan(bore)
        else {
          expect(bits[expectedIndex]!.mm).toBeLessThanOrEqual(bore + 0.00051)
          const next = nextBit(set, bits[expectedIndex]!.mm)
          if (next) expect(next.mm).toBeGreaterThan(bore)
        }
      }),
      { seed, numRuns: 500 },
    )
  })

  it('knows the next bit, and none after the biggest', () => {
    expect(nextBit('fractional-64', 9.525)!.name).toBe('25/64')
    expect(nextBit('number-letter', 9.8044)!.name).toBe('X')
    expect(nextBit('fractional-64', 19.05)).toBeNull()
  })
})
