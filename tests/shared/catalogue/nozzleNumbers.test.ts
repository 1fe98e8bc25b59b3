import { expect, test } from 'vitest'
import {
  boreMmOfNumber,
  nearestNumberAtOrUnder,
  nozzleNumberOf,
  NOZZLE_NUMBERS,
} from '#shared/catalogue/nozzleNumbers.ts'

// common practice, no source: the number is the bore in sixteenths of an inch
test.each([
  [2, 3.175],
  [3, 4.7625],
  [4, 6.35],
  [5, 7.9375],
  [6, 9.525],
  [7, 11.1125],
  [8, 12.7],
  [10, 15.875],
  [12, 19.05],
  [16, 25.4],
])('No. %d is %d mm', (number, mm) => {
  expect(boreMmOfNumber(number)).toBe(mm)
  expect(nozzleNumberOf(mm)).toBe(number)
})

test('numbers run from 2 to 16 without a gap', () => {
  expect([...NOZZLE_NUMBERS]).toEqual(Array.from({ length: 15 }, (_, index) => index + 2))
})

test('a bore between two numbers has no number, and half a micrometre does not matter', () => {
  expect(nozzleNumberOf(9.921875)).toBeNull()
  expect(nozzleNumberOf(9.5254)).toBe(6)
  expect(nozzleNumberOf(9.5256)).toBeNull()
  expect(nozzleNumberOf(NaN)).toBeNull()
})

test('the nozzle at or under a bore is the largest that fits', () => {
  expect(nearestNumberAtOrUnder(9.921875)).toBe(6)
  expect(nearestNumberAtOrUnder(9.525)).toBe(6)
  expect(nearestNumberAtOrUnder(9.5246)).toBe(6)
  expect(nearestNumberAtOrUnder(9.52)).toBe(5)
  expect(nearestNumberAtOrUnder(3)).toBeNull()
  expect(nearestNumberAtOrUnder(60)).toBe(16)
})
