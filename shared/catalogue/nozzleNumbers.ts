import { BORE_TOLERANCE_MM, mmOfInches } from '#shared/units/quantities.ts'
import type { Sourced } from './source.ts'

/** Common practice, no source: a nozzle's number is its bore in sixteenths of an inch. */
export const NOZZLE_NUMBER_SOURCE: Sourced = {
  source: 'a nozzle number is the bore in sixteenths of an inch',
  status: 'common practice, no source',
}

export const NOZZLE_NUMBERS = [2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 12, 13, 14, 15, 16] as const

/** Bore of a nozzle number, n · 25.4 / 16 mm. */
export function boreMmOfNumber(number: number): number {
  return mmOfInches(number / 16)
}

/** The nozzle number of this bore, within 0.0005 mm, or null. */
export function nozzleNumberOf(boreMm: number): number | null {
  return (
    NOZZLE_NUMBERS.find((number) => Math.abs(boreMmOfNumber(number) - boreMm) <= BORE_TOLERANCE_MM) ?? null
  )
}

/** The largest nozzle number whose bore is at or under this one; null under No. 2. */
export function nearestNumberAtOrUnder(boreMm: number): number | null {
  return NOZZLE_NUMBERS.findLast((number) => boreMmOfNumber(number) <= boreMm + BORE_TOLERANCE_MM) ?? null
}
