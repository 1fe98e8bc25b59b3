import { spawn } from 'node:child_process'
import { createHash } from 'node:crypto'
import { once } from 'node:events'
import { mkdirSync, readdirSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import BetterSqlite from 'better-sqlite3'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { openDatabase } from '../../../server/db/client.ts'
import {
  isDailyBackupDue,
  listDailyBackups,
  makeBackup,
  makeDailyBackup,
} from '../../../server/services/backup.ts'
import { restoreBackup } from '../../../server/services/restore.ts'
import { readSetting, writeSetting } from '../../../server/services/settings.ts'
import { makeDataDir } from '../../support/server.ts'
import { startServerProcess } from '../../support/serverProcess.ts'

let dataDir: string
let backupDir: string
beforeEach(() => {
  dataDir = makeDataDir()
  backupDir = makeDataDir()
})
afterEach(() => {
  for (const folder of [dataDir, backupDir]) rmSync(folder, { recursive: true, force: true })
})

/** Runs a tool as its npm script does. */
async function runTool(name: 'backup' | 'restore', ...args: string[]) {
  const child = spawn(process.execPath, ['--import', 'tsx', `server/tools/${name}.ts`, ...args], {
    env: { PATH: process.env['PATH'] ?? '', NODE_ENV: 'test', DATA_DIR: dataDir, BACKUP_DIR: backupDir },
  })
  let said = ''
  for (const stream of [child.stdout, child.stderr]) {
    stream.on('data', (chunk: Buffer) => (said += chunk.toString()))
  }
  const [code] = (await once(child, 'close')) as [number | null]
  return { code, said }
}

const backUp = () => makeBackup({ dataDir, backupDir, version: '1' }, 'manual', new Date())
const restore = (folder: string) => restoreBackup({ dataDir }, folder, new Date())

async function backUpByTool(): Promise<string> {
  const { code, said } = await runTool('backup')
  expect(said).toMatch(/^The backup is in /)
  expect(code).toBe(0)
  return said.slice('The backup is in '.length).trim()
}

function setColour(value: string): void {
  const database = openDatabase(dataDir)
  writeSetting(database, 'colour', value)
  database.close()
}

function readColour(folder = dataDir): string | null {
  const database = openDatabase(folder)
  try {
    return readSetting(database, 'colour')
  } finally {
    database.close()
  }
}

function uploadPhoto(content: string): void {
  mkdirSync(join(dataDir, 'uploads/a'), { recursive: true })
  writeFileSync(join(dataDir, 'uploads/a/photo.jpg'), content)
}

const readPhoto = (folder = dataDir) => readFileSync(join(folder, 'uploads/a/photo.jpg'), 'utf8')

describe('a backup', () => {
  it('put back is what was there, uploads too, and what it replaced is kept', async () => {
    setColour('red')
    uploadPhoto('first')
    const folder = await backUpByTool()
    setColour('blue')
    uploadPhoto('second')

    const { code, said } = await runTool('restore', folder)
    expect(said).toMatch(/is kept in/)
    expect(code).toBe(0)
    expect(readColour()).toBe('red')
    expect(readPhoto()).toBe('first')
    const aside = /is kept in (.+)$/m.exec(said)?.[1] ?? ''
    expect(readColour(aside)).toBe('blue')
    expect(readPhoto(aside)).toBe('second')
  })

  it('may be read by nobody else on the machine', async () => {
    setColour('red')
    expect(statSync(await backUp()).mode & 0o077).toBe(0)
  })

  it('put back signs nobody in who was signed in on its day', async () => {
    const database = openDatabase(dataDir)
    const at = new Date().toISOString()
    database.connection
      .prepare(
        'insert into sessions (id_hash, data, created_at, last_used_at, expires_at) values (?, ?, ?, ?, ?)',
      )
      .run('hash', '{}', at, at, '2999-01-01T00:00:00.000Z')
    database.close()
    const folder = await backUp()
    await restore(folder)
    const restored = openDatabase(dataDir)
    expect(restored.connection.prepare('select count(*) from sessions').pluck().get()).toBe(0)
    restored.close()
  })

  it('made while somebody writes is of one moment, and the writing goes on', async () => {
    const database = openDatabase(dataDir)
    const { connection } = database
    connection.exec('create table entries (number integer primary key, text text)')
    connection.exec('create table totals (id integer primary key, entries integer)')
    connection.exec('insert into totals values (1, 0)')
    const add = connection.transaction(() => {
      connection.prepare('insert into entries (text) values (?)').run('x'.repeat(2000))
      connection.prepare('update totals set entries = entries + 1').run()
    })
    for (let count = 0; count < 3000; count += 1) add()

    let isDone = false
    const making = backUpByTool().finally(() => (isDone = true))
    let written = 3000
    while (!isDone) {
      add()
      written += 1
      await new Promise((resolve) => setImmediate(resolve))
    }
    const folder = await making
    expect(connection.prepare('select count(*) from entries').pluck().get()).toBe(written)
    database.close()

    await restore(folder)
    const restored = openDatabase(dataDir)
    const read = (sql: string) => restored.connection.prepare(sql).pluck().get() as number
    expect(read('select count(*) from entries')).toBe(read('select entries from totals'))
    expect(read('select count(*) from entries')).toBeGreaterThanOrEqual(3000)
    // It was still being written when the copy was made, else nothing was tried.
    expect(read('select count(*) from entries')).toBeLessThan(written)
    restored.close()
  })
})

/** Ways a backup goes bad, each of which is found before anything is replaced. */
const damages: Record<string, [RegExp, (folder: string) => void]> = {
  'a byte of its database changed': [
    /not as it was/,
    (folder) => {
      const path = join(folder, 'sixteenth.sqlite')
      const content = readFileSync(path)
      content[content.length - 100] = (content.at(-100) ?? 0) ^ 1
      writeFileSync(path, content)
    },
  ],
  'its database cut short': [
    /not as it was/,
    (folder) => {
      const path = join(folder, 'sixteenth.sqlite')
      writeFileSync(path, readFileSync(path).subarray(0, 8192))
    },
  ],
  'an upload lost': [/photo\.jpg is missing/, (folder) => rmSync(join(folder, 'uploads/a/photo.jpg'))],
  'a file too many': [/stray\.txt does not belong/, (folder) => writeFileSync(join(folder, 'stray.txt'), '')],
  'no list of its files': [/is no backup/, (folder) => rmSync(join(folder, 'backup.json'))],
  'its list unreadable': [/cannot be read/, (folder) => writeFileSync(join(folder, 'backup.json'), '{')],
}

/** Changes the database of a backup and signs the change in its list, as no accident does. */
function forge(folder: string, change: (connection: BetterSqlite.Database) => void): void {
  const path = join(folder, 'sixteenth.sqlite')
  const connection = new BetterSqlite(path)
  connection.pragma('foreign_keys = OFF')
  change(connection)
  connection.close()
  const manifestPath = join(folder, 'backup.json')
  const manifest = JSON.parse(readFileSync(manifestPath, 'utf8')) as {
    files: { path: string; sha256: string }[]
  }
  for (const file of manifest.files) {
    if (file.path === 'sixteenth.sqlite')
      file.sha256 = createHash('sha256').update(readFileSync(path)).digest('hex')
  }
  writeFileSync(manifestPath, JSON.stringify(manifest))
}

describe('putting a backup back', () => {
  /** Refused with these words, and everything as before. */
  async function expectRefusal(folder: string, words: RegExp): Promise<void> {
    const list = () => readdirSync(dataDir).filter((name) => !/-(wal|shm)$/.test(name))
    const before = list()
    await expect(restore(folder)).rejects.toThrow(words)
    expect(list()).toEqual(before)
  }

  it.each(Object.entries(damages))('with %s is refused and the data stay', async (_name, [words, damage]) => {
    setColour('red')
    uploadPhoto('first')
    const folder = await backUp()
    setColour('blue')
    uploadPhoto('second')
    damage(folder)
    await expectRefusal(folder, words)
    expect(readColour()).toBe('blue')
    expect(readPhoto()).toBe('second')
  })

  it('that refers to what is not there is refused', async () => {
    setColour('red')
    const folder = await backUp()
    forge(folder, (connection) =>
      connection.exec(
        "insert into memberships (id, company_id, account_id, roles, state, joined_at, version) values ('m', 'none', 'none', '[]', 'active', '', 1)",
      ),
    )
    await expectRefusal(folder, /references lead nowhere/)
  })

  it('of a newer version of the application is refused', async () => {
    setColour('red')
    const folder = await backUp()
    forge(folder, (connection) =>
      connection.exec(
        "insert into __drizzle_migrations (hash, created_at) values ('unknown', 99999999999999)",
      ),
    )
    await expectRefusal(folder, /newer version/)
  })

  it('is refused while a server runs on the data, and works once it was killed', async () => {
    const server = await startServerProcess(dataDir)
    const folder = await backUp()
    await expectRefusal(folder, /A server is using this data folder/)
    const refused = await runTool('restore', folder)
    expect(refused).toEqual({ code: 1, said: 'A server is using this data folder. Stop it first.\n' })
    expect((await fetch(`${server.address}/api/v1/health`)).status).toBe(200)
    server.kill('SIGKILL')
    await server.ended
    setColour('blue')
    await restore(folder)
    expect(readColour()).toBeNull()
  })

  it('works where the data are damaged beyond opening, and keeps them', async () => {
    setColour('red')
    const folder = await backUp()
    writeFileSync(join(dataDir, 'sixteenth.sqlite'), 'rubbish'.repeat(1000))
    const aside = await restore(folder)
    expect(readColour()).toBe('red')
    expect(readFileSync(join(aside, 'sixteenth.sqlite'), 'utf8')).toMatch(/^rubbish/)
  })
})

describe('the daily backup', () => {
  const dayMs = 24 * 3600_000

  it('keeps the last seven, and never touches one made by hand', async () => {
    setColour('red')
    const byHand = await backUp()
    const config = { dataDir, backupDir, version: '1' }
    const start = Date.parse('2026-03-01T04:00:00.000Z')
    for (let day = 0; day < 9; day += 1) await makeDailyBackup(config, new Date(start + day * dayMs))
    const kept = listDailyBackups(backupDir)
    expect(kept).toHaveLength(7)
    expect(kept[0]).toContain('20260303')
    expect(kept.at(-1)).toContain('20260309')
    expect(statSync(byHand).isDirectory()).toBe(true)
  })

  it('is due when there is none, and again a day after the last', async () => {
    setColour('red')
    const made = new Date('2026-03-01T04:00:00.000Z')
    expect(isDailyBackupDue(backupDir, made)).toBe(true)
    await makeDailyBackup({ dataDir, backupDir, version: '1' }, made)
    expect(isDailyBackupDue(backupDir, new Date(made.getTime() + dayMs / 2))).toBe(false)
    expect(isDailyBackupDue(backupDir, new Date(made.getTime() + dayMs))).toBe(true)
  })
})
