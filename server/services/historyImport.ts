import { eq } from 'drizzle-orm'
import type { ImportAnswer, ImportRequest } from '#shared/contracts/imports.ts'
import { recordLimits } from '#shared/contracts/limits.ts'
import { maxFieldErrors } from '#shared/contracts/problems.ts'
import type { Actor } from '../actor.ts'
import type { Database, Writer } from '../db/client.ts'
import { companies } from '../db/schema/index.ts'
import { historyColumns, historyRowSchema, makeHistoryDraft } from '../tables/historyColumns.ts'
import type { HistoryRow } from '../tables/historyColumns.ts'
import { readRow } from '../tables/readRow.ts'
import type { RowReader } from '../tables/readRow.ts'
import { writeAudit } from './audit.ts'
import { makeHistoryRecords } from './historyRecords.ts'
import { findByName, readFile, refuseFile } from './imports.ts'
import type { Place } from './imports.ts'
import { findMade, refuseTooManyMade, toMadeRow } from './madeRecords.ts'
import type { MadeKind } from './madeRecords.ts'
import { mediumKind } from './media.ts'
import { nozzleKind } from './nozzles.ts'
import type { Context } from './records.ts'
import { rigKind } from './rigs.ts'
import { boreCheckKind, nozzleEventKind, shiftKind } from './workKinds.ts'

function makeReader(place: Place): RowReader<HistoryRow> {
  return {
    columns: historyColumns,
    schema: historyRowSchema,
    makeDraft: makeHistoryDraft,
    references: {
      rig: findByName(rigKind, place),
      nozzle: findByName(nozzleKind, place),
      medium: findByName(mediumKind, place),
    },
  }
}

function timeZoneOf({ queries }: Database, companyId: string): string {
  const where = eq(companies.id, companyId)
  return (
    queries.select({ timeZone: companies.timeZone }).from(companies).where(where).get()?.timeZone ?? 'UTC'
  )
}

/** Writes those that are not there yet, and answers how many. */
function insertNew<Body extends { id: string; at: string }, Answer>(
  kind: MadeKind<Body, Answer>,
  { database, writer, at }: { database: Database; writer: Writer; at: Date },
  actor: Actor,
  bodies: readonly Body[],
): number {
  const { companyId } = actor
  const fresh = bodies.filter(({ id }) => !findMade(kind, database, companyId, id))
  refuseTooManyMade(kind, database, companyId, fresh.length)
  for (const body of fresh) {
    writer
      .insert(kind.table)
      .values(toMadeRow(body, actor, at) as never)
      .run()
  }
  return fresh.length
}

/**
 * Looks at a log of hours and checks, or writes all of it; nothing of a file in which anything is wrong. A row that
 * was imported before is there already, so a log that has grown may be imported again.
 */
export function importHistory(
  { database, now }: Context,
  actor: Actor,
  { csv, isPreview }: ImportRequest,
): ImportAnswer {
  const work = (writer: Writer): ImportAnswer => {
    const { companyId } = actor
    const reader = makeReader({ database, companyId })
    const file = readFile(csv, reader)
    if (file.rows.length === 0) return refuseFile(file.errors)
    const subjectAt = ['nozzle', 'rig'].map((field) =>
      file.found.findIndex((match) => match?.column.field === field),
    )
    const read = file.rows.map(({ line, cells }) => {
      const subject = subjectAt.map((index) => cells[index] ?? '').find((cell) => cell !== '') ?? ''
      const { profile, errors } = readRow(reader, file.found, cells)
      return { line, name: subject.slice(0, recordLimits.name), profile, errors }
    })
    const answer: ImportAnswer = {
      errors: file.errors.slice(0, maxFieldErrors),
      rows: read.map(({ line, name, errors }) => ({ line, name, errors: errors.slice(0, maxFieldErrors) })),
      written: 0,
    }
    const isClean = answer.errors.length === 0 && read.every(({ errors }) => errors.length === 0)
    if (isPreview || !isClean) return answer
    const rows = read.flatMap(({ profile }) => (profile ? [profile] : []))
    const records = makeHistoryRecords(rows, timeZoneOf(database, companyId))
    const at = now()
    const place = { database, writer, at }
    const counts = {
      shifts: insertNew(shiftKind, place, actor, records.shifts),
      boreChecks: insertNew(boreCheckKind, place, actor, records.boreChecks),
      mounted: insertNew(nozzleEventKind, place, actor, records.events),
    }
    const changes = Object.fromEntries(Object.entries(counts).map(([kind, to]) => [kind, { from: 0, to }]))
    writeAudit(writer, actor, at, { action: 'history.imported', subject: 'history', changes })
    return { ...answer, written: counts.shifts + counts.boreChecks }
  }
  return isPreview ? database.queries.transaction(work) : database.transact(work)
}
