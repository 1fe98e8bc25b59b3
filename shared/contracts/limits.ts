/**
 * What a check may contain, in the units its fields carry. Plain data: the schemas, the screens and the tests
 * read the same ranges, and the client gets them without the schema library.
 */
export interface Range {
  readonly min: number
  readonly max: number
}

/** Pressures are gauge, except the barometer's, which is absolute. */
export const checkLimits = {
  altitudeM: { min: -430, max: 5000 },
  airTemperatureC: { min: -40, max: 60 },
  relativeHumidityPct: { min: 0, max: 100 },
  barometerKpa: { min: 50, max: 110 },
  freeAirM3Min: { min: 0.05, max: 150 },
  curvePressureKpa: { min: 0, max: 4000 },
  setPressureKpa: { min: 100, max: 3500 },
  unloadPressureKpa: { min: 110, max: 4000 },
  conditionFactor: { min: 0.3, max: 1.2 },
  lineTemperatureRiseK: { min: 0, max: 100 },
  insideDiameterMm: { min: 3, max: 200 },
  lengthM: { min: 0, max: 1000 },
  roughnessMm: { min: 0, max: 1 },
  lossK: { min: 0, max: 1000 },
  mediaFactor: { min: 1, max: 5 },
  boreMm: { min: 1, max: 60 },
  dischargeCoefficient: { min: 0.3, max: 1 },
  airTakenFirstM3Min: { min: 0, max: 50 },
  regulatorKpa: { min: 10, max: 3500 },
  targetNozzlePressureKpa: { min: 10, max: 3500 },
} as const satisfies Record<string, Range>

export const maxOutlets = 4
/** in one line: the air line, or the line of one outlet */
export const maxElements = 12
export const minCurvePoints = 1
export const maxCurvePoints = 20
/** hoods and tools that take their air first */
export const maxDraws = 8
export const maxNameLength = 60
/** an unload pressure at or beside the set pressure would make the delivery jump */
export const minUnloadAboveSetKpa = 10

/** A nozzle's length in the contract is the 64th of an inch it stands for; one function for screens and API. */
export { snapBoreMm as snapTo64ths } from '../units/quantities.ts'

/** The company that a page shows, said with what it asks: another window may have gone to another one. */
export const companyHeader = 'sixteenth-company'

/** What a saved record may contain. */
export const recordLimits = {
  name: 60,
  email: 254,
  /** characters; more than bytes allow is refused with a word on bytes */
  passwordShortest: 10,
  /** bcrypt reads no more of it */
  passwordMostBytes: 72,
  pageSize: 100,
  /** one company's, of one kind */
  records: 1000,
  importBytes: 1_000_000,
  importRows: 500,
} as const

/** What more a saved rig may contain. */
export const fleetLimits = {
  couplings: { min: 0, max: 20 },
  hoods: { min: 0, max: 7 },
  dropKpa: { min: 0.1, max: 3500 },
  mediaRateKgPerH: { min: 1, max: 20_000 },
  bagMassKg: { min: 1, max: 2000 },
  fullLoadFuelLPerH: { min: 0.1, max: 500 },
  waterRateLPerMin: { min: 0.05, max: 200 },
  tankL: { min: 1, max: 50_000 },
} as const satisfies Record<string, Range>

/** What crews may write down. */
export const workLimits = {
  tagLength: 30,
  threadLength: 40,
  noteLength: 200,
  hours: { min: 0, max: 100_000 },
  shiftHours: { min: 0, max: 24 },
  areaM2: { min: 0, max: 10_000 },
  accuracyMm: { min: 0.005, max: 5 },
  gaugeAccuracyKpa: { min: 0.1, max: 500 },
  bulkDensityKgM3: { min: 100, max: 8000 },
  mohsHardness: { min: 1, max: 10 },
  /** shifts of one company, and as many of each other thing that is written down */
  records: 20_000,
  photoBytes: 10_000_000,
  photoPixels: 40_000_000,
  /** of one company's photos */
  photoQuotaBytes: 500_000_000,
} as const
