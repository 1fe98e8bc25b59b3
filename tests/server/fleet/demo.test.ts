import { rmSync } from 'node:fs'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { answerCheck } from '#shared/check/answerCheck.ts'
import { compressorProfileSchema } from '#shared/contracts/compressors.ts'
import { roles } from '#shared/contracts/permissions.ts'
import type { Fleet } from '#shared/contracts/rigs.ts'
import { rigProfileSchema } from '#shared/contracts/rigs.ts'
import { siteProfileSchema } from '#shared/contracts/sites.ts'
import { checkRequestOfRig } from '#shared/form/profiles.ts'
import { readConfig } from '../../../server/config.ts'
import { openDatabase } from '../../../server/db/client.ts'
import type { Database } from '../../../server/db/client.ts'
import { prepareDemo } from '../../../server/db/seed.ts'
import { demoCompany } from '../../../server/demo/company.ts'
import { isDemoOffered, listDemoPeople } from '../../../server/services/demo.ts'
import { readFleet } from '../../../server/services/fleet.ts'
import { changeOf } from '../../support/fleet.ts'
import { makeDataDir } from '../../support/server.ts'

const now = new Date('2026-05-03T12:00:00Z')
let dataDir: string
let database: Database

const configOf = (environment: Record<string, string> = {}) =>
  readConfig({ NODE_ENV: 'development', DATA_DIR: dataDir, ...environment })

beforeEach(() => {
  dataDir = makeDataDir()
  database = openDatabase(dataDir)
})
afterEach(() => {
  database.close()
  rmSync(dataDir, { recursive: true, force: true })
})

function seed(): Fleet {
  prepareDemo(database, configOf(), now)
  return readFleet({ database, now: () => now }, { companyId: demoCompany.id })
}

function verdictOf({ compressors, sites }: Fleet, rig: Fleet['rigs'][number]) {
  const compressor = compressors.find(({ id }) => id === rig.compressorId)!
  const site = sites.find(({ id }) => id === rig.siteId)!
  return answerCheck(checkRequestOfRig(rig, compressor, site)!)
}

describe('the demo', () => {
  it('has four people, one a role each', () => {
    seed()
    const people = listDemoPeople({ config: configOf(), database })
    expect(people.map(({ roles: held }) => held)).toEqual(roles.map((role) => [role]))
    expect(new Set(people.map(({ email }) => email)).size).toBe(4)
  })

  it('has five rigs that show every verdict, each clear of the next', () => {
    const fleet = seed()
    expect(fleet.rigs).toHaveLength(5)
    const answers = fleet.rigs.map((rig) => verdictOf(fleet, rig))
    const verdicts = new Set(answers.map(({ verdict }) => verdict))
    expect(verdicts).toEqual(new Set(['holds', 'barely-holds', 'falls-short', 'cannot-run']))
    for (const { atTarget } of answers) {
      if (atTarget === null) continue
      // half a percent of margin from a boundary, so that a refinement of the model does not turn one over
      for (const boundary of [0, 5]) expect(Math.abs(atTarget.airMarginPct - boundary)).toBeGreaterThan(0.5)
    }
  })

  it('has three sites at different altitudes and a compressor that is rented just now', () => {
    const { sites, compressors } = seed()
    expect(new Set(sites.map(({ altitudeM }) => altitudeM)).size).toBe(3)
    const rented = compressors.filter(({ ownership }) => ownership === 'rented')
    expect(rented).toHaveLength(1)
    expect(rented[0]!.rentedFrom! < '2026-05-03' && rented[0]!.rentedUntil! > '2026-05-03').toBe(true)
  })

  it('is what people could have typed themselves', () => {
    const { rigs, sites, compressors } = seed()
    const profileOf = (record: { id: string; version: number }) => changeOf(record, { version: undefined })
    const lists = [
      [rigs, rigProfileSchema],
      [sites, siteProfileSchema],
      [compressors, compressorProfileSchema],
    ] as const
    for (const [records, schema] of lists) {
      for (const record of records) {
        const { version: _version, ...profile } = profileOf(record)
        expect(schema.parse(profile)).toEqual(profile)
      }
    }
  })

  it('is seeded once', () => {
    seed()
    const again = seed()
    expect(again.rigs).toHaveLength(5)
  })

  it('is offered on the own machine only, and to nobody in a company’s own database', () => {
    expect(isDemoOffered({ config: configOf(), database })).toBe(false)
    expect(listDemoPeople({ config: configOf(), database })).toEqual([])
    seed()
    expect(isDemoOffered({ config: configOf(), database })).toBe(true)
    const open = configOf({ HOST: '0.0.0.0' })
    const production = configOf({
      NODE_ENV: 'production',
      PUBLIC_URL: 'https://air.example',
      SESSION_SECRET: 'x'.repeat(32),
    })
    for (const config of [open, production]) {
      expect(isDemoOffered({ config, database })).toBe(false)
      expect(listDemoPeople({ config, database })).toEqual([])
    }
  })

  it('stays out where others can reach the server', () => {
    prepareDemo(database, configOf({ HOST: '0.0.0.0' }), now)
    const { rigs } = readFleet({ database, now: () => now }, { companyId: demoCompany.id })
    expect(rigs).toEqual([])
  })
})
