import { and, eq, inArray } from 'drizzle-orm'
import type { Visit } from '#shared/contracts/accounts.ts'
import type { AppContext } from '../context.ts'
import { holdsDemo } from '../db/seed.ts'
import { accounts, memberships } from '../db/schema/index.ts'
import { demoCompany, demoPeople } from '../demo/company.ts'

/** Whether anyone may be one of the demo's people: on the own machine only, never in production. */
export function isDemoOffered({ config, database }: Pick<AppContext, 'config' | 'database'>): boolean {
  return !config.isProduction && config.isLoopback && holdsDemo(database)
}

/** Whom one can be in the demo; nobody where it is not offered. */
export function listDemoPeople(context: Pick<AppContext, 'config' | 'database'>): Visit['demoPeople'] {
  if (!isDemoOffered(context)) return []
  const ids = demoPeople.map(({ accountId }) => accountId)
  const found = context.database.queries
    .select({ id: accounts.id, email: accounts.email, name: accounts.name, roles: memberships.roles })
    .from(memberships)
    .innerJoin(accounts, eq(accounts.id, memberships.accountId))
    .where(
      and(
        eq(memberships.companyId, demoCompany.id),
        eq(memberships.state, 'active'),
        inArray(accounts.id, ids),
      ),
    )
    .all()
  return found
    .sort((one, other) => ids.indexOf(one.id) - ids.indexOf(other.id))
    .map(({ email, name, roles }) => ({ email, name, roles }))
}
