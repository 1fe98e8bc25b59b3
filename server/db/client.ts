import { mkdirSync } from 'node:fs'
import { join } from 'node:path'
import BetterSqlite from 'better-sqlite3'
import { drizzle } from 'drizzle-orm/better-sqlite3'
import type { BetterSQLite3Database } from 'drizzle-orm/better-sqlite3'
import { migrate } from 'drizzle-orm/better-sqlite3/migrator'
import { projectRoot } from '../config.ts'
import * as schema from './schema/index.ts'

const busyTimeoutMs = 5000
export const defaultMigrationsFolder = join(projectRoot, 'migrations')
export const databaseFileName = 'sixteenth.sqlite'

export type Queries = BetterSQLite3Database<typeof schema>
/** Inside a transaction or outside of one: a service that writes takes either. */
export type Writer = Pick<Queries, 'select' | 'insert' | 'update' | 'delete'>

export interface Database {
  queries: Queries
  /** the driver's own connection, for pragmas and backups */
  connection: BetterSqlite.Database
  /** All or nothing. It takes the write lock at once, so that what it reads first cannot go stale under it. */
  transact<Result>(work: (writer: Writer) => Result): Result
  isReachable(): boolean
  close(): void
}

/** Opens the one database of the installation, makes it if need be, and brings it to the newest migration. */
export function openDatabase(dataDir: string, migrationsFolder = defaultMigrationsFolder): Database {
  // What is in it is nobody's on this machine but the account's that runs us.
  mkdirSync(dataDir, { recursive: true, mode: 0o700 })
  const connection = new BetterSqlite(join(dataDir, databaseFileName))
  try {
    connection.pragma('journal_mode = WAL')
    // What was acknowledged is on the disk, whatever happens to the machine.
    connection.pragma('synchronous = FULL')
    // What is deleted or blanked, a mail's link among it, is not left lying in a free page.
    connection.pragma('secure_delete = ON')
    connection.pragma('foreign_keys = ON')
    connection.pragma(`busy_timeout = ${busyTimeoutMs}`)
    const queries = drizzle(connection, { schema })
    migrate(queries, { migrationsFolder })
    return {
      queries,
      connection,
      transact(work) {
        return queries.transaction(work, { behavior: 'immediate' })
      },
      isReachable() {
        try {
          return connection.prepare('select 1').pluck().get() === 1
        } catch {
          return false
        }
      },
      close() {
        connection.close()
      },
    }
  } catch (error) {
    connection.close()
    throw error
  }
}
