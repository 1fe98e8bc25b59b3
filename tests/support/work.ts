import { randomUUID } from 'node:crypto'
import { expect } from 'vitest'
import type { NewMedium } from '#shared/contracts/media.ts'
import type { NewNozzle, NewNozzleEvent } from '#shared/contracts/nozzles.ts'
import type { NewBoreCheck, NewGaugeReading, NewShift } from '#shared/contracts/work.ts'
import { makeCompressorBody, makeRigBody, makeSiteBody } from './fleet.ts'
import type { TestPerson } from './people.ts'

let made = 0

/** A No. 6 venturi with a tungsten carbide liner, bought for 85.00. */
export function makeNozzleBody(overrides: Partial<NewNozzle> & { name?: string } = {}): NewNozzle {
  const { name, ...rest } = overrides
  return {
    id: randomUUID(),
    tag: name?.slice(0, 30) ?? `T-${(made += 1)}`,
    numberSixteenths: 6,
    newBoreMm: 9.525,
    shape: 'venturi',
    liner: 'tungsten-carbide',
    dischargeCoefficient: null,
    thread: '50 mm coarse',
    entryMm: 31.75,
    hoursBefore: 0,
    boxRigId: null,
    priceMinor: 8500,
    ...rest,
  }
}

export function makeMediumBody(overrides: Partial<NewMedium> = {}): NewMedium {
  return {
    id: randomUUID(),
    name: `Medium ${(made += 1)}`,
    abrasive: 'coal-slag',
    bulkDensityKgM3: null,
    mohsHardness: 6.5,
    hasFreeSilica: false,
    ...overrides,
  }
}

export function makeEventBody(
  overrides: Partial<NewNozzleEvent> & Pick<NewNozzleEvent, 'nozzleId'>,
): NewNozzleEvent {
  return {
    id: randomUUID(),
    at: '2026-05-03T07:10:00-06:00',
    kind: 'taken-off',
    rigId: null,
    outletIndex: null,
    breakage: null,
    note: null,
    ...overrides,
  }
}

export function makeShiftBody(overrides: Partial<NewShift> & Pick<NewShift, 'rigId'>): NewShift {
  return {
    id: randomUUID(),
    at: '2026-05-03T16:40:00-06:00',
    localDate: '2026-05-03',
    blastHours: 5.5,
    mediumId: null,
    isWet: false,
    nozzlePressureKpa: null,
    areaM2: null,
    note: null,
    supersedesId: null,
    ...overrides,
  }
}

/** 25/64 in went through, 13/32 in did not. */
export function makeBoreCheckBody(
  overrides: Partial<NewBoreCheck> & Pick<NewBoreCheck, 'nozzleId'>,
): NewBoreCheck {
  return {
    id: randomUUID(),
    at: '2026-05-03T17:00:00-06:00',
    rigId: null,
    method: 'bits',
    bitSet: 'fractional-64',
    passedMm: 9.921875,
    refusedMm: 10.31875,
    boreMm: null,
    accuracyMm: null,
    looksOval: false,
    isCracked: false,
    photoId: null,
    supersedesId: null,
    ...overrides,
  }
}

export function makeGaugeReadingBody(
  overrides: Partial<NewGaugeReading> & Pick<NewGaugeReading, 'rigId' | 'compressorId' | 'siteId'>,
): NewGaugeReading {
  return {
    id: randomUUID(),
    at: '2026-05-03T09:00:00-06:00',
    outletIndex: 0,
    nozzleId: null,
    compressorPressureKpa: 690,
    nozzlePressureKpa: 620,
    boreMm: 9.525,
    compressorAccuracyKpa: null,
    nozzleAccuracyKpa: null,
    supersedesId: null,
    ...overrides,
  }
}

export async function save<Answer = Record<string, unknown>>(
  { ask }: Pick<TestPerson, 'ask'>,
  path: string,
  body: object,
): Promise<Answer> {
  const response = await ask('POST', `/api/v1/${path}`, body)
  expect(response.status, await response.clone().text()).toBe(201)
  return (await response.json()) as Answer
}

/** A compressor, a site, a rig, a medium and a nozzle of a company, by their ids. */
export async function makeYard(owner: Pick<TestPerson, 'ask'>) {
  const bodies = {
    compressors: makeCompressorBody(),
    sites: makeSiteBody(),
    rigs: makeRigBody(),
    media: makeMediumBody(),
    nozzles: makeNozzleBody(),
  }
  for (const [path, body] of Object.entries(bodies)) await save(owner, path, body)
  return {
    compressorId: bodies.compressors.id,
    siteId: bodies.sites.id,
    rigId: bodies.rigs.id,
    rigName: bodies.rigs.name,
    mediumId: bodies.media.id,
    mediumName: bodies.media.name,
    nozzleId: bodies.nozzles.id,
    tag: bodies.nozzles.tag!,
  }
}
export type Yard = Awaited<ReturnType<typeof makeYard>>
