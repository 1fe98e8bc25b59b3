import type { Request } from 'express'
import type { Session, SignIn } from '#shared/contracts/accounts.ts'
import type { Actor, SignedIn } from '../actor.ts'
import type { AppContext } from '../context.ts'
import { makeProblem } from '../problems.ts'
import { findAccountByEmail, noteCompanyUsed, noteInActiveCompany, readSession } from './accounts.ts'
import type { Account } from './accounts.ts'
import { writeAudit } from './audit.ts'
import { slowdownOf } from './signInSlowdown.ts'

function settle(work: (done: (error?: unknown) => void) => void): Promise<void> {
  return new Promise((resolve, reject) => {
    work((error) => {
      if (error) reject(error instanceof Error ? error : new Error('The session could not be kept.'))
      else resolve()
    })
  })
}

/** Whether the session was ended by somebody else while this request was on its way. */
function isEnded(request: Request): Promise<boolean> {
  return new Promise((resolve, reject) => {
    request.sessionStore.get(request.sessionID, (error, session) => {
      if (error) reject(error instanceof Error ? error : new Error('The session could not be read.'))
      else resolve(!session)
    })
  })
}

/** Refuses what comes in a session that has ended since the head of the request was read. */
export async function refuseEnded(request: Request): Promise<void> {
  if (await isEnded(request)) throw makeProblem('not-signed-in', 'Sign in first.')
}

/**
 * Signs somebody in. The session's id is a new one each time, so that nobody can be made to sign in to one that
 * somebody else knows; it is saved before anything is answered.
 */
export async function startSession(
  request: Request,
  accountId: string,
  companyId: string | null,
): Promise<void> {
  if (request.session.accountId === accountId) await refuseEnded(request)
  await settle((done) => request.session.regenerate(done))
  request.session.accountId = accountId
  request.session.companyId = companyId
  await settle((done) => request.session.save(done))
}

/** Makes another company active in the session there is. Its id stays, so that what is on its way still arrives. */
export async function setActiveCompany(request: Request, companyId: string): Promise<void> {
  await refuseEnded(request)
  request.session.companyId = companyId
  await settle((done) => request.session.save(done))
}

/** Ends the session of this request, if there is one. */
export async function endSession(request: Request): Promise<void> {
  await settle((done) => request.session.destroy(done))
}

const wrongCredentials = () =>
  makeProblem('wrong-credentials', 'There is no account with this e-mail address and this password.')

/** Noted once the answer has gone: the write would take longer for an account that exists. */
function noteFailedSignIn(context: AppContext, account: Account): void {
  setImmediate(() => {
    try {
      context.database.transact((writer) =>
        noteInActiveCompany(writer, context, account, 'account.sign-in-failed'),
      )
    } catch (error) {
      context.logger.error({ err: error }, 'a failed sign-in was not noted')
    }
  })
}

/** Opens the company that was last used, and notes both in one go. */
function enterLastUsedCompany(context: AppContext, account: Account): string | null {
  return context.database.transact((writer) => {
    const companyId = noteInActiveCompany(writer, context, account, 'account.signed-in')
    if (companyId !== null) noteCompanyUsed(writer, context.now(), account.id, companyId)
    return companyId
  })
}

/** Signs in whoever knows the password; the answer and its time are the same where there is no such account. */
export async function signIn(
  context: AppContext,
  request: Request,
  { email, password }: SignIn,
): Promise<Session> {
  const { queries } = context.database
  const slowdown = slowdownOf(context)
  const finish = await slowdown.admit(email, request.ip)
  try {
    const hash = findAccountByEmail(queries, email)?.passwordHash ?? null
    const isRight = await context.passwords.verify(password, hash)
    // Read again: while it was being verified the password may have been changed.
    const account = findAccountByEmail(queries, email)
    if (!isRight || account?.passwordHash !== hash) {
      slowdown.noteFailure(email, request.ip)
      if (account) noteFailedSignIn(context, account)
      throw wrongCredentials()
    }
    slowdown.noteSuccess(email)
    return await openSession(context, request, account)
  } finally {
    finish()
  }
}

/** Signs somebody in of whom it is already known that they are who they say. */
export async function openSession(context: AppContext, request: Request, account: Account): Promise<Session> {
  const companyId = enterLastUsedCompany(context, account)
  await startSession(request, account.id, companyId)
  return readSession(context, account.id, companyId)
}

export async function signOut(
  context: AppContext,
  request: Request,
  caller: SignedIn | Actor | null,
): Promise<void> {
  if (!caller) return
  if ('companyId' in caller) {
    const event = {
      action: 'account.signed-out',
      subject: caller.email,
      subjectId: caller.accountId,
    } as const
    writeAudit(context.database.queries, caller, context.now(), event)
  }
  await endSession(request)
}
