import { and, asc, eq, ne } from 'drizzle-orm'
import { may } from '#shared/contracts/permissions.ts'
import type { Role } from '#shared/contracts/permissions.ts'
import type { Person, PersonChange } from '#shared/contracts/people.ts'
import type { Actor } from '../actor.ts'
import type { AppContext } from '../context.ts'
import type { Writer } from '../db/client.ts'
import { accounts, memberships } from '../db/schema/index.ts'
import { makeProblem, makeVersionConflict } from '../problems.ts'
import { changesBetween, writeAudit } from './audit.ts'
import { withdrawInvitationsBy, withdrawInvitationsTo } from './invitations.ts'
import { refuseUnlessStillMay } from './refuseUnlessStillMay.ts'
import { endSessionsInCompany } from './sessions.ts'

type Reader = Pick<Writer, 'select'>

const personColumns = {
  id: memberships.id,
  name: accounts.name,
  email: accounts.email,
  roles: memberships.roles,
  state: memberships.state,
  lastSeenAt: memberships.lastSeenAt,
  joinedAt: memberships.joinedAt,
  version: memberships.version,
}

export function listPeople(reader: Reader, companyId: string): Person[] {
  return reader
    .select(personColumns)
    .from(memberships)
    .innerJoin(accounts, eq(accounts.id, memberships.accountId))
    .where(eq(memberships.companyId, companyId))
    .orderBy(asc(accounts.name), asc(memberships.id))
    .all()
}

function findPerson(reader: Reader, companyId: string, id: string) {
  const found = reader
    .select({ ...personColumns, accountId: memberships.accountId })
    .from(memberships)
    .innerJoin(accounts, eq(accounts.id, memberships.accountId))
    .where(and(eq(memberships.companyId, companyId), eq(memberships.id, id)))
    .get()
  if (!found) throw makeProblem('not-found', 'There is nothing at this address.')
  const { accountId, ...person } = found
  return { accountId, person }
}

function isOnlyOne(reader: Reader, companyId: string, personId: string, role: Role): boolean {
  const others = reader
    .select({ roles: memberships.roles })
    .from(memberships)
    .where(
      and(
        eq(memberships.companyId, companyId),
        eq(memberships.state, 'active'),
        ne(memberships.id, personId),
      ),
    )
    .all()
  return !others.some(({ roles }) => roles.includes(role))
}

const lastOnes = [
  ['admin', 'last-admin', 'the last active admin: without one nobody could let anybody in'],
  ['owner', 'last-owner', 'the last active owner: without one nobody could change the rigs'],
] as const

/** A company keeps somebody who can let people in, and somebody who can write its fleet. */
function refuseToLoseLast(reader: Reader, companyId: string, before: Person, after: Person): void {
  const holds = ({ roles, state }: Person, role: Role) => state === 'active' && roles.includes(role)
  for (const [role, code, reason] of lastOnes) {
    if (!holds(before, role) || holds(after, role)) continue
    if (!isOnlyOne(reader, companyId, before.id, role)) continue
    throw makeProblem(code, `${before.name} is ${reason}. Give somebody else the role first.`)
  }
}

function auditPerson(writer: Writer, actor: Actor, at: Date, before: Person, after: Person): void {
  const subject = { subject: after.email, subjectId: after.id }
  if (after.state !== before.state) {
    const action = after.state === 'active' ? 'person.reactivated' : 'person.deactivated'
    const changes = changesBetween({ state: before.state }, { state: after.state })
    writeAudit(writer, actor, at, { action, ...subject, changes })
  }
  const changes = changesBetween({ roles: before.roles }, { roles: after.roles })
  if (Object.keys(changes).length > 0) {
    writeAudit(writer, actor, at, { action: 'person.roles-changed', ...subject, changes })
  }
}

/** Changes what somebody may do, or whether they are in at all; who is out is out at once. */
export function changePerson(
  { database, now }: AppContext,
  actor: Actor,
  personId: string,
  { version, roles, state }: PersonChange,
): Person {
  const { companyId } = actor
  return database.transact((writer) => {
    refuseUnlessStillMay(writer, actor, 'manage-people')
    const { accountId, person: before } = findPerson(writer, companyId, personId)
    if (before.version !== version) throw makeVersionConflict(before)
    const wanted = { roles: roles ?? before.roles, state: state ?? before.state }
    if (Object.keys(changesBetween(before, wanted)).length === 0) return before

    const after: Person = { ...before, ...wanted, version: version + 1 }
    refuseToLoseLast(writer, companyId, before, after)
    writer
      .update(memberships)
      .set({ ...wanted, version: after.version })
      .where(eq(memberships.id, personId))
      .run()
    const at = now()
    if (after.state === 'deactivated') endSessionsInCompany(writer, accountId, companyId)
    auditPerson(writer, actor, at, before, after)
    // One from before they were taken back would let them in again.
    if (before.state === 'active' && after.state === 'deactivated') {
      withdrawInvitationsTo(writer, actor, at, before.email)
    }
    const mayInvite = ({ roles, state }: Person) => state === 'active' && may(roles, 'manage-people')
    if (mayInvite(before) && !mayInvite(after)) withdrawInvitationsBy(writer, actor, at, accountId)
    return after
  })
}
