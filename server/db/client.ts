import { mkdirSync } from 'node:fs'
import { join } from 'node:path'
import BetterSqlite from 'better-sqlite3'
import { drizzle } from 'drizzle-orm/better-sqlite3'
import { migrate } from 'drizzle-orm/better-sqlite3/migrator'
import { projectRoot } from '../config.ts'
import * as schema from './schema/index.ts'

const busyTimeoutMs = 5000
const migrationsFolder = join(projectRoot, 'migrations')

export type Database = ReturnType<typeof openDatabase>

/** Opens the one database of the installation, makes it if need be, and brings it to the newest migration. */
export function openDatabase(dataDir: string) {
  mkdirSync(dataDir, { recursive: true })
  const connection = new BetterSqlite(join(dataDir, 'sixteenth.sqlite'))
  connection.pragma('journal_mode = WAL')
  connection.pragma('synchronous = NORMAL')
  connection.pragma('foreign_keys = ON')
  connection.pragma(`busy_timeout = ${busyTimeoutMs}`)
  const queries = drizzle(connection, { schema })
  migrate(queries, { migrationsFolder })
  return {
    queries,
    isReachable(): boolean {
      try {
        return connection.prepare('select 1').pluck().get() === 1
      } catch {
        return false
      }
    },
    close(): void {
      connection.close()
    },
  }
}
