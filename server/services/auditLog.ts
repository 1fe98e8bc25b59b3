import { and, desc, eq, gte, lt, like, or, sql } from 'drizzle-orm'
import type { SQL } from 'drizzle-orm'
import { recordLimits } from '#shared/contracts/limits.ts'
import type { AuditEntry, AuditFilter, AuditQuery } from '#shared/contracts/people.ts'
import type { Actor } from '../actor.ts'
import { csvLine } from '../csv.ts'
import type { Database } from '../db/client.ts'
import { accounts, auditEntries } from '../db/schema/index.ts'
import { makeFieldProblem } from '../problems.ts'

const rowsAtOnce = 500
const columns = ['at', 'who', 'address', 'action', 'subject', 'subjectId', 'changes']

const entryColumns = {
  id: auditEntries.id,
  at: auditEntries.at,
  actorName: auditEntries.actorName,
  actorEmail: accounts.email,
  action: auditEntries.action,
  subject: auditEntries.subject,
  subjectId: auditEntries.subjectId,
  changes: auditEntries.changes,
}

function encodeCursor(id: number): string {
  return Buffer.from(`audit:${id}`).toString('base64url')
}

function decodeCursor(cursor: string): number {
  const id = /^audit:([1-9]\d{0,14})$/.exec(Buffer.from(cursor, 'base64url').toString('utf8'))?.[1]
  if (id !== undefined) return Number(id)
  throw makeFieldProblem('/cursor', 'invalid', 'The cursor is not one that a page ended with.')
}

function containing(column: typeof auditEntries.actorName | typeof auditEntries.subject, part: string): SQL {
  const pattern = `%${part.replace(/[\\%_]/g, (character) => `\\${character}`)}%`
  return sql`${like(column, pattern)} escape '\\'`
}

function toUtc(instant: string): string {
  return new Date(instant).toISOString()
}

function conditionOf(companyId: string, { action, search, from, until }: AuditFilter): SQL | undefined {
  const part = search?.trim() ?? ''
  return and(
    eq(auditEntries.companyId, companyId),
    action && eq(auditEntries.action, action),
    part === ''
      ? undefined
      : or(containing(auditEntries.actorName, part), containing(auditEntries.subject, part)),
    from === undefined ? undefined : gte(auditEntries.at, toUtc(from)),
    until === undefined ? undefined : lt(auditEntries.at, toUtc(until)),
  )
}

function findBefore({ queries }: Database, condition: SQL | undefined, id: number | null, limit: number) {
  return queries
    .select(entryColumns)
    .from(auditEntries)
    .leftJoin(accounts, eq(accounts.id, auditEntries.actorId))
    .where(and(condition, id === null ? undefined : lt(auditEntries.id, id)))
    .orderBy(desc(auditEntries.id))
    .limit(limit)
    .all()
}

export interface AuditPage {
  items: AuditEntry[]
  nextCursor: string | null
}

/** One page of who did what, newest first. Entries are never changed, so an id is a lasting place to go on from. */
export function readAuditPage(
  database: Database,
  { companyId }: Pick<Actor, 'companyId'>,
  { cursor, limit = recordLimits.pageSize, ...filter }: AuditQuery,
): AuditPage {
  const before = cursor === undefined ? null : decodeCursor(cursor)
  const found = findBefore(database, conditionOf(companyId, filter), before, limit + 1)
  const items = found.slice(0, limit)
  const last = items.at(-1)
  return { items, nextCursor: found.length > limit && last ? encodeCursor(last.id) : null }
}

/** The place from which the log goes back to its beginning as it is now. */
export function findAuditEnd({ queries }: Database, { companyId }: Pick<Actor, 'companyId'>): number {
  const last = queries
    .select({ id: auditEntries.id })
    .from(auditEntries)
    .where(eq(auditEntries.companyId, companyId))
    .orderBy(desc(auditEntries.id))
    .limit(1)
    .get()
  return (last?.id ?? 0) + 1
}

/** The log as CSV back from its end, a piece at a time; what is written meanwhile is newer than its first line. */
export function* writeAuditCsv(
  database: Database,
  { companyId }: Pick<Actor, 'companyId'>,
  filter: AuditFilter,
  end: number | null = null,
): Generator<string> {
  const condition = conditionOf(companyId, filter)
  // Spreadsheets read UTF-8 as UTF-8 only where it says so.
  yield `\ufeff${csvLine(columns)}`
  let before = end
  for (;;) {
    const entries = findBefore(database, condition, before, rowsAtOnce)
    const last = entries.at(-1)
    if (!last) return
    yield entries
      .map(({ at, actorName, actorEmail, action, subject, subjectId, changes }) =>
        csvLine([at, actorName, actorEmail ?? '', action, subject, subjectId, JSON.stringify(changes)]),
      )
      .join('')
    before = last.id
  }
}
