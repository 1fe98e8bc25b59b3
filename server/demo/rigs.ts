import type { HoseProfile, NewRig, OutletProfile } from '#shared/contracts/rigs.ts'
import { HOOD_DEFAULT_FREE_AIR_M3_MIN } from '#shared/catalogue/breathing.ts'
import {
  KPA_PER_PSI,
  M3_PER_CUBIC_FOOT,
  M_PER_FOOT,
  MM_PER_INCH,
  mmOfInches,
} from '#shared/units/quantities.ts'
import type { makeDemoMachines } from './machines.ts'

function makeHose(inches: number, feet: number, couplings = 2): HoseProfile {
  return {
    insideDiameterMm: inches * MM_PER_INCH,
    lengthM: feet * M_PER_FOOT,
    couplings,
    measured: null,
    roughnessMm: null,
  }
}

function makeOutlet(
  number: number,
  hose: HoseProfile,
  overrides: { worn64ths?: number; loading?: OutletProfile['nozzle']['loading'] } = {},
): OutletProfile {
  const inchesNow = number / 16 + (overrides.worn64ths ?? 0) / 64
  return {
    regulatorKpa: null,
    hose,
    whip: null,
    nozzle: {
      numberSixteenths: number,
      newBoreMm: mmOfInches(number / 16),
      boreNowMm: overrides.worn64ths ? mmOfInches(inchesNow) : null,
      shape: 'venturi',
      loading: overrides.loading ?? 'normal',
      dischargeCoefficient: null,
    },
  }
}

const dryHour: NewRig['hour'] = {
  abrasive: 'coal-slag',
  mediaRateKgPerH: null,
  bagMassKg: null,
  isWet: false,
  waterRateLPerMin: null,
  tankL: null,
}

function makeRig(
  number: number,
  name: string,
  rig: Pick<NewRig, 'outlets'> & Partial<NewRig> & { hoodCount?: number },
): NewRig {
  const { hoodCount = 1, ...overrides } = rig
  return {
    id: `5e0c0de0-0000-4000-8005-00000000000${number}`,
    name,
    airLine: makeHose(2, 50),
    pot: { insideDiameterMm: 1.25 * MM_PER_INCH, lossK: null, isShared: false },
    hoods: { count: hoodCount, freeAirEachM3Min: HOOD_DEFAULT_FREE_AIR_M3_MIN },
    toolsFreeAirM3Min: null,
    targetNozzlePressureKpa: 100 * KPA_PER_PSI,
    bitSet: 'fractional-64',
    compressorId: null,
    siteId: null,
    hour: dryHour,
    ...overrides,
  }
}

/** Five rigs, between them every verdict there is; tests/server/fleet/demo.test.ts computes them. */
export function makeDemoRigs({ compressors, sites }: ReturnType<typeof makeDemoMachines>): NewRig[] {
  const blastHose = makeHose(1.25, 50)
  return [
    makeRig(1, 'Truck 1', {
      outlets: [makeOutlet(6, blastHose)],
      compressorId: compressors.yard.id,
      siteId: sites.harbor.id,
    }),
    makeRig(2, 'Truck 2', {
      outlets: [makeOutlet(7, blastHose, { worn64ths: 2 })],
      compressorId: compressors.old.id,
      siteId: sites.bridge.id,
      hour: { ...dryHour, abrasive: 'garnet' },
    }),
    makeRig(3, 'Twin pots', {
      outlets: [makeOutlet(7, makeHose(1.5, 100)), makeOutlet(7, makeHose(1.5, 50), { worn64ths: 4 })],
      hoodCount: 2,
      compressorId: compressors.rental.id,
      siteId: sites.summit.id,
    }),
    makeRig(4, 'Wet trailer', {
      outlets: [makeOutlet(5, makeHose(1.25, 100), { loading: 'heavy-or-wet' })],
      targetNozzlePressureKpa: 80 * KPA_PER_PSI,
      hour: { ...dryHour, isWet: true, waterRateLPerMin: 3, tankL: 800 },
      compressorId: compressors.small.id,
      siteId: sites.harbor.id,
    }),
    makeRig(5, 'Shop cabinet', {
      outlets: [makeOutlet(4, makeHose(1, 25))],
      hoodCount: 3,
      toolsFreeAirM3Min: 150 * M3_PER_CUBIC_FOOT,
      compressorId: compressors.small.id,
      siteId: sites.bridge.id,
    }),
  ]
}
