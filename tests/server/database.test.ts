import { companies } from '../../server/db/schema/index.ts'
import { rmSync, statSync } from 'node:fs'
import { join } from 'node:path'
import BetterSqlite from 'better-sqlite3'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { readConfig } from '../../server/config.ts'
import type { Config } from '../../server/config.ts'
import { openDatabase } from '../../server/db/client.ts'
import { holdsDemo, prepareDemo } from '../../server/db/seed.ts'
import { readSetting, writeSetting } from '../../server/services/settings.ts'
import { makeDataDir } from '../support/server.ts'

let dataDir: string
beforeEach(() => {
  dataDir = makeDataDir()
})
afterEach(() => rmSync(dataDir, { recursive: true, force: true }))

const production = {
  NODE_ENV: 'production',
  PUBLIC_URL: 'https://sixteenth.example.com',
  SESSION_SECRET: 'x'.repeat(32),
}

/** Opens the database as a start with this environment does, and closes it again. */
function startWith(environment: Record<string, string>): boolean {
  const config: Config = readConfig(environment)
  const database = openDatabase(dataDir)
  try {
    prepareDemo(database, config)
    return holdsDemo(database)
  } finally {
    database.close()
  }
}

function listMigrations(): unknown[] {
  const connection = new BetterSqlite(join(dataDir, 'sixteenth.sqlite'), { readonly: true })
  const rows = connection.prepare('select hash, created_at from __drizzle_migrations').all()
  connection.close()
  return rows
}

describe('the database', () => {
  it('is brought to the newest migration once, not again at the second start', () => {
    openDatabase(dataDir).close()
    const first = listMigrations()
    expect(first.length).toBeGreaterThan(0)
    openDatabase(dataDir).close()
    expect(listMigrations()).toEqual(first)
  })

  it('stands in a folder that no other account of the machine can look into', () => {
    const folder = join(dataDir, 'of', 'our own')
    openDatabase(folder).close()
    expect(statSync(folder).mode & 0o077).toBe(0)
  })

  it('keeps what was written over a restart, the last value of each key', () => {
    const before = openDatabase(dataDir)
    writeSetting(before, 'colour', 'red')
    writeSetting(before, 'colour', 'blue')
    before.close()
    const after = openDatabase(dataDir)
    expect(readSetting(after, 'colour')).toBe('blue')
    expect(readSetting(after, 'shape')).toBeNull()
    after.close()
  })

  it('says when it cannot be reached', () => {
    const database = openDatabase(dataDir)
    expect(database.isReachable()).toBe(true)
    database.close()
    expect(database.isReachable()).toBe(false)
  })
})

describe('the demo', () => {
  it('fills an empty database on one’s own machine', () => {
    expect(startWith({})).toBe(true)
  })

  it('stays out where others can reach the server', () => {
    expect(startWith({ HOST: '0.0.0.0' })).toBe(false)
  })

  it('stays out of a database that is in use', () => {
    const database = openDatabase(dataDir)
    database.queries
      .insert(companies)
      .values({
        id: crypto.randomUUID(),
        name: 'Ours',
        currency: 'USD',
        language: 'en',
        timeZone: 'America/Denver',
        version: 1,
        creationHash: '',
        createdAt: new Date().toISOString(),
      })
      .run()
    database.close()
    expect(startWith({})).toBe(false)
  })

  it('stays out of production', () => {
    expect(startWith({ ...production, HOST: '127.0.0.1' })).toBe(false)
  })

  it('is refused by production when it is already there', () => {
    startWith({})
    expect(() => startWith(production)).toThrow(/holds the demo/)
  })
})
