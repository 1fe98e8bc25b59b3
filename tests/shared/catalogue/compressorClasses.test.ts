import { expect, test } from 'vitest'
import {
  COMPRESSOR_CLASSES,
  defaultUnloadKpa,
  fullLoadFuelLPerH,
  SET_PRESSURES,
} from '#shared/catalogue/compressorClasses.ts'

const CFM = 0.028316846592
const PSI = 6.894757293168361

test('classes and set pressures ascend, and carry the cfm they are asked for by', () => {
  expect(COMPRESSOR_CLASSES.map((size) => size.ratedCfm)).toEqual([
    90, 185, 210, 260, 375, 425, 600, 750, 825, 900, 1600,
  ])
  for (const size of COMPRESSOR_CLASSES) expect(size.ratedFreeAirM3Min / CFM).toBeCloseTo(size.ratedCfm, 9)
  expect(SET_PRESSURES.map((set) => set.kpa / PSI)).toEqual(
    [100, 125, 150].map((psi) => expect.closeTo(psi, 9)),
  )
})

test('a compressor set at 100 psi unloads at 120 where nothing else is known', () => {
  expect(defaultUnloadKpa(100 * PSI) / PSI).toBeCloseTo(120, 9)
})

test('full-load fuel is power times specific fuel: figures worked by hand', () => {
  // 185 cfm = 5.2386 m³/min × 7.1 = 37.19 kW × 248 g/kWh = 9,224 g/h / 840 g/L = 10.98 L/h
  expect(fullLoadFuelLPerH(185 * CFM, 100 * PSI)).toBeCloseTo(10.98, 2)
  // at 150 psi a quarter more power: 46.49 kW, 13.73 L/h
  expect(fullLoadFuelLPerH(185 * CFM, 150 * PSI)).toBeCloseTo(13.73, 2)
  // 750 cfm = 21.238 m³/min × 7.1 = 150.79 kW × 223 = 33,626 g/h / 840 = 40.03 L/h
  expect(fullLoadFuelLPerH(750 * CFM, 100 * PSI)).toBeCloseTo(40.03, 2)
  // under 100 psi nothing is taken off
  expect(fullLoadFuelLPerH(185 * CFM, 80 * PSI)).toBeCloseTo(10.98, 2)
  expect(fullLoadFuelLPerH(0, 100 * PSI)).toBe(0)
})

test('each class burns more than the class under it', () => {
  for (const { kpa } of SET_PRESSURES) {
    const fuel = COMPRESSOR_CLASSES.map((size) => fullLoadFuelLPerH(size.ratedFreeAirM3Min, kpa))
    for (const [index, value] of fuel.entries()) expect(value).toBeGreaterThan(fuel[index - 1] ?? 0)
  }
})
