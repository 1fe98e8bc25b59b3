import { describe, expect, it } from 'vitest'
import { logNormalCdf, normalCdf, normalNodes } from '#shared/wear/normal.ts'

describe('the normal distribution', () => {
  it('is the printed table (Abramowitz and Stegun, table 26.1, from memory)', () => {
    expect(normalCdf(0)).toBeCloseTo(0.5, 15)
    expect(normalCdf(1)).toBeCloseTo(0.841344746068543, 14)
    expect(normalCdf(2)).toBeCloseTo(0.977249868051821, 14)
    expect(normalCdf(3)).toBeCloseTo(0.99865010196837, 14)
    expect(normalCdf(-1.2815515655446004)).toBeCloseTo(0.1, 14)
  })

  it('rises by its density, also where one form gives way to another', () => {
    for (const z of [-7.001, -5, -4.999, -1.7, 0.3, 2.9, 6.9995]) {
      const step = 1e-3
      const density = Math.exp((-z * z) / 2) / Math.sqrt(2 * Math.PI)
      const rise = (normalCdf(z + step) - normalCdf(z - step)) / (2 * step)
      // the difference quotient is off by (z² − 1) step²/6
      expect(Math.abs(rise - density)).toBeLessThan(1e-5 * density + 1e-13)
    }
  })

  it('has a logarithm far down, between the bounds of Mills', () => {
    for (const z of [5, 10, 40, 1e5]) {
      const upper = (-z * z) / 2 - Math.log(z * Math.sqrt(2 * Math.PI))
      expect(logNormalCdf(-z)).toBeLessThanOrEqual(upper)
      expect(logNormalCdf(-z)).toBeGreaterThanOrEqual(upper - 1 / (z * z))
    }
  })

  it('nodes give the moments of a normal', () => {
    const { z, weights } = normalNodes(0.9, 4.5)
    const moment = (power: number) => z.reduce((sum, value, i) => sum + weights[i]! * value ** power, 0)
    expect(moment(0)).toBeCloseTo(1, 12)
    expect(moment(2)).toBeCloseTo(1, 3)
    expect(moment(4)).toBeCloseTo(3, 1)
  })
})
