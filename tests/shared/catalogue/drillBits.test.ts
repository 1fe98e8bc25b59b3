import fc from 'fast-check'
import { describe, expect, it, test } from 'vitest'
import { BIT_SETS, bitsOf, noGoBit, orderBit, type BitSet } from '#shared/catalogue/drillBits.ts'

const sets = fc.constantFrom<BitSet>(...BIT_SETS)

function sizeOf(set: BitSet, name: string): number | undefined {
  return bitsOf(set).find((bit) => bit.name === name)?.mm
}

// Twist drill decimal equivalents as handbooks print them, four decimals of a millimetre.
test.each<[BitSet, string, number]>([
  ['fractional-64', '3/16', 4.7625],
  ['fractional-64', '13/64', 5.1594],
  ['fractional-64', '1/4', 6.35],
  ['fractional-64', '17/64', 6.7469],
  ['fractional-64', '5/16', 7.9375],
  ['fractional-64', '21/64', 8.3344],
  ['fractional-64', '23/64', 9.1281],
  ['fractional-64', '3/8', 9.525],
  ['fractional-64', '25/64', 9.9219],
  ['fractional-64', '13/32', 10.3187],
  ['fractional-64', '27/64', 10.7156],
  ['fractional-64', '7/16', 11.1125],
  ['fractional-64', '1/2', 12.7],
  ['fractional-64', '9/16', 14.2875],
  ['fractional-64', '5/8', 15.875],
  ['fractional-64', '47/64', 18.6531],
  ['fractional-64', '3/4', 19.05],
  ['fractional-32', '3/16', 4.7625],
  ['fractional-32', '7/32', 5.5562],
  ['fractional-32', '11/32', 8.7312],
  ['fractional-32', '13/32', 10.3187],
  ['fractional-32', '3/4', 19.05],
  ['metric-0.5', '5 mm', 5],
  ['metric-0.5', '9.5 mm', 9.5],
  ['metric-0.5', '19 mm', 19],
  ['metric-0.1', '4.8 mm', 4.8],
  ['metric-0.1', '9 mm', 9],
  ['metric-0.1', '9.9 mm', 9.9],
  ['metric-0.1', '14 mm', 14],
  ['metric-0.1', '14.5 mm', 14.5],
  // ASME B94.11M, from memory: inches × 25.4
  ['number-letter', '#12', 4.8006],
  ['number-letter', '#7', 5.1054],
  ['number-letter', '#5', 5.2197],
  ['number-letter', '#1', 5.7912],
  ['number-letter', 'A', 5.9436],
  ['number-letter', 'E', 6.35],
  ['number-letter', 'F', 6.5278],
  ['number-letter', 'Q', 8.4328],
  ['number-letter', 'W', 9.8044],
  ['number-letter', 'Z', 10.4902],
])('%s: %s is %d mm', (set, name, mm) => {
  // half a printed digit, and a little for prints that round an exact half down
  expect(Math.abs((sizeOf(set, name) ?? NaN) - mm)).toBeLessThanOrEqual(0.00005 + 1e-9)
})

describe('each set', () => {
  it.each(BIT_SETS)('%s ascends from 3/16 to 3/4 in, each name once', (set) => {
    const bits = bitsOf(set)
    for (const [index, bit] of bits.entries()) {
      expect(bit.mm).toBeGreaterThan(bits[index - 1]?.mm ?? 4.7624)
      expect(bit.mm).toBeLessThan(19.0501)
      expect(bit.name).not.toBe('')
    }
    expect(new Set(bits.map((bit) => bit.name)).size).toBe(bits.length)
  })

  it('has as many bits as there are sizes', () => {
    expect(BIT_SETS.map((set) => bitsOf(set).length)).toEqual([
      48 - 12 + 1,
      24 - 6 + 1,
      (19 - 5) * 2 + 1,
      140 - 48 + 1 + (19 - 14) * 2,
      12 + 26,
    ])
  })

  it('runs the number sizes down and then the letters up', () => {
    const numbers = Array.from({ length: 12 }, (_, index) => `#${12 - index}`)
    expect(bitsOf('number-letter').map((bit) => bit.name)).toEqual([
      ...numbers,
      ...'ABCDEFGHIJKLMNOPQRSTUVWXYZ',
    ])
  })
})

describe('a No. 6 with a limit bore', () => {
  const newBoreMm = 9.525

  it('of 9.8 mm: 25/64 going through stops it, and no bit in 64ths warns before', () => {
    expect(noGoBit(9.8, 'fractional-64')?.name).toBe('25/64')
    expect(orderBit(9.8, newBoreMm, 'fractional-64')).toBeNull()
    expect(orderBit(9.81, newBoreMm, 'number-letter')?.name).toBe('W')
    expect(orderBit(9.8, newBoreMm, 'metric-0.1')?.name).toBe('9.8 mm')
  })

  it('exactly at 25/64: that bit warns, the next one stops it', () => {
    expect(orderBit(9.921875, newBoreMm, 'fractional-64')?.name).toBe('25/64')
    expect(orderBit(9.9215, newBoreMm, 'fractional-64')?.name).toBe('25/64')
    expect(noGoBit(9.9215, 'fractional-64')?.name).toBe('13/32')
  })

  it('over the largest bit has no no-go bit', () => {
    for (const set of BIT_SETS) expect(noGoBit(19.06, set)).toBeNull()
  })
})

test('no bit lies between the order bit and the no-go bit, and neither is on the wrong side', () => {
  fc.assert(
    fc.property(
      sets,
      fc.double({ min: 1, max: 25, noNaN: true }),
      fc.double({ min: 1, max: 25, noNaN: true }),
      (set, limitMm, newBoreMm) => {
        const noGo = noGoBit(limitMm, set)
        const order = orderBit(limitMm, newBoreMm, set)
        if (noGo) expect(noGo.mm).toBeGreaterThan(limitMm)
        if (order) {
          expect(order.mm).toBeLessThanOrEqual(limitMm + 0.0005)
          expect(order.mm).toBeGreaterThan(newBoreMm)
        }
        for (const { mm } of bitsOf(set)) {
          const isOver = mm > limitMm + 0.0005
          if (isOver) expect(noGo && noGo.mm <= mm).toBe(true)
          else if (mm > newBoreMm + 0.0005) expect(order && order.mm >= mm).toBe(true)
        }
      },
    ),
    { numRuns: 2000 },
  )
})
