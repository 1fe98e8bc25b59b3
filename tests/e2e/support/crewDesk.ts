import type { BrowserContext } from '@playwright/test'
import type { Role } from '#shared/contracts/permissions.ts'
import type { RigRecord } from '#shared/contracts/rigs.ts'
import { readConfig } from '../../../server/config.ts'
import { createContext } from '../../../server/context.ts'
import { openDatabase } from '../../../server/db/client.ts'
import { createLogger } from '../../../server/middleware/requestLog.ts'
import { makeCompressorBody, makeRigBody, makeSiteBody } from '../../support/fleet.ts'
import { makeCompany, makePerson } from '../../support/people.ts'
import type { TestCompany, TestPerson } from '../../support/people.ts'

export const goodPassword = 'seven wet trailers'

/** Where people and sessions are made straight in the data of a running server, for stories that begin later. */
export interface CrewDesk {
  makeCompany(name?: string): TestCompany
  makePerson(company: TestCompany, roles?: readonly Role[], name?: string, email?: string): TestPerson
  /** who can sign in, by `goodPassword` */
  makePersonWithPassword(company: TestCompany, roles?: readonly Role[], name?: string): Promise<TestPerson>
  close(): Promise<void>
}

export function openCrewDesk(dataDir: string, address: string): CrewDesk {
  const database = openDatabase(dataDir)
  const config = readConfig({ NODE_ENV: 'test', DATA_DIR: dataDir })
  const context = createContext(config, database, createLogger(config.logLevel))
  const data = { database, context, address }
  let hash: Promise<string> | undefined
  return {
    makeCompany: (name = 'Ridge Line Blasting') => makeCompany(data, { name }),
    makePerson: (company, roles, name, email) =>
      makePerson(data, company, roles, { ...(name && { name }), ...(email && { email }) }),
    async makePersonWithPassword(company, roles, name) {
      const passwordHash = await (hash ??= context.passwords.hash(goodPassword))
      return makePerson(data, company, roles, { passwordHash, ...(name && { name }) })
    },
    async close() {
      await context.passwords.close()
      database.close()
    },
  }
}

/** Gives a browser the session of somebody. */
export async function bringIn(browserContext: BrowserContext, { cookie }: TestPerson, address: string) {
  const [name, value] = cookie.split('=', 2) as [string, string]
  await browserContext.addCookies([{ name, value, url: address, httpOnly: true, sameSite: 'Lax' }])
}

async function post<Kept>(person: TestPerson, path: string, body: unknown): Promise<Kept> {
  const response = await person.ask('POST', path, body)
  if (response.status !== 201)
    throw new Error(`${path} answered ${response.status}: ${await response.text()}`)
  return (await response.json()) as Kept
}

/** A rig with a compressor and a site of its own, saved by somebody who may. */
export async function makeRig(person: TestPerson, name: string): Promise<RigRecord> {
  const compressor = await post<{ id: string }>(
    person,
    '/api/v1/compressors',
    makeCompressorBody({ name: `${name}’s compressor` }),
  )
  const site = await post<{ id: string }>(person, '/api/v1/sites', makeSiteBody({ name: `${name}’s yard` }))
  const ids = { compressorId: compressor.id, siteId: site.id }
  return post<RigRecord>(person, '/api/v1/rigs', makeRigBody({ name, ...ids }))
}

/** A rig as the server keeps it. */
export async function readRig(person: TestPerson, id: string): Promise<RigRecord> {
  const response = await person.ask('GET', `/api/v1/rigs/${id}`)
  if (response.status !== 200) throw new Error(`the rig answered ${response.status}`)
  return (await response.json()) as RigRecord
}
