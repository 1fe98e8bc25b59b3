import type { Database } from '../db/client.ts'
import { accounts, companies, memberships } from '../db/schema/index.ts'
import { compressorKind } from '../services/compressors.ts'
import { insertRecord } from '../services/records.ts'
import { rigKind } from '../services/rigs.ts'
import { siteKind } from '../services/sites.ts'
import { demoCompany, demoOwner, demoPeople } from './company.ts'
import { makeDemoMachines } from './machines.ts'
import { makeDemoRigs } from './rigs.ts'

/** No password has this hash: nobody signs in to the demo with one. */
const unusablePasswordHash = 'unusable'

/** Writes the demo's company, people and fleet, all or nothing. */
export function seedDemo(database: Database, now: Date): void {
  const stamp = now.toISOString()
  database.transact((writer) => {
    writer
      .insert(companies)
      .values({ ...demoCompany, version: 1, creationHash: '', createdAt: stamp })
      .run()
    for (const { accountId, membershipId, roles, ...person } of demoPeople) {
      writer
        .insert(accounts)
        .values({ ...person, id: accountId, passwordHash: unusablePasswordHash, createdAt: stamp })
        .run()
      writer
        .insert(memberships)
        .values({
          id: membershipId,
          companyId: demoCompany.id,
          accountId,
          roles: [...roles],
          state: 'active',
          joinedAt: stamp,
          version: 1,
        })
        .run()
    }
    const author = { accountId: demoOwner.accountId, name: demoOwner.name, companyId: demoCompany.id }
    const place = { database, writer, at: now }
    const machines = makeDemoMachines(now)
    for (const { id, ...profile } of Object.values(machines.sites)) {
      insertRecord(siteKind, place, author, { id, profile })
    }
    for (const { id, ...profile } of Object.values(machines.compressors)) {
      insertRecord(compressorKind, place, author, { id, profile })
    }
    for (const { id, ...profile } of makeDemoRigs(machines)) {
      insertRecord(rigKind, place, author, { id, profile })
    }
  })
}
