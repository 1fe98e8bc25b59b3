import { createHash } from 'node:crypto'
import type { AuditAction } from '#shared/contracts/people.ts'
import type { FieldError } from '#shared/contracts/problems.ts'
import type { Actor } from '../actor.ts'
import type { AppContext } from '../context.ts'
import type { Database, Writer } from '../db/client.ts'
import { makeProblem, makeVersionConflict } from '../problems.ts'
import { changesBetween, writeAudit } from './audit.ts'
import { readPage } from './pages.ts'
import type { Page, PageQuery } from './pages.ts'
import type { RecordQueries, RecordRow } from './recordQueries.ts'
import { findNameFault, refuseFaults, refuseTooMany } from './recordRules.ts'

export type Context = Pick<AppContext, 'database' | 'now'>
export type Author = Pick<Actor, 'accountId' | 'name' | 'companyId'>

/** What one kind of saved record adds to what they all share. */
export interface RecordKind<Profile extends { name: string }, Row extends RecordRow> {
  noun: 'compressor' | 'site' | 'rig'
  queriesIn(database: Database): RecordQueries<Row>
  toColumns(profile: Profile): Omit<Row, Exclude<keyof RecordRow, 'name'>>
  toProfile(row: Row): Profile
  /** What only the database or the runtime can tell to be wrong, such as a compressor that is not there. */
  findFaults?(
    database: Database,
    companyId: string,
    profile: Profile,
    state: { isArchived: boolean },
  ): FieldError[]
  /** Why it may not go: a sentence, or null. */
  findUse?(database: Database, row: Row, intent: 'archive' | 'delete'): string | null
}

export interface RecordFields {
  id: string
  version: number
  isArchived: boolean
  createdAt: string
  updatedAt: string
  updatedBy: string
}

export function toRecord<Profile extends { name: string }, Row extends RecordRow>(
  kind: RecordKind<Profile, Row>,
  row: Row,
): Profile & RecordFields {
  const { id, version, archivedAt, createdAt, updatedAt, updatedBy } = row
  return {
    ...kind.toProfile(row),
    id,
    version,
    isArchived: archivedAt !== null,
    createdAt,
    updatedAt,
    updatedBy,
  }
}

function sortKeys(_key: string, value: unknown): unknown {
  if (typeof value !== 'object' || value === null || Array.isArray(value)) return value
  return Object.fromEntries(Object.entries(value).sort(([one], [other]) => (one < other ? -1 : 1)))
}

/** Of a body as the contract read it, whatever the order it was written in. */
export function hashCreation(body: object): string {
  return createHash('sha256').update(JSON.stringify(body, sortKeys)).digest('hex')
}

/** A row of the company, deleted or not, or the answer that there is none. */
export function findRow<Row extends RecordRow>(
  queries: RecordQueries<Row>,
  companyId: string,
  id: string,
): Row {
  const row = queries.find(companyId, id)
  if (!row) throw makeProblem('not-found', 'There is nothing at this address.')
  return row
}

export function findListed<Row extends RecordRow>(
  queries: RecordQueries<Row>,
  companyId: string,
  id: string,
): Row {
  const row = findRow(queries, companyId, id)
  if (row.deletedAt !== null) throw makeProblem('not-found', 'There is nothing at this address.')
  return row
}

export function readRecord<Profile extends { name: string }, Row extends RecordRow>(
  kind: RecordKind<Profile, Row>,
  { database }: Pick<Context, 'database'>,
  actor: Pick<Actor, 'companyId'>,
  id: string,
): Profile & RecordFields {
  return toRecord(kind, findListed(kind.queriesIn(database), actor.companyId, id))
}

export function listRecords<Profile extends { name: string }, Row extends RecordRow>(
  kind: RecordKind<Profile, Row>,
  database: Database,
  companyId: string,
): (Profile & RecordFields)[] {
  return kind
    .queriesIn(database)
    .list(companyId)
    .map((row) => toRecord(kind, row))
}

export function listPage<Profile extends { name: string }, Row extends RecordRow>(
  kind: RecordKind<Profile, Row>,
  { database }: Pick<Context, 'database'>,
  { companyId }: Pick<Actor, 'companyId'>,
  query: PageQuery,
): Page<Profile & RecordFields> {
  return readPage(query, (limit, after) =>
    kind
      .queriesIn(database)
      .page(companyId, limit, after)
      .map((row) => toRecord(kind, row)),
  )
}

/** Writes a new record and its audit row, in a transaction of the caller's who has seen to its rules. */
export function insertRecord<Profile extends { name: string }, Row extends RecordRow>(
  kind: RecordKind<Profile, Row>,
  { database, writer, at }: { database: Database; writer: Writer; at: Date },
  author: Author,
  { id, profile, isArchived = false }: { id: string; profile: Profile; isArchived?: boolean },
): Profile & RecordFields {
  const shared = {
    companyId: author.companyId,
    id,
    version: 1,
    creationHash: hashCreation({ ...profile, id }),
    createdAt: at.toISOString(),
    updatedAt: at.toISOString(),
    updatedBy: author.name,
    archivedAt: isArchived ? at.toISOString() : null,
    deletedAt: null,
  }
  const row = { ...kind.toColumns(profile), ...shared } as unknown as Row
  kind.queriesIn(database).insert(row)
  const action: AuditAction = `${kind.noun}.created`
  writeAudit(writer, author, at, { action, subject: profile.name, subjectId: id })
  return toRecord(kind, row)
}

/** Creates the record once, however often the same body comes. */
export function createRecord<Profile extends { name: string }, Row extends RecordRow>(
  kind: RecordKind<Profile, Row>,
  { database, now }: Context,
  actor: Author,
  id: string,
  profile: Profile,
): Profile & RecordFields {
  const queries = kind.queriesIn(database)
  const { companyId } = actor
  return database.transact((writer) => {
    const existing = queries.find(companyId, id)
    if (existing) {
      if (existing.creationHash !== hashCreation({ ...profile, id })) {
        throw makeProblem('id-in-use', `Another ${kind.noun} was made under this id.`)
      }
      if (existing.deletedAt !== null) {
        throw makeProblem('id-in-use', `This ${kind.noun} has been deleted since; restore it instead.`)
      }
      return toRecord(kind, existing)
    }
    const taken = queries.names(companyId)
    refuseTooMany(kind.noun, taken.length)
    refuseFaults([
      ...findNameFault(kind.noun, taken, { id, name: profile.name }),
      ...(kind.findFaults?.(database, companyId, profile, { isArchived: false }) ?? []),
    ])
    return insertRecord(kind, { database, writer, at: now() }, actor, { id, profile })
  })
}

type Transition = 'changed' | 'archived' | 'unarchived' | 'deleted' | 'restored'

export function keep<Profile extends { name: string }, Row extends RecordRow>(
  kind: RecordKind<Profile, Row>,
  { database, now }: Context,
  actor: Author,
  { writer, from, to, as }: { writer: Writer; from: Row; to: Partial<Row>; as: Transition },
): Profile & RecordFields {
  const at = now()
  const row = { version: from.version + 1, ...to, updatedAt: at.toISOString(), updatedBy: actor.name }
  const next: Row = { ...from, ...row }
  kind.queriesIn(database).update(next)
  writeAudit(writer, actor, at, {
    action: `${kind.noun}.${as}`,
    subject: next.name,
    subjectId: next.id,
    changes: changesBetween(kind.toProfile(from), kind.toProfile(next)),
  })
  return toRecord(kind, next)
}

export function refuseStale<Profile extends { name: string }, Row extends RecordRow>(
  kind: RecordKind<Profile, Row>,
  row: Row,
  version: number,
): void {
  if (row.version !== version) throw makeVersionConflict(toRecord(kind, row))
}

export function changeRecord<Profile extends { name: string }, Row extends RecordRow>(
  kind: RecordKind<Profile, Row>,
  context: Context,
  actor: Author,
  { id, version }: { id: string; version: number },
  profile: Profile,
): Profile & RecordFields {
  const { database } = context
  const queries = kind.queriesIn(database)
  return database.transact((writer) => {
    const from = findListed(queries, actor.companyId, id)
    refuseStale(kind, from, version)
    const isRenamed = profile.name !== from.name
    const state = { isArchived: from.archivedAt !== null }
    refuseFaults([
      ...(isRenamed
        ? findNameFault(kind.noun, queries.names(actor.companyId), { id, name: profile.name })
        : []),
      ...(kind.findFaults?.(database, actor.companyId, profile, state) ?? []),
    ])
    const to = kind.toColumns(profile) as unknown as Partial<Row>
    return keep(kind, context, actor, { writer, from, to, as: 'changed' })
  })
}
