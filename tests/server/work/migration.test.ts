import { cpSync, mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { nozzleEventSchema, nozzleRecordSchema, newNozzleSchema } from '#shared/contracts/nozzles.ts'
import type { NewRig } from '#shared/contracts/rigs.ts'
import { idSchema } from '#shared/contracts/records.ts'
import { boreCheckSchema } from '#shared/contracts/work.ts'
import { defaultMigrationsFolder, openDatabase } from '../../../server/db/client.ts'
import type { Database } from '../../../server/db/client.ts'
import { readFleet } from '../../../server/services/fleet.ts'
import { readWork } from '../../../server/services/work.ts'
import { makeRigBody } from '../../support/fleet.ts'
import { makeDataDir } from '../../support/server.ts'

const companyId = 'c0000000-0000-4000-8000-000000000001'
const people = { first: 'First Owner', second: 'Second Owner', blaster: 'Bo Blaster' }
const updatedAt = '2026-03-02T15:04:05.006Z'

let dataDir: string
let oldMigrations: string
beforeEach(() => {
  dataDir = makeDataDir()
  oldMigrations = join(makeDataDir(), 'migrations')
  // The migrations as they were before there were nozzles.
  mkdirSync(join(oldMigrations, 'meta'), { recursive: true })
  cpSync(defaultMigrationsFolder, oldMigrations, { recursive: true })
  const journalPath = join(oldMigrations, 'meta/_journal.json')
  const journal = JSON.parse(readFileSync(journalPath, 'utf8')) as { entries: { idx: number }[] }
  writeFileSync(
    journalPath,
    JSON.stringify({ ...journal, entries: journal.entries.filter(({ idx }) => idx <= 2) }),
  )
})
afterEach(() => {
  for (const folder of [dataDir, join(oldMigrations, '..')]) rmSync(folder, { recursive: true, force: true })
})

type Outlet = NewRig['outlets'][number]
const outletWith = (nozzle: Partial<Outlet['nozzle']>): Outlet => {
  const [outlet] = makeRigBody().outlets
  return { ...outlet!, nozzle: { ...outlet!.nozzle, ...nozzle } }
}

interface OldRig {
  id: string
  name: string
  outlets: Outlet[]
  updatedBy?: string
  archivedAt?: string | null
  deletedAt?: string | null
}

/** Writes as the application did before: with plain SQL, since its code has moved on. */
function fill(database: Database, rigs: OldRig[], { hasPeople = true } = {}): void {
  const { connection } = database
  connection
    .prepare(`insert into companies values (?, 'Ridge Line', 'USD', 'en', 'America/Denver', 1, '', ?)`)
    .run(companyId, updatedAt)
  const memberships: [string, string, string[]][] = [
    ['blaster', '2026-01-01', ['blaster']],
    ['second', '2026-01-03', ['owner']],
    ['first', '2026-01-02', ['owner', 'admin']],
  ]
  for (const [key, joinedAt, roles] of hasPeople ? memberships : []) {
    connection
      .prepare(`insert into accounts values (?, ?, ?, '', 'en', ?)`)
      .run(`account-${key}`, `${key}@example.test`, people[key as keyof typeof people], joinedAt)
    connection
      .prepare(
        `insert into memberships (id, company_id, account_id, roles, state, joined_at, version)
         values (?, ?, ?, ?, 'active', ?, 1)`,
      )
      .run(`membership-${key}`, companyId, `account-${key}`, JSON.stringify(roles), joinedAt)
  }
  for (const { id, name, outlets, updatedBy = people.second, archivedAt = null, deletedAt = null } of rigs) {
    connection
      .prepare(
        `insert into rigs (company_id, id, version, creation_hash, created_at, updated_at, updated_by,
           archived_at, deleted_at, name, outlets, hood_count, hood_free_air_m3_min,
           target_nozzle_pressure_kpa, bit_set, hour)
         values (?, ?, 3, 'hash', ?, ?, ?, ?, ?, ?, ?, 1, 0.57, 620.5, 'fractional-64', ?)`,
      )
      .run(
        companyId,
        id,
        updatedAt,
        updatedAt,
        updatedBy,
        archivedAt,
        deletedAt,
        name,
        JSON.stringify(outlets),
        JSON.stringify(makeRigBody().hour),
      )
  }
}

const rigId = (number: number) => `a0000000-0000-4000-8000-${String(number).padStart(12, '0')}`

/** What the newest application reads from a database that an older one has filled. */
function migrate(rigs: OldRig[], options?: { hasPeople?: boolean }) {
  const before = openDatabase(dataDir, oldMigrations)
  fill(before, rigs, options)
  const kept = before.connection.prepare('select * from rigs order by id').all()
  before.close()
  const database = openDatabase(dataDir)
  try {
    expect(database.connection.prepare('select * from rigs order by id').all()).toEqual(kept)
    expect(database.connection.pragma('foreign_key_check')).toEqual([])
    const actor = {
      accountId: '',
      name: '',
      email: '',
      companyId,
      membershipId: '',
      roles: ['owner'],
    } as const
    const work = readWork({ database }, actor)
    const byIds = database.connection.prepare('select nozzle_id, by_id from nozzle_events').all() as {
      nozzle_id: string
      by_id: string
    }[]
    return {
      work,
      fleet: readFleet({ database, now: () => new Date(updatedAt) }, actor),
      byId: new Map(byIds.map(({ nozzle_id, by_id }) => [nozzle_id, by_id])),
    }
  } finally {
    database.close()
  }
}

describe('a database from before there were nozzles', () => {
  const rigs: OldRig[] = [
    {
      id: rigId(1),
      name: 'Twin pots',
      outlets: [
        outletWith({ numberSixteenths: 7, newBoreMm: 11.1125, boreNowMm: 12.7 }),
        outletWith({ numberSixteenths: null, newBoreMm: 8.2, shape: 'straight', dischargeCoefficient: 0.77 }),
      ],
    },
    { id: rigId(2), name: 'Truck 1', outlets: [outletWith({})], archivedAt: updatedAt },
    { id: rigId(3), name: 'Gone', outlets: [outletWith({})], deletedAt: updatedAt },
  ]

  it('has a nozzle for each outlet of each rig, as it was known, and the rigs as they were', () => {
    const { work, fleet } = migrate(rigs)
    expect(work.nozzles.map(({ tag }) => tag)).toEqual(['Truck 1 1', 'Twin pots 1', 'Twin pots 2'])
    const common = { version: 1, isArchived: false, updatedAt, updatedBy: people.second, liner: null }
    expect(work.nozzles.slice(1)).toMatchObject([
      {
        ...common,
        name: 'Twin pots 1',
        numberSixteenths: 7,
        newBoreMm: 11.1125,
        shape: 'venturi',
        dischargeCoefficient: null,
        hoursBefore: null,
        boxRigId: rigId(1),
      },
      { ...common, numberSixteenths: null, newBoreMm: 8.2, shape: 'straight', dischargeCoefficient: 0.77 },
    ])
    for (const nozzle of work.nozzles) {
      const { id, tag, numberSixteenths, newBoreMm, shape, liner, dischargeCoefficient } =
        nozzleRecordSchema.parse(nozzle)
      // What the owner could have sent, so that it can be changed and sent back.
      newNozzleSchema.parse({
        id,
        tag,
        numberSixteenths,
        newBoreMm,
        shape,
        liner,
        dischargeCoefficient,
        thread: null,
        entryMm: null,
        hoursBefore: null,
        boxRigId: nozzle.boxRigId,
        priceMinor: null,
      })
    }
    expect(fleet.rigs.find(({ id }) => id === rigId(1))?.outlets).toEqual(rigs[0]!.outlets)
  })

  it('has each mounted where it was, by whoever saved the rig last, when it was saved', () => {
    const { work } = migrate(rigs)
    const nameOf = new Map(work.nozzles.map(({ id, name }) => [id, name]))
    for (const event of work.events) nozzleEventSchema.parse(event)
    expect(
      work.events
        .map(({ nozzleId, kind, at, by, rigId: onRig, outletIndex }) => ({
          nozzle: nameOf.get(nozzleId),
          kind,
          at,
          by,
          onRig,
          outletIndex,
        }))
        .sort((one, other) => (one.nozzle! < other.nozzle! ? -1 : 1)),
    ).toEqual(
      [
        ['Truck 1 1', 2, 0],
        ['Twin pots 1', 1, 0],
        ['Twin pots 2', 1, 1],
      ].map(([nozzle, rig, outletIndex]) => ({
        nozzle,
        kind: 'mounted',
        at: updatedAt,
        by: people.second,
        onRig: rigId(rig as number),
        outletIndex,
      })),
    )
  })

  it('has a bore check where the bore was known, by a caliper of 0.4 mm', () => {
    const { work } = migrate(rigs)
    expect(work.boreChecks).toHaveLength(1)
    const check = boreCheckSchema.parse(work.boreChecks[0])
    expect(check).toMatchObject({
      nozzleId: work.nozzles.find(({ tag }) => tag === 'Twin pots 1')!.id,
      rigId: rigId(1),
      method: 'caliper',
      boreMm: 12.7,
      accuracyMm: 0.4,
      at: updatedAt,
      by: people.second,
    })
  })

  it('has ids as anybody’s, no two alike', () => {
    const many = Array.from({ length: 40 }, (_, index) => ({
      id: rigId(index),
      name: `Rig ${index}`,
      outlets: [outletWith({ boreNowMm: 8.5 }), outletWith({ boreNowMm: 9 })],
    }))
    const { nozzles, events, boreChecks } = migrate(many).work
    const ids = [...nozzles, ...events, ...boreChecks].map(({ id }) => idSchema.parse(id))
    expect(ids).toHaveLength(240)
    expect(new Set(ids).size).toBe(240)
  })

  it('names no two nozzles alike, and none too long, however long the rigs’ names are', () => {
    const names = [
      `${'x'.repeat(58)} 1`,
      `${'X'.repeat(58)} 2`,
      `${'x'.repeat(58)} 3`,
      'x'.repeat(22),
      `${'x'.repeat(22)}~1`,
      `${'x'.repeat(22)}~2`,
      'x'.repeat(28),
      'x'.repeat(29),
      `${'Ñ'.repeat(40)} uno`,
      `${'ñ'.repeat(40)} dos`,
      '🧰'.repeat(30),
    ]
    const long = names.map((name, index) => ({
      id: rigId(index),
      name,
      outlets: [outletWith({}), outletWith({})],
    }))
    const tags = migrate(long).work.nozzles.map(({ tag }) => tag!)
    expect(tags).toHaveLength(22)
    for (const tag of tags) {
      expect(tag.length).toBeLessThanOrEqual(30)
      expect(tag).toMatch(/ [12]$/)
      expect(tag).not.toMatch(/\p{Cs}/u)
    }
    expect(new Set(tags.map((tag) => tag.normalize('NFC').toLowerCase())).size).toBe(22)
    expect(tags).toContain(`${'x'.repeat(28)} 2`)
  })

  it('finds whoever saved the rig by name, and asks the first owner where nobody has that name', () => {
    const { work, byId } = migrate([
      { id: rigId(1), name: 'By the blaster', outlets: [outletWith({})], updatedBy: people.blaster },
      { id: rigId(2), name: 'By one who left', outlets: [outletWith({})], updatedBy: 'Nobody Now' },
    ])
    const byOf = (tag: string) => {
      const { id } = work.nozzles.find((nozzle) => nozzle.tag === tag)!
      return [work.events.find(({ nozzleId }) => nozzleId === id)?.by, byId.get(id)]
    }
    expect(byOf('By the blaster 1')).toEqual([people.blaster, 'account-blaster'])
    expect(byOf('By one who left 1')).toEqual(['Nobody Now', 'account-first'])
  })

  it('opens also where a company has no people, or there is nothing at all', () => {
    const { work } = migrate([rigs[0]!], { hasPeople: false })
    expect(work.nozzles).toHaveLength(2)
    expect(work.events).toEqual([])
  })
})
