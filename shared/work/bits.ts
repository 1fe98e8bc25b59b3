import { bitsOf } from '../catalogue/drillBits.ts'
import type { Bit, BitSet } from '../catalogue/drillBits.ts'
import { BORE_TOLERANCE_MM } from '../units/quantities.ts'

export interface BitRow {
  bits: readonly Bit[]
  /** the biggest that should go through; -1 where even the smallest of the set should not */
  expectedIndex: number
}

/**
 * The bits to offer for "which is the biggest that goes all the way through?".
 *
 * Inputs   the set in the box · the bore that is expected, mm · how many, absent 5
 * Result   ascending, the biggest that should pass in the middle; at an end of the set the row is moved, not cut
 * Checked  tests/shared/work/bits.test.ts
 */
export function bitsAround(set: BitSet, expectedBoreMm: number, count = 5): BitRow {
  const all = bitsOf(set)
  const expected = all.findLastIndex(({ mm }) => mm <= expectedBoreMm + BORE_TOLERANCE_MM)
  const from = Math.max(0, Math.min(all.length - count, expected - Math.floor(count / 2)))
  return { bits: all.slice(from, from + count), expectedIndex: expected < 0 ? -1 : expected - from }
}

/** The next bit of the set: "does that one go?"; null after the biggest. */
export function nextBit(set: BitSet, mm: number): Bit | null {
  return bitsOf(set).find((bit) => bit.mm > mm + BORE_TOLERANCE_MM) ?? null
}
