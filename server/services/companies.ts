import { randomUUID } from 'node:crypto'
import { and, count, eq } from 'drizzle-orm'
import type { z } from 'zod'
import type { Company, CompanyChange, CompanyInput, newCompanySchema } from '#shared/contracts/accounts.ts'
import { roles } from '#shared/contracts/permissions.ts'
import type { Actor } from '../actor.ts'
import type { AppContext } from '../context.ts'
import type { Writer } from '../db/client.ts'
import { companies, memberships } from '../db/schema/index.ts'
import { makeProblem, makeVersionConflict } from '../problems.ts'
import { findAccount, noteCompanyUsed } from './accounts.ts'
import type { Account } from './accounts.ts'
import { changesBetween, writeAudit } from './audit.ts'
import { refuseUnknownPlaces } from './companyRules.ts'
import { hashCreation } from './records.ts'

const mostCompanies = 20

/** Makes a company of which somebody is everything. */
export function insertCompany(
  writer: Writer,
  at: Date,
  founder: Pick<Account, 'id' | 'name'>,
  { id, creationHash, input }: { id: string; creationHash: string; input: CompanyInput },
): void {
  const createdAt = at.toISOString()
  writer
    .insert(companies)
    .values({ ...input, id, version: 1, creationHash, createdAt })
    .run()
  writer
    .insert(memberships)
    .values({
      id: randomUUID(),
      companyId: id,
      accountId: founder.id,
      roles: [...roles],
      state: 'active',
      joinedAt: createdAt,
      version: 1,
    })
    .run()
  writeAudit(writer, { accountId: founder.id, name: founder.name, companyId: id }, at, {
    action: 'company.created',
    subject: input.name,
    subjectId: id,
  })
}

function findMembership(reader: Pick<Writer, 'select'>, accountId: string, companyId: string) {
  const isTheirs = and(eq(memberships.accountId, accountId), eq(memberships.companyId, companyId))
  return reader
    .select()
    .from(memberships)
    .where(and(isTheirs, eq(memberships.state, 'active')))
    .get()
}

/** One more company of somebody's; the same call twice makes one. */
export function createCompany(
  { database, now }: AppContext,
  accountId: string,
  { id, ...input }: z.infer<typeof newCompanySchema>,
): void {
  refuseUnknownPlaces(input)
  const creationHash = hashCreation({ ...input, id })
  database.transact((writer) => {
    const founder = findAccount(writer, accountId)
    if (!founder) throw makeProblem('not-signed-in', 'Sign in first.')
    const stored = writer.select().from(companies).where(eq(companies.id, id)).get()
    if (stored) {
      if (stored.creationHash !== creationHash || !findMembership(writer, accountId, id)) {
        throw makeProblem('id-in-use', 'Another company has this id.')
      }
    } else {
      const held = writer
        .select({ number: count() })
        .from(memberships)
        .where(eq(memberships.accountId, accountId))
        .get()
      if (held && held.number >= mostCompanies) {
        throw makeProblem('too-many-records', `One person may work for ${mostCompanies} companies at most.`)
      }
      insertCompany(writer, now(), founder, { id, creationHash, input })
    }
    noteCompanyUsed(writer, now(), accountId, id)
  })
}

/** Makes another of somebody's companies the active one. */
export function enterCompany({ database, now }: AppContext, accountId: string, companyId: string): void {
  database.transact((writer) => {
    if (!findMembership(writer, accountId, companyId)) {
      throw makeProblem('not-found', 'You do not work for this company.')
    }
    noteCompanyUsed(writer, now(), accountId, companyId)
  })
}

export function changeCompany(
  { database, now }: AppContext,
  actor: Actor,
  { version, ...input }: CompanyChange,
): Company {
  refuseUnknownPlaces(input)
  return database.transact((writer) => {
    const row = writer.select().from(companies).where(eq(companies.id, actor.companyId)).get()
    if (!row) throw makeProblem('not-found', 'There is no such company.')
    const { creationHash: _creationHash, createdAt: _createdAt, ...stored } = row
    if (stored.version !== version) throw makeVersionConflict(stored)
    const changes = changesBetween(stored, input)
    if (Object.keys(changes).length === 0) return stored
    const changed = { ...stored, ...input, version: version + 1 }
    writer.update(companies).set(changed).where(eq(companies.id, stored.id)).run()
    const event = { action: 'company.changed', subject: changed.name, subjectId: stored.id, changes } as const
    writeAudit(writer, actor, now(), event)
    return changed
  })
}
