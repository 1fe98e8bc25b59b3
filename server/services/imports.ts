import { randomUUID } from 'node:crypto'
import { compressorProfileSchema } from '#shared/contracts/compressors.ts'
import type { ImportAnswer, ImportRequest } from '#shared/contracts/imports.ts'
import { recordLimits } from '#shared/contracts/limits.ts'
import type { FieldError } from '#shared/contracts/problems.ts'
import { maxFieldErrors } from '#shared/contracts/problems.ts'
import { rigProfileSchema } from '#shared/contracts/rigs.ts'
import type { Database, Writer } from '../db/client.ts'
import { findColumns } from '../tables/columns.ts'
import type { FoundColumn } from '../tables/columns.ts'
import { compressorColumns, makeCompressorDraft } from '../tables/compressorColumns.ts'
import { headingAt, readRow } from '../tables/readRow.ts'
import type { ReadRow, RowReader } from '../tables/readRow.ts'
import { readTable } from '../tables/readTable.ts'
import type { TableRow } from '../tables/readTable.ts'
import { finishRigDraft, makeRigDraft, rigColumns } from '../tables/rigColumns.ts'
import { writeAudit } from './audit.ts'
import { compressorKind } from './compressors.ts'
import type { RecordRow } from './recordQueries.ts'
import { foldName } from './recordRules.ts'
import { insertRecord } from './records.ts'
import type { Author, Context, RecordKind } from './records.ts'
import { rigKind } from './rigs.ts'
import { siteKind } from './sites.ts'

const mostColumns = 300

export function refuseFile(errors: FieldError[]): ImportAnswer {
  return { rows: [], errors: errors.slice(0, maxFieldErrors), written: 0 }
}

export interface Place {
  database: Database
  companyId: string
}

interface File {
  found: (FoundColumn | null)[]
  rows: TableRow[]
  errors: FieldError[]
}

/** The file’s rows under the columns they belong to, or what is wrong with it as a whole. */
export function readFile<Profile>(csv: string, { columns }: RowReader<Profile>): File {
  const { rows, error } = readTable(csv, recordLimits.importRows + 2)
  const [headings, ...body] = rows
  const refuse = (code: FieldError['code'], message: string): File => ({
    found: [],
    rows: [],
    errors: [{ path: '', code, message }],
  })
  if (error) return { found: [], rows: [], errors: [error] }
  if (!headings || body.length === 0) return refuse('too-few', 'The file has no rows under its headings.')
  if (body.length > recordLimits.importRows) {
    return refuse('too-many', `A file has at most ${recordLimits.importRows} rows; import the rest after it.`)
  }
  if (headings.cells.length > mostColumns) {
    return refuse('too-many', `A file has at most ${mostColumns} columns.`)
  }
  return { rows: body, ...findColumns(columns, headings.cells) }
}

/** No two of a name, in the company or in the file. */
function findNameErrors(
  names: Map<string, string>,
  heading: string,
  line: number,
  { name }: { name: string },
): FieldError[] {
  const folded = foldName(name)
  const before = names.get(folded)
  if (name === '') return []
  names.set(folded, before ?? `Line ${line} already has`)
  return before === undefined
    ? []
    : [{ path: heading, code: 'name-in-use', message: `${before} the name “${name}”.` }]
}

interface Judged<Profile> {
  answer: ImportAnswer
  read: ReadRow<Profile>[]
}

/** What a single record would be refused for, under the headings of the file. */
function findRowFaults<Profile extends { name: string }, Row extends RecordRow>(
  kind: RecordKind<Profile, Row>,
  { database, companyId }: Place,
  { columns }: RowReader<Profile>,
  found: File['found'],
  { profile, isArchived }: ReadRow<Profile>,
): FieldError[] {
  const faults = profile && kind.findFaults?.(database, companyId, profile, { isArchived })
  return (faults ?? []).map((fault) => ({ ...fault, path: headingAt(fault.path, columns, found) }))
}

function judgeRows<Profile extends { name: string }, Row extends RecordRow>(
  kind: RecordKind<Profile, Row>,
  place: Place,
  reader: RowReader<Profile>,
  { found, rows, errors }: File,
): Judged<Profile> {
  const taken = kind.queriesIn(place.database).names(place.companyId)
  const names = new Map(taken.map(({ name }) => [foldName(name), `Another ${kind.noun} already has`]))
  const heading = found.find((match) => match?.column.field === 'name')?.heading ?? 'name'
  const read = rows.map(({ line, cells }) => {
    const row = readRow(reader, found, cells)
    row.errors.push(
      ...findNameErrors(names, heading, line, row),
      ...findRowFaults(kind, place, reader, found, row),
    )
    return row
  })
  if (taken.length + rows.length > recordLimits.records) {
    const message = `A company has at most ${recordLimits.records} ${kind.noun}s.`
    errors.push({ path: '', code: 'too-many', message })
  }
  return {
    read,
    answer: {
      errors: errors.slice(0, maxFieldErrors),
      rows: read.map((row, index) => ({
        line: rows[index]?.line ?? 0,
        name: row.name.slice(0, recordLimits.name),
        errors: row.errors.slice(0, maxFieldErrors),
      })),
      written: 0,
    },
  }
}

/** Looks at a file, or writes all of it; nothing of a file in which anything is wrong. */
function importRecords<Profile extends { name: string }, Row extends RecordRow>(
  kind: RecordKind<Profile, Row>,
  makeReader: (place: Place) => RowReader<Profile>,
  { database, now }: Context,
  actor: Author,
  { csv, isPreview }: ImportRequest,
): ImportAnswer {
  const work = (writer: Writer): ImportAnswer => {
    const place = { database, companyId: actor.companyId }
    const reader = makeReader(place)
    const file = readFile(csv, reader)
    if (file.rows.length === 0) return refuseFile(file.errors)
    const { read, answer } = judgeRows(kind, place, reader, file)
    const isClean = answer.errors.length === 0 && answer.rows.every(({ errors }) => errors.length === 0)
    if (isPreview || !isClean) return answer
    const at = now()
    for (const { profile, isArchived } of read) {
      if (!profile) continue
      insertRecord(kind, { database, writer, at }, actor, { id: randomUUID(), profile, isArchived })
    }
    const changes = { written: { from: 0, to: read.length } }
    writeAudit(writer, actor, at, { action: 'fleet.imported', subject: `${kind.noun}s`, changes })
    return { ...answer, written: read.length }
  }
  return isPreview ? database.queries.transaction(work) : database.transact(work)
}

/** Finds a record by the name that a row gives it. */
export function findByName<Profile extends { name: string }, Row extends RecordRow>(
  { noun, queriesIn }: RecordKind<Profile, Row>,
  { database, companyId }: Place,
) {
  const byName = new Map(
    queriesIn(database)
      .names(companyId)
      // Where two have one name, one of them is archived: the other one is meant.
      .toSorted((one, other) => Number(one.archivedAt === null) - Number(other.archivedAt === null))
      .map((row) => [foldName(row.name), row]),
  )
  return (name: string) => {
    const row = byName.get(foldName(name))
    return row ? { id: row.id } : { message: `There is no ${noun} called “${name.slice(0, 60)}”.` }
  }
}

export function importCompressors(context: Context, actor: Author, request: ImportRequest): ImportAnswer {
  const makeReader = () => ({
    columns: compressorColumns,
    schema: compressorProfileSchema,
    makeDraft: makeCompressorDraft,
    references: {},
  })
  return importRecords(compressorKind, makeReader, context, actor, request)
}

export function importRigs(context: Context, actor: Author, request: ImportRequest): ImportAnswer {
  const makeReader = (place: Place) => ({
    columns: rigColumns,
    schema: rigProfileSchema,
    makeDraft: makeRigDraft,
    finishDraft: finishRigDraft,
    references: {
      compressor: findByName(compressorKind, place),
      site: findByName(siteKind, place),
    },
  })
  return importRecords(rigKind, makeReader, context, actor, request)
}
