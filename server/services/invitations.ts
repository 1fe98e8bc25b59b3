import { and, count, desc, eq, gt, inArray, isNull, ne } from 'drizzle-orm'
import type { SQL } from 'drizzle-orm'
import type { Invitation, InvitationInput, InvitationState } from '#shared/contracts/people.ts'
import type { Actor } from '../actor.ts'
import type { AppContext } from '../context.ts'
import type { Writer } from '../db/client.ts'
import { accounts, auditEntries, companies, invitations, memberships } from '../db/schema/index.ts'
import { mails } from '../email/mails.ts'
import { queueMail } from '../email/queueMail.ts'
import { makeFieldProblem, makeProblem, makeVersionConflict } from '../problems.ts'
import { writeAudit } from './audit.ts'
import { hashCreation } from './records.ts'
import { refuseUnlessStillMay } from './refuseUnlessStillMay.ts'
import { makeToken } from './tokens.ts'

export type InvitationRow = typeof invitations.$inferSelect

export const invitationLastsMs = 7 * 24 * 3600_000
/** Whoever signs up is an admin: nobody may make us write to half the world. */
const mostMailsADay = 100
const dayMs = 24 * 3600_000
const mostListed = 500

type Reader = Pick<Writer, 'select'>

export function stateOf(row: InvitationRow, at: Date): InvitationState {
  if (row.acceptedAt !== null) return 'accepted'
  if (row.withdrawnAt !== null) return 'withdrawn'
  return row.expiresAt <= at.toISOString() ? 'expired' : 'pending'
}

function toInvitation(row: InvitationRow, at: Date): Invitation {
  const { id, email, roles, language, invitedBy, createdAt, expiresAt, version } = row
  return { id, email, roles, language, invitedBy, state: stateOf(row, at), createdAt, expiresAt, version }
}

/** Those that wait for an answer, and those that waited too long: they can be sent again. */
export function listInvitations(reader: Reader, companyId: string, at: Date): Invitation[] {
  return reader
    .select()
    .from(invitations)
    .where(
      and(
        eq(invitations.companyId, companyId),
        isNull(invitations.acceptedAt),
        isNull(invitations.withdrawnAt),
      ),
    )
    .orderBy(desc(invitations.createdAt), desc(invitations.id))
    .limit(mostListed)
    .all()
    .map((row) => toInvitation(row, at))
}

const keyOf = (companyId: string, id: string) =>
  and(eq(invitations.companyId, companyId), eq(invitations.id, id))

function findInvitation(reader: Reader, companyId: string, id: string): InvitationRow {
  const row = reader.select().from(invitations).where(keyOf(companyId, id)).get()
  if (!row) throw makeProblem('not-found', 'There is nothing at this address.')
  return row
}

function isActiveMember(reader: Reader, companyId: string, email: string): boolean {
  const member = reader
    .select({ id: memberships.id })
    .from(memberships)
    .innerJoin(accounts, eq(accounts.id, memberships.accountId))
    .where(
      and(eq(memberships.companyId, companyId), eq(accounts.email, email), eq(memberships.state, 'active')),
    )
    .get()
  return member !== undefined
}

function isInvited(reader: Reader, companyId: string, email: string, exceptId: string, at: Date): boolean {
  const pending = reader
    .select({ id: invitations.id })
    .from(invitations)
    .where(
      and(
        eq(invitations.companyId, companyId),
        eq(invitations.email, email),
        ne(invitations.id, exceptId),
        isNull(invitations.acceptedAt),
        isNull(invitations.withdrawnAt),
        gt(invitations.expiresAt, at.toISOString()),
      ),
    )
    .get()
  return pending !== undefined
}

function refuseKnown(
  reader: Reader,
  companyId: string,
  { id, email }: { id: string; email: string },
  at: Date,
) {
  if (isActiveMember(reader, companyId, email)) {
    throw makeFieldProblem('/email', 'name-in-use', 'Whoever has this address is in the company already.')
  }
  if (isInvited(reader, companyId, email, id, at)) {
    const hint = 'This address has an invitation that waits; send that one again.'
    throw makeFieldProblem('/email', 'name-in-use', hint)
  }
}

function refuseFlood(reader: Reader, companyId: string, at: Date): void {
  const sent = reader
    .select({ count: count() })
    .from(auditEntries)
    .where(
      and(
        eq(auditEntries.companyId, companyId),
        inArray(auditEntries.action, ['invitation.sent', 'invitation.resent']),
        gt(auditEntries.at, new Date(at.getTime() - dayMs).toISOString()),
      ),
    )
    .get()
  if ((sent?.count ?? 0) < mostMailsADay) return
  const detail = `A company sends at most ${mostMailsADay} invitations a day.`
  throw makeProblem('too-many-requests', detail)
}

function sendLink(writer: Writer, context: AppContext, row: InvitationRow, token: string): void {
  const company = writer
    .select({ name: companies.name })
    .from(companies)
    .where(eq(companies.id, row.companyId))
    .get()
  const mail = mails.invitation(row.email, row.language, {
    companyName: company?.name ?? '',
    invitedBy: row.invitedBy,
    link: `${context.publicUrl}/invitation#${token}`,
    expiresAt: row.expiresAt,
  })
  queueMail(writer, context, mail)
}

/** Invites an address, once however often the same body comes. */
export function createInvitation(context: AppContext, actor: Actor, input: InvitationInput): Invitation {
  const { companyId } = actor
  const creationHash = hashCreation(input)
  const invitation = context.database.transact((writer) => {
    refuseUnlessStillMay(writer, actor, 'manage-people')
    const at = context.now()
    const existing = writer.select().from(invitations).where(keyOf(companyId, input.id)).get()
    if (existing) {
      if (existing.creationHash === creationHash) return toInvitation(existing, at)
      throw makeProblem('id-in-use', 'Another invitation was made under this id.')
    }
    refuseKnown(writer, companyId, input, at)
    refuseFlood(writer, companyId, at)
    const { token, tokenHash } = makeToken()
    const row: InvitationRow = {
      ...input,
      companyId,
      tokenHash,
      invitedBy: actor.name,
      creationHash,
      createdAt: at.toISOString(),
      expiresAt: new Date(at.getTime() + invitationLastsMs).toISOString(),
      acceptedAt: null,
      withdrawnAt: null,
      version: 1,
    }
    writer.insert(invitations).values(row).run()
    sendLink(writer, context, row, token)
    const changes = { roles: { from: null, to: input.roles } }
    writeAudit(writer, actor, at, {
      action: 'invitation.sent',
      subject: input.email,
      subjectId: input.id,
      changes,
    })
    return toInvitation(row, at)
  })
  context.mailIsWaiting()
  return invitation
}

/** Sends it again under another token, for seven days from now; the earlier mail's link is dead then. */
export function resendInvitation(context: AppContext, actor: Actor, id: string): Invitation {
  const { companyId } = actor
  const invitation = context.database.transact((writer) => {
    refuseUnlessStillMay(writer, actor, 'manage-people')
    const at = context.now()
    const before = findInvitation(writer, companyId, id)
    if (before.acceptedAt !== null || before.withdrawnAt !== null) {
      throw makeVersionConflict(toInvitation(before, at))
    }
    refuseKnown(writer, companyId, before, at)
    refuseFlood(writer, companyId, at)
    const { token, tokenHash } = makeToken()
    const renewed = {
      tokenHash,
      expiresAt: new Date(at.getTime() + invitationLastsMs).toISOString(),
      version: before.version + 1,
    }
    writer.update(invitations).set(renewed).where(keyOf(companyId, id)).run()
    const row = { ...before, ...renewed }
    sendLink(writer, context, row, token)
    writeAudit(writer, actor, at, { action: 'invitation.resent', subject: row.email, subjectId: id })
    return toInvitation(row, at)
  })
  context.mailIsWaiting()
  return invitation
}

function withdraw(writer: Writer, actor: Actor, at: Date, before: InvitationRow): InvitationRow {
  const { companyId, id, email } = before
  const withdrawn = { withdrawnAt: at.toISOString(), version: before.version + 1 }
  writer.update(invitations).set(withdrawn).where(keyOf(companyId, id)).run()
  writeAudit(writer, actor, at, { action: 'invitation.withdrawn', subject: email, subjectId: id })
  return { ...before, ...withdrawn }
}

function withdrawUnanswered(writer: Writer, actor: Actor, at: Date, which: SQL): void {
  const unanswered = and(isNull(invitations.acceptedAt), isNull(invitations.withdrawnAt))
  writer
    .select()
    .from(invitations)
    .where(and(eq(invitations.companyId, actor.companyId), which, unanswered))
    .all()
    .forEach((row) => withdraw(writer, actor, at, row))
}

/** Withdraws what an address was sent and has not answered, in the transaction that lets its person go. */
export function withdrawInvitationsTo(writer: Writer, actor: Actor, at: Date, email: string): void {
  withdrawUnanswered(writer, actor, at, eq(invitations.email, email))
}

/** Withdraws what somebody sent who may invite no more: it might go to another address of their own. */
export function withdrawInvitationsBy(writer: Writer, actor: Actor, at: Date, senderId: string): void {
  const sent = writer
    .select({ id: auditEntries.subjectId })
    .from(auditEntries)
    .where(
      and(
        eq(auditEntries.companyId, actor.companyId),
        eq(auditEntries.actorId, senderId),
        inArray(auditEntries.action, ['invitation.sent', 'invitation.resent']),
      ),
    )
  withdrawUnanswered(writer, actor, at, inArray(invitations.id, sent))
}

export function withdrawInvitation(context: AppContext, actor: Actor, id: string): Invitation {
  const { companyId } = actor
  return context.database.transact((writer) => {
    refuseUnlessStillMay(writer, actor, 'manage-people')
    const at = context.now()
    const before = findInvitation(writer, companyId, id)
    if (before.acceptedAt !== null) throw makeVersionConflict(toInvitation(before, at))
    if (before.withdrawnAt !== null) return toInvitation(before, at)
    return toInvitation(withdraw(writer, actor, at, before), at)
  })
}
