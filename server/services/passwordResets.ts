import { and, eq, gt, isNull } from 'drizzle-orm'
import type { Request } from 'express'
import type { z } from 'zod'
import type {
  changePasswordSchema,
  forgottenPasswordSchema,
  resetPasswordSchema,
} from '#shared/contracts/accounts.ts'
import type { AppContext } from '../context.ts'
import type { Writer } from '../db/client.ts'
import { accounts, passwordResets } from '../db/schema/index.ts'
import { mails } from '../email/mails.ts'
import { queueMail } from '../email/queueMail.ts'
import { refuseCommonPassword } from '../passwords/commonPasswords.ts'
import { makeFieldProblem, makeProblem } from '../problems.ts'
import { findAccount, findAccountByEmail, noteInActiveCompany } from './accounts.ts'
import type { Account } from './accounts.ts'
import { linksOf } from './links.ts'
import { mailLimitOf } from './mailLimit.ts'
import { endSessionsOfAccount } from './sessions.ts'
import { slowdownOf } from './signInSlowdown.ts'
import { startSession } from './signIn.ts'
import { hashToken, makeToken } from './tokens.ts'

export const resetLifeMs = 2 * 3600_000

/** Sends a link to a new password, or word that there is no account; whoever asked sees no difference. */
export async function askForReset(
  context: AppContext,
  address: string | undefined,
  { email, language }: z.infer<typeof forgottenPasswordSchema>,
): Promise<void> {
  if (!mailLimitOf(context).admit(address, email)) return
  const links = linksOf(context)
  const { token, tokenHash } = makeToken()
  context.database.transact((writer) => {
    const account = findAccountByEmail(writer, email)
    if (!account) {
      queueMail(writer, context, mails.noAccount(email, language, { signUpLink: links.signUp }))
      return
    }
    const at = context.now()
    const expiresAt = new Date(at.getTime() + resetLifeMs).toISOString()
    writer
      .insert(passwordResets)
      .values({ tokenHash, accountId: account.id, createdAt: at.toISOString(), expiresAt })
      .run()
    const values = { name: account.name, link: links.reset(token) }
    queueMail(writer, context, mails.resetPassword(email, language, values))
  })
  context.mailIsWaiting()
}

function findAccountOfReset(
  reader: Pick<Writer, 'select'>,
  { now }: Pick<AppContext, 'now'>,
  token: string,
): Account {
  const reset = reader
    .select()
    .from(passwordResets)
    .where(
      and(
        eq(passwordResets.tokenHash, hashToken(token)),
        gt(passwordResets.expiresAt, now().toISOString()),
        isNull(passwordResets.usedAt),
      ),
    )
    .get()
  const account = reset && findAccount(reader, reset.accountId)
  if (account) return account
  throw makeProblem('link-not-good', 'This link has been used, or is too old. Ask for another.')
}

function writePassword(
  writer: Writer,
  context: AppContext,
  account: Account,
  action: 'account.password-changed' | 'account.password-reset',
  passwordHash: string,
): void {
  writer.update(accounts).set({ passwordHash }).where(eq(accounts.id, account.id)).run()
  // No link that was sent for the old password may undo the new one.
  writer
    .update(passwordResets)
    .set({ usedAt: context.now().toISOString() })
    .where(and(eq(passwordResets.accountId, account.id), isNull(passwordResets.usedAt)))
    .run()
  noteInActiveCompany(writer, context, account, action)
  const values = { name: account.name, forgottenLink: linksOf(context).forgotten }
  queueMail(writer, context, mails.passwordChanged(account.email, account.language, values))
}

/** Puts a new password in place of a forgotten one. Whoever was signed in with the old one is no longer. */
export async function resetPassword(
  context: AppContext,
  { token, password }: z.infer<typeof resetPasswordSchema>,
): Promise<{ email: string }> {
  const { database } = context
  const { name, email } = findAccountOfReset(database.queries, context, token)
  refuseCommonPassword(password, [name, email])
  const passwordHash = await context.passwords.hash(password)
  database.transact((writer) => {
    // Looked at again: while it was hashed the link may have been used a second time.
    const account = findAccountOfReset(writer, context, token)
    writePassword(writer, context, account, 'account.password-reset', passwordHash)
    endSessionsOfAccount(writer, account.id)
  })
  slowdownOf(context).noteSuccess(email)
  context.mailIsWaiting()
  return { email }
}

/** Changes the password of whoever knows the one they have; their other devices must sign in again. */
export async function changePassword(
  context: AppContext,
  request: Request,
  accountId: string,
  { currentPassword, password }: z.infer<typeof changePasswordSchema>,
): Promise<void> {
  const { database, passwords } = context
  const account = findAccount(database.queries, accountId)
  if (!account) throw makeProblem('not-signed-in', 'Sign in first.')
  refuseCommonPassword(password, [account.name, account.email])
  const slowdown = slowdownOf(context)
  const finish = await slowdown.admit(account.email, request.ip)
  let passwordHash: string
  try {
    if (!(await passwords.verify(currentPassword, account.passwordHash))) {
      slowdown.noteFailure(account.email, request.ip)
      throw makeFieldProblem('/currentPassword', 'wrong-password', 'This is not your password.')
    }
    slowdown.noteSuccess(account.email)
    passwordHash = await passwords.hash(password)
  } finally {
    finish()
  }
  database.transact((writer) => {
    if (findAccount(writer, accountId)?.passwordHash !== account.passwordHash) {
      throw makeFieldProblem('/currentPassword', 'wrong-password', 'Your password was changed meanwhile.')
    }
    writePassword(writer, context, account, 'account.password-changed', passwordHash)
    endSessionsOfAccount(writer, accountId, request.sessionID)
  })
  context.mailIsWaiting()
  await startSession(request, accountId, request.session.companyId ?? null)
}
