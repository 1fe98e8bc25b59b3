import type { NewNozzleEvent, NozzleEvent } from '#shared/contracts/nozzles.ts'
import type {
  BoreCheck,
  GaugeReading,
  NewBoreCheck,
  NewGaugeReading,
  NewShift,
  Shift,
} from '#shared/contracts/work.ts'
import type { Database } from '../db/client.ts'
import {
  boreChecks,
  compressors,
  gaugeReadings,
  media,
  nozzleEvents,
  nozzles,
  photos,
  rigs,
  shifts,
  sites,
} from '../db/schema/index.ts'
import type { MadeKind } from './madeRecords.ts'
import { nozzleKind } from './nozzles.ts'
import { findUnknown } from './references.ts'
import { rigKind } from './rigs.ts'

const tables = {
  nozzle: nozzles,
  rig: rigs,
  medium: media,
  compressor: compressors,
  site: sites,
  photo: photos,
}

/** Every reference of a body that leads nowhere in the company. */
function findUnknownOnes(
  database: Database,
  companyId: string,
  references: Partial<Record<keyof typeof tables, string | null>>,
) {
  return Object.entries(references).flatMap(([noun, id]) => {
    const table = tables[noun as keyof typeof tables]
    return findUnknown(database, companyId, { path: `/${noun}Id`, noun, table, id })
  })
}

function nameOf(
  kind: typeof nozzleKind | typeof rigKind,
  database: Database,
  companyId: string,
  id: string,
): string {
  return kind.queriesIn(database).find(companyId, id)?.name ?? id
}

/** What it became, for the audit: there was nothing before. */
function became(fields: Record<string, unknown>) {
  const told = Object.entries(fields).filter(([, to]) => to !== null && to !== undefined)
  return Object.fromEntries(told.map(([field, to]) => [field, { from: null, to }]))
}

/** The fields of the contract, without those of the table alone. */
function without<Row extends object, Field extends keyof Row>(row: Row, fields: readonly Field[]) {
  const rest: Partial<Row> = { ...row }
  for (const field of fields) delete rest[field]
  return rest as Omit<Row, Field>
}
const ownColumns = ['companyId', 'creationHash', 'byId'] as const

export const nozzleEventKind: MadeKind<NewNozzleEvent, NozzleEvent> = {
  noun: 'nozzle event',
  plural: 'nozzle events',
  table: nozzleEvents,
  findFaults: (database, companyId, { nozzleId, rigId }) =>
    findUnknownOnes(database, companyId, { nozzle: nozzleId, rig: rigId }),
  describe: (database, companyId, { nozzleId, kind, rigId, outletIndex, breakage, at }) => ({
    action: 'nozzle.event',
    subject: nameOf(nozzleKind, database, companyId, nozzleId),
    subjectId: nozzleId,
    changes: became({
      kind,
      at,
      rig: rigId && nameOf(rigKind, database, companyId, rigId),
      outlet: outletIndex === null ? null : outletIndex + 1,
      breakage,
    }),
  }),
  toAnswer: (row: typeof nozzleEvents.$inferSelect) => without(row, [...ownColumns, 'supersedesId']),
}

export const shiftKind: MadeKind<NewShift, Shift> = {
  noun: 'shift',
  plural: 'shifts',
  table: shifts,
  findFaults: (database, companyId, { rigId, mediumId }) =>
    findUnknownOnes(database, companyId, { rig: rigId, medium: mediumId }),
  describe: (database, companyId, { id, rigId, localDate, blastHours, supersedesId }) => ({
    action: supersedesId === null ? 'shift.logged' : 'shift.corrected',
    subject: nameOf(rigKind, database, companyId, rigId),
    subjectId: id,
    changes: became({ localDate, blastHours, supersedesId }),
  }),
  toAnswer: (row: typeof shifts.$inferSelect) => without(row, ownColumns),
}

export const boreCheckKind: MadeKind<NewBoreCheck, BoreCheck> = {
  noun: 'bore check',
  plural: 'bore checks',
  table: boreChecks,
  findFaults: (database, companyId, { nozzleId, rigId, photoId }) =>
    findUnknownOnes(database, companyId, { nozzle: nozzleId, rig: rigId, photo: photoId }),
  describe: (database, companyId, { id, nozzleId, at, supersedesId, isCracked, ...check }) => ({
    action: supersedesId === null ? 'bore-check.logged' : 'bore-check.corrected',
    subject: nameOf(nozzleKind, database, companyId, nozzleId),
    subjectId: id,
    changes: became({
      at,
      method: check.method,
      passedMm: check.passedMm,
      refusedMm: check.refusedMm,
      boreMm: check.boreMm,
      isCracked: isCracked || null,
      supersedesId,
    }),
  }),
  toAnswer: (row: typeof boreChecks.$inferSelect) => without(row, ownColumns),
}

export const gaugeReadingKind: MadeKind<NewGaugeReading, GaugeReading> = {
  noun: 'gauge reading',
  plural: 'gauge readings',
  table: gaugeReadings,
  findFaults: (database, companyId, { rigId, compressorId, siteId, nozzleId }) =>
    findUnknownOnes(database, companyId, {
      rig: rigId,
      compressor: compressorId,
      site: siteId,
      nozzle: nozzleId,
    }),
  describe: (database, companyId, { id, rigId, at, supersedesId, ...reading }) => ({
    action: 'gauges.logged',
    subject: nameOf(rigKind, database, companyId, rigId),
    subjectId: id,
    changes: became({
      at,
      compressorPressureKpa: reading.compressorPressureKpa,
      nozzlePressureKpa: reading.nozzlePressureKpa,
      boreMm: reading.boreMm,
      supersedesId,
    }),
  }),
  toAnswer: (row: typeof gaugeReadings.$inferSelect) => without(row, ownColumns),
}
