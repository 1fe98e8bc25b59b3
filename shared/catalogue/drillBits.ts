import { BORE_TOLERANCE_MM, mmOfInches } from '#shared/units/quantities.ts'
import { formatBoreFraction } from '#shared/units/format.ts'
import type { Sourced } from './source.ts'

export interface Bit {
  /** as the trade says it: `25/64`, `9.5 mm`, `W`, `#7` */
  name: string
  mm: number
}

export const BIT_SETS = [
  'fractional-64',
  'fractional-32',
  'metric-0.5',
  'metric-0.1',
  'number-letter',
] as const
export type BitSet = (typeof BIT_SETS)[number]

export const BIT_SET_SOURCES: Record<BitSet, Sourced> = {
  'fractional-64': { source: 'sixty-fourths of an inch, exact', status: 'published' },
  'fractional-32': { source: 'thirty-seconds of an inch, exact', status: 'published' },
  'metric-0.5': { source: 'half millimetres, exact', status: 'published' },
  'metric-0.1': { source: 'tenths of a millimetre to 14 mm, halves above; exact', status: 'published' },
  'number-letter': { source: 'number and letter sizes as in ASME B94.11M', status: 'from memory' },
}

/** Inches, ASME B94.11M, from memory. From 3/16 in up, as every set here. */
const NUMBER_LETTER_INCHES: readonly (readonly [string, number])[] = [
  ['#12', 0.189],
  ['#11', 0.191],
  ['#10', 0.1935],
  ['#9', 0.196],
  ['#8', 0.199],
  ['#7', 0.201],
  ['#6', 0.204],
  ['#5', 0.2055],
  ['#4', 0.209],
  ['#3', 0.213],
  ['#2', 0.221],
  ['#1', 0.228],
  ['A', 0.234],
  ['B', 0.238],
  ['C', 0.242],
  ['D', 0.246],
  ['E', 0.25],
  ['F', 0.257],
  ['G', 0.261],
  ['H', 0.266],
  ['I', 0.272],
  ['J', 0.277],
  ['K', 0.281],
  ['L', 0.29],
  ['M', 0.295],
  ['N', 0.302],
  ['O', 0.316],
  ['P', 0.323],
  ['Q', 0.332],
  ['R', 0.339],
  ['S', 0.348],
  ['T', 0.358],
  ['U', 0.368],
  ['V', 0.377],
  ['W', 0.386],
  ['X', 0.397],
  ['Y', 0.404],
  ['Z', 0.413],
]

/** first/per, (first + 1)/per … last/per */
function steps(first: number, last: number, per: number): number[] {
  return Array.from({ length: last - first + 1 }, (_, index) => (first + index) / per)
}

function fractionalBits(per: 64 | 32): Bit[] {
  const sizes = steps((per * 3) / 16, (per * 3) / 4, per).map(mmOfInches)
  return sizes.map((mm) => ({ name: formatBoreFraction(mm) ?? '', mm }))
}

function metricBits(sizes: readonly number[]): Bit[] {
  return sizes.map((mm) => ({ name: `${mm} mm`, mm }))
}

const BITS: Record<BitSet, readonly Bit[]> = {
  'fractional-64': fractionalBits(64),
  'fractional-32': fractionalBits(32),
  'metric-0.5': metricBits(steps(10, 38, 2)),
  'metric-0.1': metricBits([...steps(48, 140, 10), ...steps(29, 38, 2)]),
  'number-letter': NUMBER_LETTER_INCHES.map(([name, inches]) => ({ name, mm: mmOfInches(inches) })),
}

/** The bits of a set from 3/16 to 3/4 in, ascending. */
export function bitsOf(set: BitSet): readonly Bit[] {
  return BITS[set]
}

/**
 * The smallest bit over the limit bore: if it goes all the way through, stop using the nozzle at that pressure.
 * A bit within 0.0005 mm of the limit is at it, not over it. Null when the set has none.
 */
export function noGoBit(limitMm: number, set: BitSet): Bit | null {
  return BITS[set].find((bit) => bit.mm > limitMm + BORE_TOLERANCE_MM) ?? null
}

/**
 * The largest bit at or under the limit bore and over the new bore: when it goes through, order the next nozzle.
 * Null when there is none between the two.
 */
export function orderBit(limitMm: number, newBoreMm: number, set: BitSet): Bit | null {
  const bit = BITS[set].findLast((candidate) => candidate.mm <= limitMm + BORE_TOLERANCE_MM)
  return bit && bit.mm > newBoreMm + BORE_TOLERANCE_MM ? bit : null
}
