import { randomUUID } from 'node:crypto'
import { and, eq } from 'drizzle-orm'
import type { AcceptInvitation, InvitationView } from '#shared/contracts/accounts.ts'
import type { FieldError } from '#shared/contracts/problems.ts'
import type { SignedIn } from '../actor.ts'
import type { AppContext } from '../context.ts'
import type { Writer } from '../db/client.ts'
import { accounts, companies, invitations, memberships } from '../db/schema/index.ts'
import { refuseCommonPassword } from '../passwords/commonPasswords.ts'
import { makeProblem } from '../problems.ts'
import { findAccountByEmail } from './accounts.ts'
import { changesBetween, writeAudit } from './audit.ts'
import { stateOf } from './invitations.ts'
import type { InvitationRow } from './invitations.ts'
import { hashToken } from './tokens.ts'

type Reader = Pick<Writer, 'select'>

/** The invitation this token opens, as long as it opens one: used, withdrawn, renewed and old ones look alike. */
function findOpen(reader: Reader, token: string, at: Date): InvitationRow {
  const row = reader
    .select()
    .from(invitations)
    .where(eq(invitations.tokenHash, hashToken(token)))
    .get()
  if (row && stateOf(row, at) === 'pending') return row
  throw makeProblem('link-not-good', 'This invitation is used, withdrawn or too old. Ask for another.')
}

export function viewInvitation({ database, now }: AppContext, token: string): InvitationView {
  const { companyId, email, invitedBy, roles } = findOpen(database.queries, token, now())
  const company = database.queries
    .select({ name: companies.name })
    .from(companies)
    .where(eq(companies.id, companyId))
    .get()
  const hasAccount = findAccountByEmail(database.queries, email) !== undefined
  return { companyName: company?.name ?? '', email, invitedBy, roles, hasAccount }
}

/** Puts somebody on the crew, in the transaction that uses up the invitation. */
function join(
  writer: Writer,
  at: Date,
  invitation: InvitationRow,
  account: Pick<SignedIn, 'accountId' | 'name'>,
): void {
  const { companyId, email, roles } = invitation
  const { accountId, name } = account
  const instant = at.toISOString()
  writer
    .update(invitations)
    .set({ acceptedAt: instant, version: invitation.version + 1 })
    .where(and(eq(invitations.companyId, companyId), eq(invitations.id, invitation.id)))
    .run()
  const author = { accountId, name, companyId }
  const before = writer
    .select()
    .from(memberships)
    .where(and(eq(memberships.companyId, companyId), eq(memberships.accountId, accountId)))
    .get()
  if (!before) {
    const id = randomUUID()
    writer
      .insert(memberships)
      .values({
        id,
        companyId,
        accountId,
        roles,
        state: 'active',
        joinedAt: instant,
        lastSeenAt: instant,
        version: 1,
      })
      .run()
    const changes = { roles: { from: null, to: roles } }
    writeAudit(writer, author, at, { action: 'person.joined', subject: email, subjectId: id, changes })
    return
  }
  // Whom the admin let back in meanwhile has the roles the admin gave then.
  if (before.state === 'active') return
  const state = 'active' as const
  writer
    .update(memberships)
    .set({ roles, state, lastSeenAt: instant, version: before.version + 1 })
    .where(eq(memberships.id, before.id))
    .run()
  const changes = changesBetween({ roles: before.roles, state: before.state }, { roles, state })
  writeAudit(writer, author, at, {
    action: 'person.reactivated',
    subject: email,
    subjectId: before.id,
    changes,
  })
}

interface Joined {
  accountId: string
  companyId: string
}

function makeSignInFirst(email: string) {
  return makeProblem('not-signed-in', `Sign in as ${email} first.`)
}

function acceptAs({ database, now }: AppContext, caller: SignedIn | null, token: string): Joined {
  return database.transact((writer) => {
    const at = now()
    const invitation = findOpen(writer, token, at)
    if (caller?.email !== invitation.email) throw makeSignInFirst(invitation.email)
    join(writer, at, invitation, caller)
    return { accountId: caller.accountId, companyId: invitation.companyId }
  })
}

function requireNewAccount({ name, password }: AcceptInvitation): { name: string; password: string } {
  if (name !== undefined && password !== undefined) return { name, password }
  const missing = Object.entries({ name, password }).filter(([, value]) => value === undefined)
  const errors = missing.map(([field]): FieldError => ({
    path: `/${field}`,
    code: 'required',
    message: `${field} is missing.`,
  }))
  throw makeProblem('invalid-fields', 'A new account takes a name and a password.', errors)
}

async function acceptAsNew(
  { database, now, passwords }: AppContext,
  email: string,
  input: AcceptInvitation,
): Promise<Joined> {
  const { name, password } = requireNewAccount(input)
  refuseCommonPassword(password, [name, email])
  const passwordHash = await passwords.hash(password)
  return database.transact((writer) => {
    const at = now()
    const invitation = findOpen(writer, input.token, at)
    const { companyId, language } = invitation
    // The address may have got an account while the password was hashed.
    if (findAccountByEmail(writer, email)) throw makeSignInFirst(email)
    const accountId = randomUUID()
    writer
      .insert(accounts)
      .values({ id: accountId, email, name, passwordHash, language, createdAt: at.toISOString() })
      .run()
    join(writer, at, invitation, { accountId, name })
    return { accountId, companyId }
  })
}

/**
 * Accepts an invitation. An address with an account joins as that account, which has to be signed in: the mail alone
 * opens nobody's account. An address without one gets it here.
 */
export async function acceptInvitation(
  context: AppContext,
  caller: SignedIn | null,
  input: AcceptInvitation,
): Promise<Joined> {
  const { email } = findOpen(context.database.queries, input.token, context.now())
  const isKnown = findAccountByEmail(context.database.queries, email) !== undefined
  return isKnown ? acceptAs(context, caller, input.token) : acceptAsNew(context, email, input)
}
