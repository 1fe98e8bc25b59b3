import { expect, test } from 'vitest'
import { ABRASIVES, BAG_MASS_KG, DISCHARGE_COEFFICIENTS, WET_BLAST } from '#shared/catalogue/media.ts'

// 1 lb/ft³ = 16.01846 kg/m³ (NIST SP 811, B.8). Ranges from memory, ordinary handbook ranges.
test.each([
  ['silica-sand', 90, 100],
  ['garnet', 130, 147],
  ['coal-slag', 80, 100],
  ['copper-slag', 100, 120],
  ['aluminium-oxide', 115, 130],
  ['steel-grit', 220, 250],
  ['sodium-bicarbonate', 60, 60],
])('%s weighs %d to %d lb/ft³ in bulk', (id, low, high) => {
  const density = ABRASIVES.find((abrasive) => abrasive.id === id)?.bulkDensityKgM3
  expect(density?.low).toBeCloseTo(low * 16.01846, 1)
  expect(density?.high).toBeCloseTo(high * 16.01846, 1)
  expect(density?.middle).toBeCloseTo(((low + high) / 2) * 16.01846, 1)
})

test('every abrasive is listed once with its middle inside its range', () => {
  expect(new Set(ABRASIVES.map((abrasive) => abrasive.id)).size).toBe(14)
  for (const { bulkDensityKgM3: density } of ABRASIVES) {
    expect(density.low <= density.middle && density.middle <= density.high).toBe(true)
  }
})

test('coefficients fall from clean air to heavy media, as the fit has it', () => {
  const values = DISCHARGE_COEFFICIENTS.map((coefficient) => coefficient.value)
  for (const [index, value] of values.entries()) expect(value).toBeLessThan(values[index - 1] ?? 1)
  // midway between the coefficients the two government points give, 0.780 and 0.844, to two digits
  const normal = DISCHARGE_COEFFICIENTS.find((coefficient) => coefficient.id === 'normal')
  expect(Math.abs((normal?.value ?? 0) - (0.78 + 0.844) / 2)).toBeLessThan(0.005)
})

test('a bag and a minute of water are what they are in pounds and gallons', () => {
  expect(BAG_MASS_KG.us).toBeCloseTo(22.67962, 5)
  expect(WET_BLAST.waterLPerMin).toBeCloseTo(1.892706, 6)
})
