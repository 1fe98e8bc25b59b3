import { and, eq } from 'drizzle-orm'
import { may } from '#shared/contracts/permissions.ts'
import type { Permission } from '#shared/contracts/permissions.ts'
import type { Actor } from '../actor.ts'
import type { Writer } from '../db/client.ts'
import { memberships } from '../db/schema/index.ts'
import { makeProblem } from '../problems.ts'

/**
 * Whoever was let in may have lost the role while the body was still on its way; what gives others rights looks again
 * under the write lock.
 */
export function refuseUnlessStillMay(
  reader: Pick<Writer, 'select'>,
  actor: Actor,
  permission: Permission,
): void {
  const held = reader
    .select({ roles: memberships.roles })
    .from(memberships)
    .where(and(eq(memberships.id, actor.membershipId), eq(memberships.state, 'active')))
    .get()
  if (held && may(held.roles, permission)) return
  throw makeProblem('forbidden', 'Your roles in this company do not include this.')
}
