import { fullLoadFuelLPerH } from '#shared/catalogue/compressorClasses.ts'
import type { NewCompressor } from '#shared/contracts/compressors.ts'
import type { NewSite } from '#shared/contracts/sites.ts'
import { KPA_PER_PSI, M3_PER_CUBIC_FOOT, M_PER_FOOT } from '#shared/units/quantities.ts'

const fahrenheit = (degrees: number) => Math.round(((degrees - 32) * 50) / 9) / 10

const dayMs = 24 * 3600_000

function makeCompressor(
  number: number,
  name: string,
  { cfm, psi, ...rest }: { cfm: number; psi: number } & Partial<NewCompressor>,
): NewCompressor {
  const ratedFreeAirM3Min = cfm * M3_PER_CUBIC_FOOT
  const setPressureKpa = psi * KPA_PER_PSI
  return {
    id: `5e0c0de0-0000-4000-8003-00000000000${number}`,
    name,
    ratedFreeAirM3Min,
    curve: [],
    setPressureKpa,
    unloadPressureKpa: null,
    cooling: 'aftercooled',
    engine: 'turbo',
    conditionFactor: null,
    fullLoadFuelLPerH: Math.round(fullLoadFuelLPerH(ratedFreeAirM3Min, setPressureKpa) * 10) / 10,
    ownership: 'owned',
    rentedFrom: null,
    rentedUntil: null,
    ...rest,
  }
}

function makeSite(
  number: number,
  name: string,
  feet: number,
  degrees: number,
  relativeHumidityPct: number,
  timeZone: string,
): NewSite {
  return {
    id: `5e0c0de0-0000-4000-8004-00000000000${number}`,
    name,
    altitudeM: feet * M_PER_FOOT,
    airTemperatureC: fahrenheit(degrees),
    relativeHumidityPct,
    timeZone,
  }
}

/** The demo's machines and places; the rental runs on the day it is seeded. */
export function makeDemoMachines(now: Date) {
  const dayAway = (days: number) => new Date(now.getTime() + days * dayMs).toISOString().slice(0, 10)
  const compressors = {
    small: makeCompressor(1, 'Little 185', { cfm: 185, psi: 100, cooling: 'bare', engine: 'natural' }),
    yard: makeCompressor(2, 'Yard 375', { cfm: 375, psi: 125 }),
    old: makeCompressor(3, 'Old 425', { cfm: 425, psi: 125, conditionFactor: 0.88 }),
    rental: makeCompressor(4, 'Rental 750', {
      cfm: 750,
      psi: 150,
      ownership: 'rented',
      rentedFrom: dayAway(-9),
      rentedUntil: dayAway(26),
    }),
  }
  const sites = {
    harbor: makeSite(1, 'Harbor yard', 20, 64, 75, 'America/Los_Angeles'),
    bridge: makeSite(2, 'River bridge, mile 41', 4_150, 84, 30, 'America/Denver'),
    summit: makeSite(3, 'Summit tank farm', 8_700, 55, 40, 'America/Denver'),
  }
  return { compressors, sites }
}
