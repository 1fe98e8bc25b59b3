import { and, asc, eq, getTableColumns, isNull, sql } from 'drizzle-orm'
import type { AnySQLiteColumn, SQLiteTable } from 'drizzle-orm/sqlite-core'
import type { Database } from '../db/client.ts'

/** What every record of a company is kept with: see recordColumns. */
export interface RecordRow {
  companyId: string
  id: string
  name: string
  version: number
  creationHash: string
  createdAt: string
  updatedAt: string
  updatedBy: string
  archivedAt: string | null
  deletedAt: string | null
}

export type RecordTable = SQLiteTable & Record<keyof RecordRow, AnySQLiteColumn>

const value = sql.placeholder

function placeholdersFor(columns: string[]): Record<string, unknown> {
  return Object.fromEntries(columns.map((column) => [column, value(column)]))
}

function prepareQueries({ queries }: Database, table: RecordTable) {
  const { companyId, id, name, archivedAt } = table
  const isTheOne = and(eq(companyId, value('companyId')), eq(id, value('id')))
  const isListed = and(eq(companyId, value('companyId')), isNull(table.deletedAt))
  const inOrder = [asc(name), asc(id)]
  const columns = Object.keys(getTableColumns(table))
  const changing = columns.filter((column) => column !== 'companyId' && column !== 'id')
  return {
    find: queries.select().from(table).where(isTheOne).prepare(),
    list: queries
      .select()
      .from(table)
      .where(isListed)
      .orderBy(...inOrder)
      .prepare(),
    names: queries.select({ id, name, archivedAt }).from(table).where(isListed).prepare(),
    firstPage: queries
      .select()
      .from(table)
      .where(isListed)
      .orderBy(...inOrder)
      .limit(value('limit'))
      .prepare(),
    nextPage: queries
      .select()
      .from(table)
      .where(and(isListed, isAfter(table)))
      .orderBy(...inOrder)
      .limit(value('limit'))
      .prepare(),
    insert: queries
      .insert(table)
      .values(placeholdersFor(columns) as never)
      .prepare(),
    update: queries
      .update(table)
      .set(placeholdersFor(changing) as never)
      .where(isTheOne)
      .prepare(),
  }
}

/** Past the last line of the page before. */
export function isAfter({ name, id }: Pick<RecordTable, 'name' | 'id'>) {
  return sql`(${name}, ${id}) > (${value('afterName')}, ${value('afterId')})`
}

/** The queries of one kind of record, prepared once for a database. */
export interface RecordQueries<Row extends RecordRow> {
  find(companyId: string, id: string): Row | undefined
  list(companyId: string): Row[]
  /** every name that is taken */
  names(companyId: string): Pick<Row, 'id' | 'name' | 'archivedAt'>[]
  page(companyId: string, limit: number, after: { name: string; id: string } | null): Row[]
  insert(row: Row): void
  update(row: Row): void
}

function makeQueries<Row extends RecordRow>(database: Database, table: RecordTable): RecordQueries<Row> {
  const prepared = prepareQueries(database, table)
  return {
    find: (companyId, id) => prepared.find.get({ companyId, id }) as Row | undefined,
    list: (companyId) => prepared.list.all({ companyId }) as Row[],
    names: (companyId) => prepared.names.all({ companyId }) as Row[],
    page: (companyId, limit, after) =>
      (after
        ? prepared.nextPage.all({ companyId, limit, afterName: after.name, afterId: after.id })
        : prepared.firstPage.all({ companyId, limit })) as Row[],
    insert: (row) => void prepared.insert.run(row as unknown as Record<string, unknown>),
    update: (row) => void prepared.update.run(row as unknown as Record<string, unknown>),
  }
}

/** Remembers for each database what was prepared on it. */
export function oncePerDatabase<Made>(make: (database: Database) => Made): (database: Database) => Made {
  const made = new WeakMap<Database, { it: Made }>()
  return (database) => {
    let found = made.get(database)
    if (!found) made.set(database, (found = { it: make(database) }))
    return found.it
  }
}

export function queriesOf<Row extends RecordRow>(
  table: RecordTable,
): (database: Database) => RecordQueries<Row> {
  return oncePerDatabase((database) => makeQueries<Row>(database, table))
}
