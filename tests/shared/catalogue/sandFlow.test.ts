import fc from 'fast-check'
import { describe, expect, it, test } from 'vitest'
import { mediaFlowKgPerH } from '#shared/catalogue/media.ts'

const KPA_PER_PSI = 6.894757293168361
const LB = 0.45359237
const SAND = (95 * LB) / 0.028316846592

function lbPerH(boreIn: number, psi: number, bulkDensityKgM3 = SAND): number {
  return mediaFlowKgPerH({ boreMm: boreIn * 25.4, nozzleKpaGauge: psi * KPA_PER_PSI, bulkDensityKgM3 }) / LB
}

// Default tables of California air-district permit handbooks, from memory; lb/h of sand at 30 to 100 psi
const pressures = [30, 40, 50, 60, 70, 80, 90, 100]
describe.each<[string, number, number[]]>([
  ['1/8', 1 / 8, [28, 35, 42, 49, 55, 63, 70, 77]],
  ['3/16', 3 / 16, [65, 80, 94, 107, 122, 135, 149, 165]],
  ['1/4', 1 / 4, [109, 138, 168, 195, 221, 255, 280, 309]],
  ['5/16', 5 / 16, [205, 247, 292, 354, 377, 420, 462, 507]],
  ['3/8', 3 / 8, [285, 355, 417, 477, 540, 600, 657, 720]],
  ['7/16', 7 / 16, [385, 472, 560, 645, 755, 820, 905, 940]],
  ['1/2', 1 / 2, [503, 615, 725, 835, 945, 1050, 1160, 1265]],
  ['5/8', 5 / 8, [820, 990, 1170, 1336, 1510, 1680, 1850, 2030]],
  ['3/4', 3 / 4, [1140, 1420, 1670, 1915, 2160, 2400, 2630, 2880]],
  ['1', 1, [2030, 2460, 2900, 3340, 3780, 4200, 4640, 5060]],
])('%s in', (_, boreIn, row) => {
  it.each(row.map((flow, index) => [pressures[index] as number, flow]))(
    'at %d psi passes %d lb/h',
    (psi, flow) => {
      expect(Math.abs(lbPerH(boreIn, psi) - flow)).toBeLessThanOrEqual(1e-9 * flow)
    },
  )
})

test('half way between two pressures is the mean of them', () => {
  expect(lbPerH(3 / 8, 85)).toBeCloseTo((600 + 657) / 2, 9)
})

test('at the geometric mean of two bores the flow is the geometric mean', () => {
  expect(lbPerH(Math.sqrt((5 / 16) * (3 / 8)), 100)).toBeCloseTo(Math.sqrt(507 * 720), 6)
})

test('beyond the table: bore squared, absolute pressure', () => {
  expect(lbPerH(2, 100)).toBeCloseTo(4 * 5060, 6)
  expect(lbPerH(1 / 16, 100)).toBeCloseTo(77 / 4, 6)
  expect(lbPerH(3 / 8, 150)).toBeCloseTo((720 * 164.696) / 114.696, 2)
  expect(lbPerH(3 / 8, 10)).toBeCloseTo((285 * 24.696) / 44.696, 2)
})

test('no pressure or no bore passes nothing', () => {
  expect(lbPerH(3 / 8, 0)).toBe(0)
  expect(lbPerH(3 / 8, -5)).toBe(0)
  expect(lbPerH(0, 100)).toBe(0)
  expect(lbPerH(NaN, 100)).toBe(0)
})

test('more bore, pressure or density never passes less', () => {
  const bore = fc.double({ min: 0.04, max: 2.4, noNaN: true })
  const psi = fc.double({ min: 1, max: 500, noNaN: true })
  const more = fc.double({ min: 1, max: 1.5, noNaN: true })
  fc.assert(
    fc.property(bore, psi, more, (boreIn, pressure, factor) => {
      const flow = lbPerH(boreIn, pressure)
      const nearly = flow * (1 - 1e-12)
      expect(Number.isFinite(flow) && flow > 0).toBe(true)
      expect(lbPerH(boreIn * factor, pressure)).toBeGreaterThanOrEqual(nearly)
      expect(lbPerH(boreIn, pressure * factor)).toBeGreaterThanOrEqual(nearly)
      expect(lbPerH(boreIn, pressure, SAND * factor)).toBeCloseTo(flow * factor, 6)
    }),
    { numRuns: 2000 },
  )
})
