import { and, eq, sql } from 'drizzle-orm'
import type { AnySQLiteColumn, SQLiteTable } from 'drizzle-orm/sqlite-core'
import { workLimits } from '#shared/contracts/limits.ts'
import type { FieldError } from '#shared/contracts/problems.ts'
import type { Actor } from '../actor.ts'
import type { Database } from '../db/client.ts'
import { makeProblem } from '../problems.ts'
import { writeAudit } from './audit.ts'
import type { AuditEvent } from './audit.ts'
import { oncePerDatabase } from './recordQueries.ts'
import { refuseFaults } from './recordRules.ts'
import { hashCreation } from './records.ts'
import type { Context } from './records.ts'

/** What every record made where the work is done is kept with: see madeColumns. */
export interface MadeRow {
  companyId: string
  id: string
  creationHash: string
  at: string
  byId: string
  by: string
  receivedAt: string
  supersedesId: string | null
}
export type MadeTable = SQLiteTable & Record<keyof MadeRow, AnySQLiteColumn>

interface Made {
  id: string
  at: string
  supersedesId?: string | null
}

/** What one kind of them adds. The columns of its table are the fields of its body. */
export interface MadeKind<Body extends Made, Answer> {
  noun: string
  plural: string
  table: MadeTable
  findFaults(database: Database, companyId: string, body: Body): FieldError[]
  describe(database: Database, companyId: string, body: Body): AuditEvent
  toAnswer(row: never): Answer
}

const queriesIn = oncePerDatabase(({ queries }) => {
  const prepare = (table: MadeTable) => {
    const isOfCompany = eq(table.companyId, sql.placeholder('companyId'))
    return {
      find: queries
        .select()
        .from(table)
        .where(and(isOfCompany, eq(table.id, sql.placeholder('id'))))
        .prepare(),
      list: queries.select().from(table).where(isOfCompany).orderBy(table.receivedAt, table.id).prepare(),
      count: queries
        .select({ count: sql<number>`count(*)` })
        .from(table)
        .where(isOfCompany)
        .prepare(),
    }
  }
  const prepared = new Map<MadeTable, ReturnType<typeof prepare>>()
  return (table: MadeTable) => {
    const found = prepared.get(table) ?? prepare(table)
    prepared.set(table, found)
    return found
  }
})

export function findMade<Body extends Made, Answer>(
  { table }: MadeKind<Body, Answer>,
  database: Database,
  companyId: string,
  id: string,
): (MadeRow & Body) | undefined {
  return queriesIn(database)(table).find.get({ companyId, id }) as (MadeRow & Body) | undefined
}

/** All of a company's, corrected ones too, in the order in which they came. */
export function listMade<Body extends Made, Answer>(
  { table, toAnswer }: MadeKind<Body, Answer>,
  database: Database,
  companyId: string,
): Answer[] {
  return queriesIn(database)(table)
    .list.all({ companyId })
    .map((row) => toAnswer(row as never))
}

/** What is superseded must be there; that it has been superseded before is for people to look at. */
export function findSupersededFault<Body extends Made, Answer>(
  kind: MadeKind<Body, Answer>,
  database: Database,
  companyId: string,
  { supersedesId = null }: Body,
): FieldError[] {
  if (supersedesId === null || findMade(kind, database, companyId, supersedesId)) return []
  const message = `There is no such ${kind.noun} to correct.`
  return [{ path: '/supersedesId', code: 'unknown-reference', message }]
}

export function refuseTooManyMade<Body extends Made, Answer>(
  { table, plural }: MadeKind<Body, Answer>,
  database: Database,
  companyId: string,
  more = 1,
): void {
  const { count = 0 } = queriesIn(database)(table).count.get({ companyId }) ?? {}
  if (count + more <= workLimits.records) return
  throw makeProblem('too-many-records', `A company keeps at most ${workLimits.records} ${plural}.`)
}

/** A body as it is kept: as it came, with who sent it and when it arrived. */
export function toMadeRow<Body extends Made>(
  body: Body,
  { companyId, accountId, name }: Pick<Actor, 'companyId' | 'accountId' | 'name'>,
  at: Date,
): Body & MadeRow {
  return {
    supersedesId: null,
    ...body,
    companyId,
    creationHash: hashCreation(body),
    byId: accountId,
    by: name,
    receivedAt: at.toISOString(),
  } as Body & MadeRow
}

/**
 * Keeps what somebody wrote down, once however often it comes. Nothing is refused for contradicting what is there:
 * two phones that disagree are both kept, for people to look at.
 */
export function logMade<Body extends Made, Answer>(
  kind: MadeKind<Body, Answer>,
  { database, now }: Context,
  actor: Actor,
  body: Body,
): Answer {
  const { companyId } = actor
  return database.transact((writer) => {
    const existing = findMade(kind, database, companyId, body.id)
    if (existing) {
      if (existing.creationHash === hashCreation(body)) return kind.toAnswer(existing as never)
      throw makeProblem('id-in-use', `Another ${kind.noun} was made under this id.`)
    }
    refuseFaults([
      ...kind.findFaults(database, companyId, body),
      ...findSupersededFault(kind, database, companyId, body),
    ])
    refuseTooManyMade(kind, database, companyId)
    const at = now()
    writer
      .insert(kind.table)
      .values(toMadeRow(body, actor, at) as never)
      .run()
    writeAudit(writer, actor, at, kind.describe(database, companyId, body))
    return kind.toAnswer(findMade(kind, database, companyId, body.id) as never)
  })
}
