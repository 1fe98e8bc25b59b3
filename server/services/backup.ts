import { createHash } from 'node:crypto'
import {
  cpSync,
  createReadStream,
  existsSync,
  mkdirSync,
  readdirSync,
  renameSync,
  rmSync,
  statSync,
} from 'node:fs'
import { writeFile } from 'node:fs/promises'
import { join } from 'node:path'
import BetterSqlite from 'better-sqlite3'
import { z } from 'zod'
import type { Config } from '../config.ts'
import { databaseFileName } from '../db/client.ts'

export const uploadsFolderName = 'uploads'
export const manifestFileName = 'backup.json'
/** so many of the daily ones are kept; those made by hand are never removed */
export const dailyBackupsKept = 7
const dayMs = 24 * 3600_000
/** a clock's small steps must not make a day of 25 hours out of two */
const dueAfterMs = dayMs - 10 * 60_000
const partialSuffix = '.partial'
const dailyName = /^daily-(\d{4})(\d\d)(\d\d)T(\d\d)(\d\d)(\d\d)(\d{3})Z$/

export const manifestSchema = z.strictObject({
  madeAt: z.iso.datetime(),
  /** of the application that made it */
  version: z.string(),
  files: z.array(z.strictObject({ path: z.string(), bytes: z.number().int(), sha256: z.string() })),
})
export type BackupManifest = z.infer<typeof manifestSchema>
export type BackupKind = 'daily' | 'manual'
type BackupConfig = Pick<Config, 'dataDir' | 'backupDir' | 'version'>

/** What is wrong with a backup or its place, for a person to read. */
export class BackupError extends Error {
  override name = 'BackupError'
}

async function hashFile(path: string): Promise<string> {
  const hash = createHash('sha256')
  for await (const chunk of createReadStream(path)) hash.update(chunk as Buffer)
  return hash.digest('hex')
}

/** Each file under a folder but the manifest, with what it takes to know it again. */
export async function listFiles(folder: string): Promise<BackupManifest['files']> {
  const paths = readdirSync(folder, { recursive: true, withFileTypes: true })
    .filter((entry) => entry.isFile())
    .map((entry) => join(entry.parentPath, entry.name).slice(folder.length + 1))
    .filter((path) => path !== manifestFileName)
    .sort()
  const files = []
  for (const path of paths) {
    const whole = join(folder, path)
    files.push({ path, bytes: statSync(whole).size, sha256: await hashFile(whole) })
  }
  return files
}

/** Damage in a database file; null where it is whole. */
export function findDamage(connection: BetterSqlite.Database): string | null {
  try {
    const words: unknown = connection.pragma('integrity_check', { simple: true })
    if (words !== 'ok') return String(words)
    const broken = connection.pragma('foreign_key_check') as unknown[]
    return broken.length === 0 ? null : `${broken.length} references lead nowhere`
  } catch (error) {
    return error instanceof Error ? error.message : String(error)
  }
}

/** The database as it is at one moment, whatever is written meanwhile, in a file that needs none beside it. */
async function copyDatabase(from: string, to: string): Promise<void> {
  const source = new BetterSqlite(from, { readonly: true, fileMustExist: true })
  try {
    // All pages in one step: a copy in parts would begin again with each write of the server.
    await source.backup(to, { progress: () => 0x7fffffff })
  } finally {
    source.close()
  }
  const copy = new BetterSqlite(to)
  try {
    copy.pragma('journal_mode = DELETE')
    const damage = findDamage(copy)
    if (damage) throw new BackupError(`The copy of the database is damaged: ${damage}.`)
  } finally {
    copy.close()
  }
}

/** Copies database and uploads into a new folder, which has its name only once it is whole. Answers the folder. */
export async function makeBackup(config: BackupConfig, kind: BackupKind, now: Date): Promise<string> {
  const database = join(config.dataDir, databaseFileName)
  if (!existsSync(database)) throw new BackupError(`There is no database in ${config.dataDir}.`)
  const madeAt = now.toISOString()
  const folder = join(config.backupDir, `${kind}-${madeAt.replace(/[-:.]/g, '')}`)
  if (existsSync(folder)) throw new BackupError(`${folder} is there already.`)
  const partial = folder + partialSuffix
  // Whoever reads it reads everything: it is the owner's of the process alone.
  mkdirSync(partial, { recursive: true, mode: 0o700 })
  try {
    await copyDatabase(database, join(partial, databaseFileName))
    const uploads = join(config.dataDir, uploadsFolderName)
    if (existsSync(uploads)) cpSync(uploads, join(partial, uploadsFolderName), { recursive: true })
    const manifest: BackupManifest = { madeAt, version: config.version, files: await listFiles(partial) }
    await writeFile(join(partial, manifestFileName), JSON.stringify(manifest, null, 2), { flush: true })
    renameSync(partial, folder)
  } catch (error) {
    rmSync(partial, { recursive: true, force: true })
    throw error
  }
  return folder
}

/** The daily backups that are whole, oldest first. */
export function listDailyBackups(backupDir: string): string[] {
  if (!existsSync(backupDir)) return []
  return readdirSync(backupDir)
    .filter((name) => dailyName.test(name))
    .sort()
}

export function isDailyBackupDue(backupDir: string, now: Date): boolean {
  const newest = listDailyBackups(backupDir).at(-1)
  if (newest === undefined) return true
  const madeAt = Date.parse(newest.replace(dailyName, '$1-$2-$3T$4:$5:$6.$7Z'))
  // One from the future was named by a clock that was wrong.
  return madeAt > now.getTime() || now.getTime() - madeAt >= dueAfterMs
}

/** A backup of the day; the oldest go, and what a broken one left. */
export async function makeDailyBackup(config: BackupConfig, now: Date): Promise<string> {
  mkdirSync(config.backupDir, { recursive: true, mode: 0o700 })
  for (const name of readdirSync(config.backupDir)) {
    if (name.startsWith('daily-') && name.endsWith(partialSuffix))
      rmSync(join(config.backupDir, name), { recursive: true })
  }
  const folder = await makeBackup(config, 'daily', now)
  for (const name of listDailyBackups(config.backupDir).slice(0, -dailyBackupsKept)) {
    rmSync(join(config.backupDir, name), { recursive: true })
  }
  return folder
}
