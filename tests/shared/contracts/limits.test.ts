import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { snapTo64ths } from '#shared/contracts/limits.ts'

describe('a nozzle length in millimetres', () => {
  it.each([
    [9.525, 9.525],
    [9.5255, 9.525],
    [9.5245, 9.525],
    [9.5256, 9.5256],
    [9.92, 9.92],
    [8, 8],
    [6.747, 6.746875],
  ])('of %s is taken as %s', (given, taken) => {
    expect(snapTo64ths(given)).toBe(taken)
  })

  it('rounded to a thousandth is the exact 64th again', () => {
    fc.assert(
      fc.property(fc.integer({ min: 3, max: 151 }), (sixtyFourths) => {
        const exact = Number((sixtyFourths * 0.396875).toFixed(6))
        expect(snapTo64ths(Number(exact.toFixed(3)))).toBe(exact)
      }),
    )
  })

  it('moves by 0.0005 at most, and a second time not at all', () => {
    fc.assert(
      fc.property(fc.double({ min: 1, max: 60, noNaN: true }), (lengthMm) => {
        const snapped = snapTo64ths(lengthMm)
        expect(Math.abs(snapped - lengthMm)).toBeLessThanOrEqual(0.000500001)
        expect(snapTo64ths(snapped)).toBe(snapped)
      }),
    )
  })
})
