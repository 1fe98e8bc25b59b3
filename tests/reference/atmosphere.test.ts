import { describe, expect, it } from 'vitest'
import { resolveAmbient, saturationPressure, standardPressure, viscosity } from '#shared/airflow/ambient.ts'

describe('the standard atmosphere', () => {
  // ISO 2533 / US Standard Atmosphere 1976 by geometric altitude, kPa; the close form counts geopotential metres, which
  // puts it 0.013 kPa apart at 3,000 m
  it.each([
    [0, 101.325],
    [500, 95.461],
    [1000, 89.876],
    [1500, 84.56],
    [1600, 83.528],
    [2000, 79.501],
    [2500, 74.692],
    [3000, 70.121],
    // US Standard Atmosphere 1976, table of geopotential altitude, from memory
    [4000, 61.64],
    [5000, 54.02],
  ])('at %i m is %d kPa', (altitudeM, kpa) => {
    expect(Math.abs(standardPressure(altitudeM) / 1000 - kpa)).toBeLessThan(0.0135)
  })

  it('gives the density of the standard day, 1.225 kg/m³ at sea level and 15 °C', () => {
    expect(resolveAmbient({ altitudeM: 0, airTemperatureK: 288.15 }).dryAirDensity).toBeCloseTo(1.225, 3)
  })

  it('gives the table of ISO 2533 at 2,000 m: 1.00655 kg/m³ at 275.154 K', () => {
    const { dryAirDensity } = resolveAmbient({ altitudeM: 2000, airTemperatureK: 275.154 })
    expect(Math.abs(dryAirDensity / 1.00655 - 1)).toBeLessThan(2e-4)
  })
})

describe('dry air in free air', () => {
  it('at 30 °C and 70 % is 1.130 kg in a cubic metre', () => {
    // saturation 4,247 Pa (steam tables, from memory): (101325 − 0.7 · 4247) / (287.05 · 303.15) = 1.1302
    const humid = resolveAmbient({ altitudeM: 0, airTemperatureK: 303.15, relativeHumidity: 0.7 })
    expect(humid.dryAirDensity).toBeCloseTo(1.1302, 3)
  })

  it('by a barometer is the barometer’s, whatever the altitude', () => {
    const site = { altitudeM: 1600, airTemperatureK: 288.15, barometerPa: 90000 }
    expect(resolveAmbient(site).dryAirDensity).toBeCloseTo(90000 / (287.05 * 288.15), 9)
  })
})

describe('saturation pressure of water', () => {
  // IAPWS steam tables, Pa, from memory. The formula's own claim is 0.4 % from −40 to 50 °C.
  it.each([
    [0, 611.2, 0.004],
    [10, 1228, 0.004],
    [20, 2339, 0.004],
    [30, 4247, 0.004],
    [40, 7385, 0.004],
    [50, 12352, 0.004],
    [60, 19946, 0.006],
    [100, 101420, 0.03],
    [160, 618230, 0.1],
  ])('at %d °C is %d Pa', (celsius, pascal, part) => {
    const residual = saturationPressure(celsius + 273.15) / pascal - 1
    if (Math.abs(residual) > 0.004) {
      console.info(`saturation pressure at ${celsius} °C: ${(residual * 100).toFixed(2)} %`)
    }
    expect(Math.abs(residual)).toBeLessThan(part)
  })
})

describe('viscosity of air', () => {
  // Air at 1 atm in Incropera and DeWitt, Fundamentals of Heat and Mass Transfer, table A.4, 1e-7 Pa s, from memory.
  // The law's own claim is 2 %.
  it.each([
    [250, 159.6],
    [300, 184.6],
    [350, 208.2],
    [400, 230.1],
  ])('at %i K is %d e-7 Pa s', (kelvin, tenMillionths) => {
    expect(Math.abs(viscosity(kelvin) / (tenMillionths * 1e-7) - 1)).toBeLessThan(0.01)
  })
})
