/** What one hour of blasting takes, and what it is worked out from. */
export interface HourUseInput {
  /** free air drawn and full-load free air at the compressor's pressure, m³/min */
  freeAirM3Min: number
  fullLoadFreeAirM3Min: number
  fullLoadFuelLPerH: number
  /** kg/h through all nozzles together */
  mediaKgPerH: number
  bagMassKg: number
  /** 0 when dry */
  waterLPerMin: number
  tankL: number
}

export interface HourUse {
  freeAirM3: number
  /** 0 to 1 */
  load: number
  fuelL: number
  mediaKg: number
  bags: number
  waterL: number
  /** hours on one tank; null when dry */
  tankHours: number | null
}

const idleShare = 0.45

/**
 * Fuel burnt at a part of the full load.
 *
 *   fuel = full-load fuel · (0.45 + 0.55 · load)        L/h
 *
 * Inputs   full-load fuel L/h · load, free air drawn over free air at full load, held to 0 to 1
 * Source   common practice, no source: a screw machine throttled at its inlet        Checked  tests/shared/economics/hourUse.test.ts
 */
export function fuelAtLoad(fullLoadFuelLPerH: number, load: number): number {
  const held = Math.min(1, Math.max(0, load))
  return fullLoadFuelLPerH * (idleShare + (1 - idleShare) * held)
}

/**
 * What an hour at the operating point uses.
 *
 * Inputs   see HourUseInput; every figure is a default that a person may replace
 * Ignores  moving, refilling and waiting: an hour here is an hour with the nozzles open
 * Checked  tests/shared/economics/hourUse.test.ts
 */
export function useOfHour(input: HourUseInput): HourUse {
  const load = input.fullLoadFreeAirM3Min > 0 ? input.freeAirM3Min / input.fullLoadFreeAirM3Min : 0
  const waterL = input.waterLPerMin * 60
  return {
    freeAirM3: input.freeAirM3Min * 60,
    load: Math.min(1, load),
    fuelL: fuelAtLoad(input.fullLoadFuelLPerH, load),
    mediaKg: input.mediaKgPerH,
    bags: input.mediaKgPerH / input.bagMassKg,
    waterL,
    tankHours: waterL > 0 ? input.tankL / waterL : null,
  }
}
