import fc from 'fast-check'
import { describe, expect, it, test } from 'vitest'
import { HOSE_LENGTHS, HOSE_SIZES, hoseElement, lossKFromMeasured } from '#shared/catalogue/hoses.ts'

const R = 287.05

test('hose bores ascend and are the inch value whichever name they go by', () => {
  expect(HOSE_SIZES.map((size) => size.inchName)).toEqual(['1/2', '3/4', '1', '1 1/4', '1 1/2', '2'])
  expect(HOSE_SIZES.map((size) => size.insideDiameterMm)).toEqual(
    [12.7, 19.05, 25.4, 31.75, 38.1, 50.8].map((mm) => expect.closeTo(mm, 10)),
  )
  for (const size of HOSE_SIZES) {
    expect(Math.abs(Number(size.metricName) - size.insideDiameterMm)).toBeLessThan(1)
  }
  expect(HOSE_LENGTHS.map((length) => length.lengthM)).toEqual(
    [3.048, 7.62, 15.24, 30.48].map((m) => expect.closeTo(m, 10)),
  )
})

test('50 ft of 1 1/4 in with two couplings is one element with K 2', () => {
  const hose = { insideDiameterMm: 31.75, lengthM: 15.24, couplings: 2 }
  expect(hoseElement(hose)).toEqual({ insideDiameterMm: 31.75, lengthM: 15.24, lossK: 2 })
})

describe('a measured drop', () => {
  const measured = {
    dropKpa: 5 * 6.894757293168361,
    freeAirM3Min: 185 * 0.028316846592,
    inletKpaGauge: 100 * 6.894757293168361,
    insideDiameterMm: 31.75,
    ambientKpa: 101.325,
    temperatureK: 294.26,
  }

  it('of 5 psi at 185 cfm is near the incompressible ΔP / (½ρV²) at mean density', () => {
    // independent of the formula: velocity heads at the mean line density, textbook incompressible flow
    const area = (Math.PI / 4) * 0.03175 ** 2
    const meanPa = (measured.inletKpaGauge + measured.ambientKpa - measured.dropKpa / 2) * 1000
    const density = meanPa / (R * measured.temperatureK)
    const massFlow = ((measured.freeAirM3Min / 60) * 101325) / (R * measured.temperatureK)
    const head = massFlow ** 2 / (2 * density * area ** 2)
    const heads = (measured.dropKpa * 1000) / head
    const result = lossKFromMeasured(measured)
    expect(result.ok).toBe(true)
    // the acceleration of the expanding air takes 2 ln(p1/p2) ≈ 0.09 heads of it
    if (result.ok) expect(Math.abs(heads - result.lossK)).toBeLessThan(0.1)
  })

  it('gives back the K that made it', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0.5, max: 60, noNaN: true }),
        fc.double({ min: 0.05, max: 0.4, noNaN: true }),
        fc.double({ min: 400, max: 1500, noNaN: true }),
        (lossK, mach, inletKpaGauge) => {
          // march the differential equation p dp = −½ G²RT dK + G²RT dp/p by small steps from the inlet
          const p1 = (inletKpaGauge + 101.325) * 1000
          const g2rt = (mach * 0.3 * p1) ** 2
          let p = p1
          const steps = 4000
          for (let step = 0; step < steps; step += 1) {
            const slope = (pressure: number) => (-0.5 * g2rt) / (pressure - g2rt / pressure)
            const half = p + (slope(p) * lossK) / steps / 2
            p += (slope(half) * lossK) / steps
            fc.pre(p > 1.2 * Math.sqrt(g2rt))
          }
          const dropKpa = (p1 - p) / 1000
          fc.pre(dropKpa < inletKpaGauge * 0.95)
          const massFlux = Math.sqrt(g2rt / (R * 300))
          const freeAirM3Min = ((massFlux * (Math.PI / 4) * 0.025 ** 2 * R * 300) / 101325) * 60
          const result = lossKFromMeasured({
            dropKpa,
            freeAirM3Min,
            inletKpaGauge,
            insideDiameterMm: 25,
            ambientKpa: 101.325,
            temperatureK: 300,
          })
          expect(result.ok).toBe(true)
          if (result.ok) expect(Math.abs(result.lossK / lossK - 1)).toBeLessThan(1e-5)
        },
      ),
      { numRuns: 200 },
    )
  })

  it('that is all the pressure there is, or more, says the most that is possible', () => {
    for (const dropKpa of [measured.inletKpaGauge, 2000]) {
      expect(lossKFromMeasured({ ...measured, dropKpa })).toEqual({
        ok: false,
        problem: 'drop-too-large',
        largestDropKpa: measured.inletKpaGauge,
      })
    }
  })

  it('through a bore that so much air cannot pass is refused, and just under the limit is not', () => {
    const thin = { ...measured, insideDiameterMm: 11, dropKpa: 500 }
    const refused = lossKFromMeasured(thin)
    expect(refused).toMatchObject({ problem: 'drop-too-large' })
    if (refused.ok || refused.problem !== 'drop-too-large') throw new Error('it was not refused')
    expect(refused.largestDropKpa).toBeGreaterThan(0)
    expect(refused.largestDropKpa).toBeLessThan(500)
    expect(lossKFromMeasured({ ...thin, dropKpa: refused.largestDropKpa * 0.999 }).ok).toBe(true)
    expect(lossKFromMeasured({ ...thin, dropKpa: refused.largestDropKpa * 1.001 }).ok).toBe(false)
    expect(lossKFromMeasured({ ...thin, insideDiameterMm: 3 })).toMatchObject({ largestDropKpa: 0 })
  })

  it('of nothing, or of what is not a number, is refused', () => {
    for (const key of Object.keys(measured)) {
      for (const value of [0, -1, NaN, Infinity]) {
        expect(lossKFromMeasured({ ...measured, [key]: value })).toEqual({
          ok: false,
          problem: 'not-positive',
        })
      }
    }
  })
})
