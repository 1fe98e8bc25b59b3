import { describe, expect, it } from 'vitest'
import { forecastWear } from '#shared/wear/index.ts'
import type { BoreCheck } from '#shared/wear/index.ts'
import { limitBoreMm, newBoreMm, rate } from './simulate.ts'

const contradicts = (...checks: BoreCheck[]) =>
  forecastWear({
    newBoreMm,
    rate,
    checks,
    equivalentHoursNow: 200,
    equivalentHoursPerWeek: 20,
    limitBoreMm,
  }).contradictsPrior

const passed = (equivalentHours: number, mm: number): BoreCheck => ({
  equivalentHours,
  kind: 'bits',
  passedMm: mm,
  refusedMm: null,
})
const refused = (equivalentHours: number, mm: number): BoreCheck => ({
  equivalentHours,
  kind: 'bits',
  passedMm: null,
  refusedMm: mm,
})
const gauge = (equivalentHours: number, boreMm: number, accuracyMm = 0.1): BoreCheck => ({
  equivalentHours,
  kind: 'gauge',
  boreMm,
  accuracyMm,
})

/** 2.3263 standard deviations leave 1 % of a normal on one side */
const growthMm = rate.medianMmPerHour * 200
const largestMm = newBoreMm + growthMm * Math.exp(2.3263 * rate.logSigma)
const smallestMm = newBoreMm + growthMm * Math.exp(-2.3263 * rate.logSigma)

describe('a check that contradicts the table', () => {
  it('is none where there is none, or where nothing was tried', () => {
    expect(contradicts()).toBe(false)
    expect(contradicts({ equivalentHours: 50, kind: 'bits', passedMm: null, refusedMm: null })).toBe(false)
  })

  it('is a reading in the last hundredth of the prior, on either side', () => {
    const sharp = 0.002
    expect(contradicts(gauge(200, largestMm - 0.01, sharp))).toBe(false)
    expect(contradicts(gauge(200, largestMm + 0.01, sharp))).toBe(true)
    expect(contradicts(gauge(200, smallestMm + 0.01, sharp))).toBe(false)
    expect(contradicts(gauge(200, smallestMm - 0.01, sharp))).toBe(true)
  })

  it('is a bit too large that went through, or too small that did not', () => {
    // a feel of 0.05 mm blurs the edge by some hundredths of a millimetre
    expect(contradicts(passed(200, largestMm - 0.05))).toBe(false)
    expect(contradicts(passed(200, largestMm + 0.05))).toBe(true)
    expect(contradicts(refused(200, smallestMm + 0.05))).toBe(false)
    expect(contradicts(refused(200, smallestMm - 0.1))).toBe(true)
    expect(contradicts(refused(200, largestMm + 1), passed(200, newBoreMm - 1))).toBe(false)
  })

  it('counts the error of the gauge where it is wider than the prior', () => {
    // at 1 h the bore has not grown: 2.3263 · 0.49/1.96 = 0.58 mm
    expect(contradicts(gauge(1, newBoreMm + 0.56, 0.49))).toBe(false)
    expect(contradicts(gauge(1, newBoreMm + 0.61, 0.49))).toBe(true)
    expect(contradicts(gauge(0, newBoreMm + 0.56, 0.49))).toBe(false)
    expect(contradicts(gauge(0, newBoreMm + 0.61, 0.49))).toBe(true)
  })

  it('is a bore that shrinks by over three times the feel, whatever the order they are told in', () => {
    const earlier = passed(180, 10.3)
    expect(contradicts(earlier, refused(200, 10.3 - 0.14))).toBe(false)
    expect(contradicts(earlier, refused(200, 10.3 - 0.16))).toBe(true)
    expect(contradicts(refused(200, 10.3 - 0.16), earlier)).toBe(true)
    // the other way round it has grown
    expect(contradicts(refused(160, 10.3 - 0.16), earlier)).toBe(false)
  })

  it('two checks of the same hours shrink either way', () => {
    expect(contradicts(passed(180, 10.3), refused(180, 10.1))).toBe(true)
    expect(contradicts(refused(180, 10.1), passed(180, 10.3))).toBe(true)
  })

  it('two gauges have to differ by three deviations of their difference', () => {
    // 3 · √2 · 0.196/1.96 = 0.424 mm
    expect(contradicts(gauge(180, 10.5, 0.196), gauge(200, 10.09, 0.196))).toBe(false)
    expect(contradicts(gauge(180, 10.5, 0.196), gauge(200, 10.06, 0.196))).toBe(true)
  })
})
