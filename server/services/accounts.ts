import { and, asc, desc, eq, isNotNull } from 'drizzle-orm'
import type { ProfileInput, Session } from '#shared/contracts/accounts.ts'
import type { AuditAction } from '#shared/contracts/people.ts'
import type { SignedIn } from '../actor.ts'
import type { AppContext } from '../context.ts'
import type { Writer } from '../db/client.ts'
import { accounts, companies, memberships } from '../db/schema/index.ts'
import { makeProblem } from '../problems.ts'
import { changesBetween, writeAudit } from './audit.ts'

export type Account = typeof accounts.$inferSelect

export function findAccount(reader: Pick<Writer, 'select'>, accountId: string): Account | undefined {
  return reader.select().from(accounts).where(eq(accounts.id, accountId)).get()
}

export function findAccountByEmail(reader: Pick<Writer, 'select'>, email: string): Account | undefined {
  return reader.select().from(accounts).where(eq(accounts.email, email)).get()
}

/** The company somebody last used, of those that have them; null where none does. */
export function findLastUsedCompany(reader: Pick<Writer, 'select'>, accountId: string): string | null {
  const row = reader
    .select({ companyId: memberships.companyId })
    .from(memberships)
    .where(and(eq(memberships.accountId, accountId), eq(memberships.state, 'active')))
    .orderBy(desc(isNotNull(memberships.lastSeenAt)), desc(memberships.lastSeenAt), asc(memberships.joinedAt))
    .limit(1)
    .get()
  return row?.companyId ?? null
}

/** Notes that somebody works for this company now, so that they find it active when they next sign in. */
export function noteCompanyUsed(writer: Writer, at: Date, accountId: string, companyId: string): void {
  writer
    .update(memberships)
    .set({ lastSeenAt: at.toISOString() })
    .where(and(eq(memberships.accountId, accountId), eq(memberships.companyId, companyId)))
    .run()
}

/** What happens to an account is noted in the company that is, or would be, active for it; that company's id. */
export function noteInActiveCompany(
  writer: Writer,
  { now }: Pick<AppContext, 'now'>,
  account: Account,
  action: AuditAction,
): string | null {
  const companyId = findLastUsedCompany(writer, account.id)
  if (companyId !== null) {
    const actor = { accountId: account.id, name: account.name, companyId }
    writeAudit(writer, actor, now(), { action, subject: account.email, subjectId: account.id })
  }
  return companyId
}

function listMemberships({ queries }: AppContext['database'], accountId: string) {
  return queries
    .select({
      roles: memberships.roles,
      company: {
        id: companies.id,
        name: companies.name,
        currency: companies.currency,
        language: companies.language,
        timeZone: companies.timeZone,
        version: companies.version,
      },
    })
    .from(memberships)
    .innerJoin(companies, eq(companies.id, memberships.companyId))
    .where(and(eq(memberships.accountId, accountId), eq(memberships.state, 'active')))
    .orderBy(asc(companies.name), asc(companies.id))
    .all()
}

/** What the screens know of whoever is signed in, as the database has it now. */
export function readSession(context: AppContext, accountId: string, companyId: string | null): Session {
  const account = findAccount(context.database.queries, accountId)
  if (!account) throw makeProblem('not-signed-in', 'Sign in first.')
  const held = listMemberships(context.database, accountId)
  const active = held.find(({ company }) => company.id === companyId)
  return {
    account: { id: account.id, name: account.name, email: account.email, language: account.language },
    company: active?.company ?? null,
    roles: active?.roles ?? [],
    memberships: held.map(({ roles, company }) => ({
      companyId: company.id,
      companyName: company.name,
      roles,
    })),
  }
}

/** A new name is noted in every company where the old one is known. */
export function changeProfile(
  { database, now }: AppContext,
  { accountId, email }: SignedIn,
  profile: ProfileInput,
): void {
  database.transact((writer) => {
    const before = findAccount(writer, accountId)
    writer.update(accounts).set(profile).where(eq(accounts.id, accountId)).run()
    if (!before || before.name === profile.name) return
    const changes = changesBetween({ name: before.name }, { name: profile.name })
    const active = and(eq(memberships.accountId, accountId), eq(memberships.state, 'active'))
    for (const { companyId } of writer.select().from(memberships).where(active).all()) {
      const author = { accountId, name: before.name, companyId }
      writeAudit(writer, author, now(), { action: 'account.renamed', subject: email, changes })
    }
  })
}
