import { and, eq, sql } from 'drizzle-orm'
import type { AnySQLiteColumn, SQLiteTable } from 'drizzle-orm/sqlite-core'
import type { FieldError } from '#shared/contracts/problems.ts'
import type { Database } from '../db/client.ts'
import { oncePerDatabase } from './recordQueries.ts'

type OwnedTable = SQLiteTable & Record<'companyId' | 'id', AnySQLiteColumn>

interface Reference {
  path: string
  noun: string
  table: OwnedTable
  id: string | null
}

const queriesIn = oncePerDatabase(({ queries }) => {
  const prepare = (table: OwnedTable) =>
    queries
      .select({ id: table.id })
      .from(table)
      .where(and(eq(table.companyId, sql.placeholder('companyId')), eq(table.id, sql.placeholder('id'))))
      .prepare()
  const prepared = new Map<OwnedTable, ReturnType<typeof prepare>>()
  return (table: OwnedTable) => {
    const found = prepared.get(table) ?? prepare(table)
    prepared.set(table, found)
    return found
  }
})

/**
 * What was written down of something is good as long as the company has, or had, such a thing: by the time a phone
 * comes back into reach it may be archived or deleted, and what was done was done.
 */
export function findUnknown(
  database: Database,
  companyId: string,
  { path, noun, table, id }: Reference,
): FieldError[] {
  if (id === null || queriesIn(database)(table).get({ companyId, id })) return []
  return [{ path, code: 'unknown-reference', message: `There is no such ${noun}.` }]
}
