import {
  closeSync,
  cpSync,
  existsSync,
  fsyncSync,
  linkSync,
  mkdirSync,
  openSync,
  readFileSync,
  renameSync,
  rmSync,
} from 'node:fs'
import { join } from 'node:path'
import BetterSqlite from 'better-sqlite3'
import { readMigrationFiles } from 'drizzle-orm/migrator'
import type { Config } from '../config.ts'
import { databaseFileName, defaultMigrationsFolder } from '../db/client.ts'
import {
  BackupError,
  findDamage,
  listFiles,
  manifestFileName,
  manifestSchema,
  uploadsFolderName,
} from './backup.ts'
import type { BackupManifest } from './backup.ts'

function readManifest(folder: string): BackupManifest {
  const path = join(folder, manifestFileName)
  if (!existsSync(path)) throw new BackupError(`${folder} is no backup: it has no ${manifestFileName}.`)
  try {
    return manifestSchema.parse(JSON.parse(readFileSync(path, 'utf8')))
  } catch {
    throw new BackupError(`${path} cannot be read.`)
  }
}

async function checkFiles(folder: string, manifest: BackupManifest): Promise<void> {
  const found = new Map((await listFiles(folder)).map((file) => [file.path, file]))
  for (const { path, sha256 } of manifest.files) {
    const file = found.get(path)
    if (!file) throw new BackupError(`${path} is missing in the backup.`)
    if (file.sha256 !== sha256) throw new BackupError(`${path} is not as it was when the backup was made.`)
    found.delete(path)
  }
  const [unknown] = found.keys()
  if (unknown !== undefined) throw new BackupError(`${unknown} does not belong to the backup.`)
  if (!manifest.files.some(({ path }) => path === databaseFileName)) {
    throw new BackupError('The backup holds no database.')
  }
}

/** The migrations it went through must be the first ones of ours: a newer application's data is not understood here. */
function checkMigrations(connection: BetterSqlite.Database, migrationsFolder: string): void {
  const known = readMigrationFiles({ migrationsFolder }).map(({ hash }) => hash)
  const gone = connection
    .prepare('select hash from __drizzle_migrations order by created_at')
    .pluck()
    .all() as string[]
  if (gone.length === 0 || gone.some((hash, index) => hash !== known[index])) {
    throw new BackupError('The backup is of another or a newer version of this application.')
  }
}

function checkDatabase(path: string, migrationsFolder: string): void {
  const connection = new BetterSqlite(path)
  try {
    const damage = findDamage(connection)
    if (damage) throw new BackupError(`The database of the backup is damaged: ${damage}.`)
    checkMigrations(connection, migrationsFolder)
    // Who was let go since would be back in with a session of that day.
    connection.exec('delete from sessions')
  } finally {
    connection.close()
  }
  const file = openSync(path, 'r+')
  fsyncSync(file)
  closeSync(file)
}

/**
 * Takes the database for itself until it is let go. Whoever has it open, even without doing anything, holds a lock
 * on the file, which the system takes back from a process that was killed: no file says that a server runs when none
 * does. Nothing to lock where there is no database, or one too damaged to be opened.
 */
function lockDatabase(path: string): () => void {
  if (!existsSync(path)) return () => {}
  const connection = new BetterSqlite(path, { timeout: 500 })
  try {
    connection.pragma('locking_mode = EXCLUSIVE')
    // What is still in the log goes into the file, so that the file alone is the database.
    connection.pragma('journal_mode = DELETE')
    connection.exec('BEGIN EXCLUSIVE')
    return () => connection.close()
  } catch (error) {
    connection.close()
    const { code } = error as { code?: string }
    if (!code?.startsWith('SQLITE_BUSY') && !code?.startsWith('SQLITE_LOCKED')) return () => {}
    throw new BackupError('A server is using this data folder. Stop it first.')
  }
}

/** The old goes aside and the new takes its place; at no moment is there no database. */
function replace(dataDir: string, staged: string, aside: string): void {
  const place = (name: string) => join(dataDir, name)
  mkdirSync(aside, { recursive: true, mode: 0o700 })
  for (const name of [`${databaseFileName}-wal`, `${databaseFileName}-shm`, uploadsFolderName]) {
    if (existsSync(place(name))) renameSync(place(name), join(aside, name))
  }
  if (existsSync(place(databaseFileName))) linkSync(place(databaseFileName), join(aside, databaseFileName))
  if (existsSync(join(staged, uploadsFolderName))) {
    renameSync(join(staged, uploadsFolderName), place(uploadsFolderName))
  }
  renameSync(join(staged, databaseFileName), place(databaseFileName))
}

/**
 * Puts a backup in the place of the data. It is copied beside them first and the copy is checked, so that a damaged
 * one changes nothing. Answers the folder that what was replaced is kept in.
 */
export async function restoreBackup(
  { dataDir }: Pick<Config, 'dataDir'>,
  folder: string,
  now: Date,
  migrationsFolder = defaultMigrationsFolder,
): Promise<string> {
  const manifest = readManifest(folder)
  const stamp = now.toISOString().replace(/[-:.]/g, '')
  const staged = join(dataDir, `restoring-${stamp}`)
  mkdirSync(dataDir, { recursive: true })
  try {
    cpSync(folder, staged, { recursive: true })
    await checkFiles(staged, manifest)
    checkDatabase(join(staged, databaseFileName), migrationsFolder)
    const unlock = lockDatabase(join(dataDir, databaseFileName))
    try {
      const aside = join(dataDir, `replaced-${stamp}`)
      replace(dataDir, staged, aside)
      return aside
    } finally {
      unlock()
    }
  } finally {
    rmSync(staged, { recursive: true, force: true })
  }
}
