import { createHash } from 'node:crypto'
import type { AuditAction } from '#shared/contracts/people.ts'
import { may } from '#shared/contracts/permissions.ts'
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
/** Whose roles decide what an answer shows; without any it shows no price. */
export type Viewer = Partial<Pick<Actor, 'roles'>>
export type Author = Pick<Actor, 'accountId' | 'name' | 'companyId'> & Viewer
type Reader = Pick<Actor, 'companyId'> & Viewer

/** What one kind of saved record adds to what they all share. */
export interface RecordKind<Profile extends { name: string }, Row extends RecordRow> {
  noun: 'compressor' | 'site' | 'rig' | 'nozzle' | 'medium'
  /** where the noun takes no s */
  plural?: string
  /** what people call its name */
  nameField?: string
  /** the name of an archived one may be given to another */
  isNameFreedByArchiving?: boolean
  /** only for who may see prices; in the audit for nobody */
  priceFields?: readonly (keyof Profile & string)[]
  queriesIn(database: Database): RecordQueries<Row>
  toColumns(profile: Profile): Omit<Row, Exclude<keyof RecordRow, 'name'>>
  toProfile(row: Row): Profile
  /** What is not in a body: worked out as the record is written, from how it stood. */
  complete?(database: Database, companyId: string, profile: Profile, before: Row | null): Profile
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

function withoutPrices<Profile extends { name: string }, Row extends RecordRow>(
  { priceFields = [] }: RecordKind<Profile, Row>,
  profile: Profile,
): Profile {
  if (priceFields.length === 0) return profile
  const hidden: readonly string[] = priceFields
  return Object.fromEntries(Object.entries(profile).filter(([field]) => !hidden.includes(field))) as Profile
}

export function toRecord<Profile extends { name: string }, Row extends RecordRow>(
  kind: RecordKind<Profile, Row>,
  row: Row,
  { roles = [] }: Viewer,
): Profile & RecordFields {
  const { id, version, archivedAt, createdAt, updatedAt, updatedBy } = row
  const whole = kind.toProfile(row)
  return {
    ...(may(roles, 'see-prices') ? whole : withoutPrices(kind, whole)),
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
  actor: Reader,
  id: string,
): Profile & RecordFields {
  return toRecord(kind, findListed(kind.queriesIn(database), actor.companyId, id), actor)
}

export function listRecords<Profile extends { name: string }, Row extends RecordRow>(
  kind: RecordKind<Profile, Row>,
  database: Database,
  reader: Reader,
): (Profile & RecordFields)[] {
  return kind
    .queriesIn(database)
    .list(reader.companyId)
    .map((row) => toRecord(kind, row, reader))
}

export function listPage<Profile extends { name: string }, Row extends RecordRow>(
  kind: RecordKind<Profile, Row>,
  { database }: Pick<Context, 'database'>,
  reader: Reader,
  query: PageQuery,
): Page<Profile & RecordFields> {
  return readPage(query, (limit, after) =>
    kind
      .queriesIn(database)
      .page(reader.companyId, limit, after)
      .map((row) => toRecord(kind, row, reader)),
  )
}

/** Writes a new record and its audit row, in a transaction of the caller's who has seen to its rules. */
export function insertRecord<Profile extends { name: string }, Row extends RecordRow>(
  kind: RecordKind<Profile, Row>,
  { database, writer, at }: { database: Database; writer: Writer; at: Date },
  author: Author,
  { id, profile: sent, isArchived = false }: { id: string; profile: Profile; isArchived?: boolean },
): Profile & RecordFields {
  const profile = kind.complete?.(database, author.companyId, sent, null) ?? sent
  const shared = {
    companyId: author.companyId,
    id,
    version: 1,
    creationHash: hashCreation({ ...sent, id }),
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
  return toRecord(kind, row, author)
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
      return toRecord(kind, existing, actor)
    }
    const taken = queries.names(companyId)
    refuseTooMany(kind, taken.length)
    refuseFaults([
      ...findNameFault(kind, taken, { id, name: profile.name }),
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
    changes: changesBetween(
      withoutPrices(kind, kind.toProfile(from)),
      withoutPrices(kind, kind.toProfile(next)),
    ),
  })
  return toRecord(kind, next, actor)
}

export function refuseStale<Profile extends { name: string }, Row extends RecordRow>(
  kind: RecordKind<Profile, Row>,
  row: Row,
  version: number,
  viewer: Viewer,
): void {
  if (row.version !== version) throw makeVersionConflict(toRecord(kind, row, viewer))
}

export function changeRecord<Profile extends { name: string }, Row extends RecordRow>(
  kind: RecordKind<Profile, Row>,
  context: Context,
  actor: Author,
  { id, version }: { id: string; version: number },
  sent: Profile,
): Profile & RecordFields {
  const { database } = context
  const queries = kind.queriesIn(database)
  return database.transact((writer) => {
    const from = findListed(queries, actor.companyId, id)
    refuseStale(kind, from, version, actor)
    const profile = kind.complete?.(database, actor.companyId, sent, from) ?? sent
    const isRenamed = profile.name !== from.name
    const state = { isArchived: from.archivedAt !== null }
    refuseFaults([
      ...(isRenamed
        ? findNameFault(kind, queries.names(actor.companyId), { ...from, name: profile.name })
        : []),
      ...(kind.findFaults?.(database, actor.companyId, profile, state) ?? []),
    ])
    const to = kind.toColumns(profile) as unknown as Partial<Row>
    return keep(kind, context, actor, { writer, from, to, as: 'changed' })
  })
}
