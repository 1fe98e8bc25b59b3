import { randomUUID } from 'node:crypto'
import type { NewCompressor } from '#shared/contracts/compressors.ts'
import type { NewRig, RigRecord } from '#shared/contracts/rigs.ts'
import type { NewSite } from '#shared/contracts/sites.ts'

let made = 0

/** A name that no other record of the run has. */
const nextName = (noun: string) => `${noun} ${(made += 1)}`

/** A rental class machine: 375 cfm at 100 psi, aftercooled. */
export function makeCompressorBody(overrides: Partial<NewCompressor> = {}): NewCompressor {
  return {
    id: randomUUID(),
    name: nextName('Compressor'),
    ratedFreeAirM3Min: 10.62,
    curve: [],
    setPressureKpa: 690,
    unloadPressureKpa: 830,
    cooling: 'aftercooled',
    engine: 'turbo',
    conditionFactor: null,
    fullLoadFuelLPerH: 24,
    ownership: 'owned',
    rentedFrom: null,
    rentedUntil: null,
    ...overrides,
  }
}

/** A yard at mile height. */
export function makeSiteBody(overrides: Partial<NewSite> = {}): NewSite {
  return {
    id: randomUUID(),
    name: nextName('Site'),
    altitudeM: 1600,
    airTemperatureC: 25,
    relativeHumidityPct: 30,
    timeZone: 'America/Denver',
    ...overrides,
  }
}

/** 50 ft of air hose, a pot and 50 ft of 1 1/4 in blast hose to a new No. 5, one hood, 90 psi wanted. */
export function makeRigBody(overrides: Partial<NewRig> = {}): NewRig {
  return {
    id: randomUUID(),
    name: nextName('Rig'),
    airLine: { insideDiameterMm: 38.1, lengthM: 15.24, couplings: 2, measured: null, roughnessMm: null },
    pot: { insideDiameterMm: 31.75, lossK: null, isShared: true },
    outlets: [
      {
        regulatorKpa: null,
        hose: { insideDiameterMm: 31.75, lengthM: 15.24, couplings: 1, measured: null, roughnessMm: null },
        whip: null,
        nozzle: {
          numberSixteenths: 5,
          newBoreMm: 7.9375,
          boreNowMm: null,
          shape: 'venturi',
          loading: 'normal',
          dischargeCoefficient: null,
        },
      },
    ],
    hoods: { count: 1, freeAirEachM3Min: 0.57 },
    toolsFreeAirM3Min: null,
    targetNozzlePressureKpa: 620.5,
    bitSet: 'fractional-64',
    compressorId: null,
    siteId: null,
    hour: {
      abrasive: 'coal-slag',
      mediaRateKgPerH: null,
      bagMassKg: null,
      isWet: false,
      waterRateLPerMin: null,
      tankL: null,
    },
    ...overrides,
  }
}

/** A stored rig as a change sends it back. */
export function changeOf<Kept extends Pick<RigRecord, 'id' | 'version'>>(
  record: Kept,
  overrides: object = {},
) {
  const { id: _id, isArchived, createdAt, updatedAt, updatedBy, ...profile } = record as Kept & RigRecord
  void [isArchived, createdAt, updatedAt, updatedBy]
  return { ...profile, ...overrides }
}
