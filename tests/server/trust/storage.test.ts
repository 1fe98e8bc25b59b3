import { randomUUID } from 'node:crypto'
import { cpSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import BetterSqlite from 'better-sqlite3'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import type { SiteRecord } from '#shared/contracts/sites.ts'
import { openDatabase } from '../../../server/db/client.ts'
import { readSetting, writeSetting } from '../../../server/services/settings.ts'
import { makeSiteBody } from '../../support/fleet.ts'
import { makeCompany, makePerson } from '../../support/people.ts'
import type { TestPerson } from '../../support/people.ts'
import { readProblem } from '../../support/requests.ts'
import { makeDataDir, startServer } from '../../support/server.ts'
import type { RunningServer } from '../../support/server.ts'

/** Every table's definition and rows, by a connection of its own. */
function readAll(dataDir: string): Record<string, unknown> {
  const connection = new BetterSqlite(join(dataDir, 'sixteenth.sqlite'), { readonly: true })
  const tables = connection.prepare("select name, sql from sqlite_master where type = 'table'").all() as {
    name: string
    sql: string
  }[]
  const everything = Object.fromEntries(
    tables.map(({ name, sql }) => [name, { sql, rows: connection.prepare(`select * from "${name}"`).all() }]),
  )
  connection.close()
  return everything
}

describe('the database as it is opened', () => {
  let dataDir: string
  beforeEach(() => {
    dataDir = makeDataDir()
  })
  afterEach(() => rmSync(dataDir, { recursive: true, force: true }))

  it('writes ahead, waits for the disk, keeps references whole and waits for a lock', () => {
    const database = openDatabase(dataDir)
    const setting = (name: string) => database.connection.pragma(name, { simple: true })
    expect(setting('journal_mode')).toBe('wal')
    // 2 is FULL: https://www.sqlite.org/pragma.html#pragma_synchronous
    expect(setting('synchronous')).toBe(2)
    expect(setting('foreign_keys')).toBe(1)
    expect(setting('busy_timeout')).toBe(5000)
    database.close()
  })

  it('a migration that fails half way leaves the old one as it was, and its data usable', () => {
    const before = openDatabase(dataDir)
    writeSetting(before, 'colour', 'red')
    before.close()
    const untouched = readAll(dataDir)

    const folder = join(dataDir, 'migrations')
    cpSync('migrations', folder, { recursive: true })
    const journalPath = join(folder, 'meta/_journal.json')
    const journal = JSON.parse(readFileSync(journalPath, 'utf8')) as { entries: { when: number }[] }
    const last = journal.entries.at(-1)
    journal.entries.push({ ...last, idx: 99, tag: '0099_broken', when: (last?.when ?? 0) + 1000 } as never)
    writeFileSync(journalPath, JSON.stringify(journal))
    const broken = [
      'CREATE TABLE half_way (id text)',
      "UPDATE settings SET value = 'blue'",
      'ALTER TABLE settings ADD COLUMN shade text',
      'DROP TABLE rig_days',
      'INSERT INTO no_such_table VALUES (1)',
    ]
    writeFileSync(join(folder, '0099_broken.sql'), broken.join(';\n--> statement-breakpoint\n'))
    expect(() => openDatabase(dataDir, folder)).toThrow(/no_such_table/)

    expect(readAll(dataDir)).toEqual(untouched)
    const after = openDatabase(dataDir)
    expect(readSetting(after, 'colour')).toBe('red')
    after.close()
  })
})

/** Makes the live connection refuse to write, and lets it write again. */
const troubles = {
  'the disk is full': ({ database: { connection } }: RunningServer) => {
    // The least it takes is the size that it has: no page more.
    connection.pragma('max_page_count = 1')
    return () => connection.pragma('max_page_count = 1073741823')
  },
  'the database may only be read': ({ database: { connection } }: RunningServer) => {
    connection.pragma('query_only = ON')
    return () => connection.pragma('query_only = OFF')
  },
}

describe.each(Object.entries(troubles))('when %s', (_name, makeTrouble) => {
  let server: RunningServer
  let person: TestPerson
  let now = new Date()
  beforeEach(async () => {
    now = new Date()
    server = await startServer({}, () => now)
    person = makePerson(server, makeCompany(server))
  })
  afterEach(() => server.stop())

  /** Posts sites until one is refused; answers the ids of those that were acknowledged and the refusal. */
  async function postUntilRefused(): Promise<{ acknowledged: string[]; refused: string; answer: Response }> {
    const acknowledged: string[] = []
    for (let count = 0; count < 500; count += 1) {
      const site = makeSiteBody({ id: randomUUID(), name: `Site ${count}` })
      const answer = await person.ask('POST', '/api/v1/sites', site)
      if (!answer.ok) return { acknowledged, refused: site.id, answer }
      acknowledged.push(site.id)
    }
    throw new Error('Nothing was refused.')
  }

  async function listSites(): Promise<string[]> {
    const answer = await person.ask('GET', '/api/v1/fleet')
    expect(answer.status).toBe(200)
    const { sites } = (await answer.json()) as { sites: SiteRecord[] }
    return sites.map(({ id }) => id).sort()
  }

  it('a write says so, nothing acknowledged is lost, and what was refused can be sent again', async () => {
    const first = makeSiteBody({ id: randomUUID(), name: 'Before' })
    expect((await person.ask('POST', '/api/v1/sites', first)).status).toBe(201)

    const endTrouble = makeTrouble(server)
    const { acknowledged, refused, answer } = await postUntilRefused()
    expect(answer.status).toBe(503)
    const problem = await readProblem(answer)
    expect(problem.code).toBe('storage-unavailable')
    expect(problem.detail).toMatch(/could not be saved/)

    const kept = [first.id, ...acknowledged].sort()
    expect(await listSites()).toEqual(kept)
    endTrouble()
    const again = await person.ask('POST', '/api/v1/sites', makeSiteBody({ id: refused, name: 'Again' }))
    expect(again.status).toBe(201)
    expect(await listSites()).toEqual([...kept, refused].sort())
    expect(server.database.connection.pragma('integrity_check', { simple: true })).toBe('ok')
  })

  it('reading goes on, also where a visit would be noted', async () => {
    const endTrouble = makeTrouble(server)
    expect((await postUntilRefused()).answer.status).toBe(503)
    // Long enough after the last visit that both the session and the membership want a new note.
    now = new Date(now.getTime() + 10 * 60_000)
    expect((await person.ask('GET', '/api/v1/fleet')).status).toBe(200)
    expect((await fetch(`${server.address}/api/v1/health`)).status).toBe(200)
    endTrouble()
  })
})
