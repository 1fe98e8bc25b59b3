import type { CheckElement, CheckRequest } from '#shared/contracts/check.ts'
import type { MediumRecord } from '#shared/contracts/media.ts'
import type { NozzleEvent, NozzleRecord } from '#shared/contracts/nozzles.ts'
import type { BoreCheck, GaugeReading, Shift } from '#shared/contracts/work.ts'
import type { BlastConditions } from '#shared/work/index.ts'

/** every run draws the same */
export const seed = 20261

/** Repeatable numbers, even from 0 to 1: a counter through a mixing function (mulberry32, public domain). */
export function createRandom(start: number) {
  let state = start >>> 0
  const even = () => {
    state = (state + 0x6d2b79f5) >>> 0
    let t = state
    t = Math.imul(t ^ (t >>> 15), t | 1)
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61)
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296
  }
  const between = (low: number, high: number) => low + (high - low) * even()
  /** standard normal, by Box and Muller */
  const normal = () => Math.sqrt(-2 * Math.log(1 - even())) * Math.cos(2 * Math.PI * even())
  return { even, between, normal }
}

export const utc = (day: number, time = '12:00') =>
  new Date(Date.UTC(2026, 0, day, ...(time.split(':').map(Number) as [number, number])))
    .toISOString()
    .replace('.000Z', 'Z')
export const dateOf = (day: number) => utc(day).slice(0, 10)

const received = (at: string) => ({ by: 'Ana', receivedAt: at })
const saved = { version: 1, isArchived: false, createdAt: utc(1), updatedAt: utc(1), updatedBy: 'Ana' }

export const createNozzle = (overrides: Partial<NozzleRecord> = {}): NozzleRecord => ({
  id: 'a',
  name: 'A',
  tag: 'A',
  numberSixteenths: 6,
  newBoreMm: 9.525,
  shape: 'venturi',
  liner: 'tungsten-carbide',
  dischargeCoefficient: null,
  thread: null,
  entryMm: null,
  hoursBefore: 0,
  boxRigId: null,
  photoId: null,
  ...saved,
  ...overrides,
})

/** Taken over by the server at once, unless it says otherwise. */
export const createEvent = (overrides: Partial<NozzleEvent> & { at: string }): NozzleEvent => ({
  id: `${overrides.kind ?? 'mounted'} ${overrides.nozzleId ?? 'a'} ${overrides.at}`,
  nozzleId: 'a',
  kind: 'mounted',
  rigId: 'rig',
  outletIndex: 0,
  breakage: null,
  note: null,
  ...received(overrides.at),
  ...overrides,
})

/** Written at five in the afternoon of its day. */
export const createShift = (day: number, overrides: Partial<Shift> = {}): Shift => ({
  id: `shift ${day}`,
  at: utc(day, '17:00'),
  rigId: 'rig',
  localDate: dateOf(day),
  blastHours: 5,
  mediumId: 'slag',
  isWet: false,
  nozzlePressureKpa: 689.4757293168361,
  areaM2: null,
  note: null,
  supersedesId: null,
  ...received(utc(day, '17:00')),
  ...overrides,
})

export const createBoreCheck = (at: string, overrides: Partial<BoreCheck> = {}): BoreCheck => ({
  id: `check ${at}`,
  at,
  nozzleId: 'a',
  rigId: null,
  method: 'bits',
  bitSet: 'fractional-64',
  passedMm: null,
  refusedMm: null,
  boreMm: null,
  accuracyMm: null,
  looksOval: false,
  isCracked: false,
  photoId: null,
  supersedesId: null,
  ...received(at),
  ...overrides,
})

export const createMedium = (overrides: Partial<MediumRecord> = {}): MediumRecord => ({
  id: 'slag',
  name: 'Slag 20/40',
  abrasive: 'coal-slag',
  bulkDensityKgM3: null,
  mohsHardness: null,
  hasFreeSilica: false,
  ...saved,
  ...overrides,
})

/** At sea level, so that slag at 100 psi is the reference mode but for the last digits of the air's pressure. */
export const createConditions = (overrides: Partial<BlastConditions> = {}): BlastConditions => ({
  media: [createMedium()],
  ambientKpa: () => 14.7 * 6.894757293168361,
  expectedNozzlePressureKpa: () => null,
  usualAbrasive: () => null,
  ...overrides,
})

export const createReading = (at: string, overrides: Partial<GaugeReading> = {}): GaugeReading => ({
  id: `reading ${at}`,
  at,
  rigId: 'rig',
  outletIndex: 0,
  compressorId: 'compressor',
  siteId: 'site',
  nozzleId: null,
  compressorPressureKpa: 700,
  nozzlePressureKpa: 600,
  boreMm: 9.525,
  compressorAccuracyKpa: null,
  nozzleAccuracyKpa: null,
  supersedesId: null,
  setAsideBy: null,
  setAsideAt: null,
  ...received(at),
  ...overrides,
})

/** K, and friction through the media factor: a line whose losses are so many times those of another. */
export const worseLine = (factor: number) => (element: CheckElement) => ({
  ...element,
  lossK: (element.lossK ?? 0) * factor,
  mediaFactor: (element.mediaFactor ?? 1) * factor,
})

export const createRequest = (overrides: Partial<CheckRequest> = {}): CheckRequest => ({
  site: { altitudeM: 500, airTemperatureC: 25, relativeHumidityPct: 50 },
  compressor: {
    ratedFreeAirM3Min: 5.24,
    setPressureKpa: 1200,
    unloadPressureKpa: 1340,
    lineTemperatureRiseK: 10,
  },
  airLine: [{ insideDiameterMm: 32, lengthM: 15, lossK: 2 }],
  outlets: [
    {
      line: [
        { insideDiameterMm: 32, lossK: 8 },
        { insideDiameterMm: 32, lengthM: 15, lossK: 2, mediaFactor: 1.3 },
      ],
      nozzle: { boreMm: 9.525 },
    },
  ],
  airTakenFirst: [{ name: 'hood', freeAirM3Min: 0.5 }],
  targetNozzlePressureKpa: 600,
  ...overrides,
})
