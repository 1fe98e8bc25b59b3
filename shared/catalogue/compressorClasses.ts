import { KPA_PER_PSI, M3_PER_CUBIC_FOOT } from '#shared/units/quantities.ts'
import type { Sourced } from './source.ts'

export interface CompressorClass {
  ratedCfm: number
  ratedFreeAirM3Min: number
}

/** Common practice, no source: the size classes portable compressors are rented in. No maker's figures. */
export const COMPRESSOR_CLASSES: readonly CompressorClass[] = [
  90, 185, 210, 260, 375, 425, 600, 750, 825, 900, 1600,
].map((ratedCfm) => ({ ratedCfm, ratedFreeAirM3Min: ratedCfm * M3_PER_CUBIC_FOOT }))

export const SET_PRESSURES: readonly { psi: number; kpa: number }[] = [100, 125, 150].map((psi) => ({
  psi,
  kpa: psi * KPA_PER_PSI,
}))

export const COMPRESSOR_CLASS_SOURCE: Sourced = {
  source: 'size classes and set pressures of rental fleets',
  status: 'common practice, no source',
}

export const UNLOAD_SOURCE: Sourced = {
  source: 'unload 20 psi over set',
  status: 'common practice, no source',
}

/** Unload pressure where none is given: set + 20 psi, kPa gauge. */
export function defaultUnloadKpa(setKpa: number): number {
  return setKpa + 20 * KPA_PER_PSI
}

/** Line air above the site's air, K. */
export const LINE_TEMPERATURE_RISE_K = { aftercooled: 10, bare: 40 } as const
export const LINE_TEMPERATURE_RISE_SOURCE: Sourced = {
  source: 'ordinary rise after an aftercooler, and of a bare screw compressor',
  status: 'from memory',
}

/** Electric screw package, 18 to 22 kW per 100 cfm at 100 to 125 psig, as data sheets state it; the middle. */
const SPECIFIC_POWER_KW_PER_M3_MIN = { low: 6.4, high: 7.8 }
/** Diesel brake-specific fuel of non-road engines (US EPA NR-009d), up to and above 100 hp. */
const SMALL_ENGINE_KW = 75
const FUEL_G_PER_KWH = { small: 248, large: 223 }
const DIESEL_KG_PER_L = 0.84

export const FULL_LOAD_FUEL_SOURCE: Sourced = {
  source: 'specific power 6.4–7.8 kW per m³/min, diesel 248 or 223 g/kWh (NR-009d), 0.84 kg/L',
  status: 'from memory',
}

/**
 * Diesel burnt at full load, an editable estimate.
 *
 *   fuel = P · b / ρ        P = 7.1 · free air · (1 + (psi − 100)/200 above 100 psi)        L/h
 *
 * Inputs   free air m³/min · set pressure kPa gauge · b 248 g/kWh to 75 kW, 223 above · ρ 840 g/L
 * Valid    portable screw compressors near 100 to 150 psi; the step of b makes fuel drop 10 % just over 75 kW
 * Ignores  the engine's fan, altitude, wear; that the specific power is an electric package's
 * Source   as FULL_LOAD_FUEL_SOURCE, from memory; 1 % power per 2 psi: compressed-air practice, second-hand
 * Checked  tests/shared/catalogue/compressorClasses.test.ts
 */
export function fullLoadFuelLPerH(freeAirM3Min: number, setKpa: number): number {
  const specificPower = (SPECIFIC_POWER_KW_PER_M3_MIN.low + SPECIFIC_POWER_KW_PER_M3_MIN.high) / 2
  const psiOver100 = Math.max(0, setKpa / KPA_PER_PSI - 100)
  const powerKw = specificPower * freeAirM3Min * (1 + psiOver100 / 200)
  const gramsPerKwh = powerKw <= SMALL_ENGINE_KW ? FUEL_G_PER_KWH.small : FUEL_G_PER_KWH.large
  return (powerKw * gramsPerKwh) / (DIESEL_KG_PER_L * 1000)
}
