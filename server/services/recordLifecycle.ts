import { makeProblem } from '../problems.ts'
import { findNameFault, refuseTooMany } from './recordRules.ts'
import { findListed, findRow, keep, refuseStale, toRecord } from './records.ts'
import type { Author, Context, RecordFields, RecordKind } from './records.ts'
import type { RecordRow } from './recordQueries.ts'

interface Named {
  name: string
}

interface AtVersion {
  id: string
  version: number
}

/** Back among the others it must stand as a new one would: no second of its name, nothing missing that it needs. */
function refuseReturn<Profile extends Named, Row extends RecordRow>(
  kind: RecordKind<Profile, Row>,
  { database }: Context,
  row: Row,
  state: { isArchived: boolean },
): void {
  const taken = kind.queriesIn(database).names(row.companyId)
  const [fault] = [
    ...findNameFault(kind, taken, { ...row, archivedAt: state.isArchived ? row.archivedAt : null }),
    ...(kind.findFaults?.(database, row.companyId, kind.toProfile(row), state) ?? []),
  ]
  if (fault) throw makeProblem('in-use', fault.message)
}

function refuseUsed<Profile extends Named, Row extends RecordRow>(
  kind: RecordKind<Profile, Row>,
  { database }: Context,
  row: Row,
  intent: 'archive' | 'delete',
): void {
  const use = kind.findUse?.(database, row, intent)
  if (use) throw makeProblem('in-use', use)
}

export function archiveRecord<Profile extends Named, Row extends RecordRow>(
  kind: RecordKind<Profile, Row>,
  context: Context,
  actor: Author,
  { id, version }: AtVersion,
): Profile & RecordFields {
  return context.database.transact((writer) => {
    const from = findListed(kind.queriesIn(context.database), actor.companyId, id)
    refuseStale(kind, from, version, actor)
    if (from.archivedAt !== null) return toRecord(kind, from, actor)
    refuseUsed(kind, context, from, 'archive')
    const to = { archivedAt: context.now().toISOString() } as Partial<Row>
    return keep(kind, context, actor, { writer, from, to, as: 'archived' })
  })
}

export function unarchiveRecord<Profile extends Named, Row extends RecordRow>(
  kind: RecordKind<Profile, Row>,
  context: Context,
  actor: Author,
  { id, version }: AtVersion,
): Profile & RecordFields {
  return context.database.transact((writer) => {
    const from = findListed(kind.queriesIn(context.database), actor.companyId, id)
    refuseStale(kind, from, version, actor)
    if (from.archivedAt === null) return toRecord(kind, from, actor)
    refuseReturn(kind, context, from, { isArchived: false })
    const to = { archivedAt: null } as Partial<Row>
    return keep(kind, context, actor, { writer, from, to, as: 'unarchived' })
  })
}

/** Takes it out of every list; nothing is erased. Its version stays, so that whoever deleted it can restore it. */
export function deleteRecord<Profile extends Named, Row extends RecordRow>(
  kind: RecordKind<Profile, Row>,
  context: Context,
  actor: Author,
  { id, version }: AtVersion,
): void {
  context.database.transact((writer) => {
    const from = findListed(kind.queriesIn(context.database), actor.companyId, id)
    refuseStale(kind, from, version, actor)
    refuseUsed(kind, context, from, 'delete')
    const to = { version, deletedAt: context.now().toISOString() } as Partial<Row>
    keep(kind, context, actor, { writer, from, to, as: 'deleted' })
  })
}

export function restoreRecord<Profile extends Named, Row extends RecordRow>(
  kind: RecordKind<Profile, Row>,
  context: Context,
  actor: Author,
  { id, version }: AtVersion,
): Profile & RecordFields {
  const { database } = context
  return database.transact((writer) => {
    const queries = kind.queriesIn(database)
    const from = findRow(queries, actor.companyId, id)
    refuseStale(kind, from, version, actor)
    if (from.deletedAt === null) return toRecord(kind, from, actor)
    refuseTooMany(kind, queries.names(actor.companyId).length)
    refuseReturn(kind, context, from, { isArchived: from.archivedAt !== null })
    const to = { deletedAt: null } as Partial<Row>
    return keep(kind, context, actor, { writer, from, to, as: 'restored' })
  })
}
