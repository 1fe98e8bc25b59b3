import type { Site } from './rig.ts'

/** Specific gas constant of dry air, J/(kg K). Source: ISO 2533 (287.05287, rounded). */
export const gasConstant = 287.05
/** Ratio of specific heats of air. */
export const heatRatio = 1.4
/** Water vapour over dry air, ratio of molar masses. */
const vapourMassRatio = 0.622
const zeroCelsiusK = 273.15

/** The air around the rig, derived once from the site. */
export interface Ambient {
  /** Pa absolute */
  pressurePa: number
  temperatureK: number
  /** partial pressure of water vapour, Pa */
  vapourPressurePa: number
  /** kg of dry air in a cubic metre of free air */
  dryAirDensity: number
}

/**
 * Pressure of the standard atmosphere at an altitude.
 *
 *   p = 101325 (1 − 2.25577e-5 h)^5.25588        Pa absolute
 *
 * Inputs   h altitude m
 * Valid    −430 to 5,000 m here (the standard: to 11,000 m)
 * Ignores  weather, which moves it by about ±2 %
 * Source   ISO 2533, close form        Checked  tests/reference/atmosphere.test.ts
 */
export function standardPressure(altitudeM: number): number {
  return 101325 * (1 - 2.25577e-5 * altitudeM) ** 5.25588
}

/**
 * Saturation pressure of water vapour.
 *
 *   p_sat = 610.94 exp(17.625 t / (t + 243.04))        Pa
 *
 * Inputs   T temperature K (t in °C)
 * Valid    −40 to 50 °C within 0.4 % (source); about 8 % high at 160 °C, where it only bounds the water to drain
 * Source   Alduchov and Eskridge 1996, Magnus form        Checked  tests/reference/atmosphere.test.ts
 */
export function saturationPressure(temperatureK: number): number {
  const t = temperatureK - zeroCelsiusK
  return 610.94 * Math.exp((17.625 * t) / (t + 243.04))
}

/**
 * Water vapour carried by dry air.
 *
 *   w = 0.622 p_v / (p − p_v)        kg/kg
 *
 * Inputs   vapour and total pressure Pa absolute, vapour below total
 * Source   Dalton, ratio of molar masses        Checked  tests/shared/airflow/cautions.test.ts
 */
export function humidityRatio(vapourPa: number, pressurePa: number): number {
  return (vapourMassRatio * vapourPa) / (pressurePa - vapourPa)
}

/**
 * The air at a site: pressure by the station barometer or else by altitude, and the dry air in a cubic metre of it.
 *
 *   ρd = (p − φ p_sat) / (R T)        kg/m³
 *
 * Inputs   site (altitude m, air temperature K, humidity 0 to 1, barometer Pa absolute)
 * Source   perfect gas, Dalton        Checked  tests/reference/atmosphere.test.ts
 */
export function resolveAmbient(site: Site): Ambient {
  const pressurePa = site.barometerPa ?? standardPressure(site.altitudeM)
  const humidity = site.relativeHumidity ?? 0
  const vapourPressurePa = humidity === 0 ? 0 : humidity * saturationPressure(site.airTemperatureK)
  return {
    pressurePa,
    temperatureK: site.airTemperatureK,
    vapourPressurePa,
    dryAirDensity: (pressurePa - vapourPressurePa) / (gasConstant * site.airTemperatureK),
  }
}

/**
 * Viscosity of air by Sutherland's law.
 *
 *   μ = 1.716e-5 (T / 273.15)^1.5 (273.15 + 110.4) / (T + 110.4)        Pa s
 *
 * Inputs   T temperature K        Valid  170 to 1,900 K, 2 %
 * Source   Sutherland's law with White's constants        Checked  tests/reference/atmosphere.test.ts
 */
export function viscosity(temperatureK: number): number {
  const ratio = temperatureK / 273.15
  return (1.716e-5 * ratio * Math.sqrt(ratio) * (273.15 + 110.4)) / (temperatureK + 110.4)
}
