import { and, eq, sql } from 'drizzle-orm'
import type { Request } from 'express'
import type { Actor, SignedIn } from '../actor.ts'
import type { AppContext } from '../context.ts'
import type { Database } from '../db/client.ts'
import { accounts, memberships } from '../db/schema/index.ts'
import { writeIfPossible } from '../db/storageFailure.ts'

/** who was seen is written down no more often than this */
const seenEveryMs = 5 * 60_000

function prepareFind({ queries }: Database) {
  return queries
    .select({
      accountId: accounts.id,
      name: accounts.name,
      email: accounts.email,
      membershipId: memberships.id,
      roles: memberships.roles,
      lastSeenAt: memberships.lastSeenAt,
    })
    .from(accounts)
    .leftJoin(
      memberships,
      and(
        eq(memberships.accountId, accounts.id),
        eq(memberships.companyId, sql.placeholder('companyId')),
        eq(memberships.state, 'active'),
      ),
    )
    .where(eq(accounts.id, sql.placeholder('accountId')))
    .prepare()
}

const prepared = new WeakMap<Database, ReturnType<typeof prepareFind>>()

function findCaller(database: Database, accountId: string, companyId: string | null) {
  let find = prepared.get(database)
  if (!find) prepared.set(database, (find = prepareFind(database)))
  return find.get({ accountId, companyId })
}

function noteSeen({ database, now }: AppContext, membershipId: string, lastSeenAt: string | null): void {
  const at = now()
  if (lastSeenAt !== null && lastSeenAt > new Date(at.getTime() - seenEveryMs).toISOString()) return
  writeIfPossible(() => {
    database.queries
      .update(memberships)
      .set({ lastSeenAt: at.toISOString() })
      .where(eq(memberships.id, membershipId))
      .run()
  })
}

/** Who asks, as the database has them now: roles are never remembered in a session. */
export function identify(context: AppContext, request: Request): Actor | SignedIn | null {
  const { accountId, companyId = null } = request.session
  if (!accountId) return null
  const found = findCaller(context.database, accountId, companyId)
  if (!found) return null
  const signedIn = { accountId, name: found.name, email: found.email }
  if (companyId === null || found.membershipId === null || found.roles === null) return signedIn
  noteSeen(context, found.membershipId, found.lastSeenAt)
  return { ...signedIn, companyId, membershipId: found.membershipId, roles: found.roles }
}
