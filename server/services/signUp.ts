import { randomUUID } from 'node:crypto'
import { eq } from 'drizzle-orm'
import type { SignUp } from '#shared/contracts/accounts.ts'
import type { AppContext } from '../context.ts'
import { accounts, signUps } from '../db/schema/index.ts'
import { mails } from '../email/mails.ts'
import { queueMail } from '../email/queueMail.ts'
import { refuseCommonPassword } from '../passwords/commonPasswords.ts'
import { makeProblem } from '../problems.ts'
import { findAccountByEmail } from './accounts.ts'
import { insertCompany } from './companies.ts'
import { refuseUnknownPlaces } from './companyRules.ts'
import { linksOf } from './links.ts'
import { mailLimitOf } from './mailLimit.ts'
import { hashToken, makeToken } from './tokens.ts'

export const signUpLifeMs = 48 * 3600_000

/** Keeps a sign-up until its address is confirmed. Whether the address has an account, only its owner is told. */
export async function signUp(
  context: AppContext,
  address: string | undefined,
  { name, email, password, company }: SignUp,
): Promise<void> {
  refuseUnknownPlaces(company, '/company')
  refuseCommonPassword(password, [name, email, company.name])
  const isWelcome = mailLimitOf(context).admit(address, email)
  const passwordHash = await context.passwords.hash(password)
  if (!isWelcome) return
  const { database, now } = context
  const links = linksOf(context)
  const { token, tokenHash } = makeToken()
  database.transact((writer) => {
    const account = findAccountByEmail(writer, email)
    if (account) {
      const values = { name: account.name, signInLink: links.signIn, forgottenLink: links.forgotten }
      queueMail(writer, context, mails.alreadyHasAccount(email, account.language, values))
      return
    }
    const at = now()
    writer
      .insert(signUps)
      .values({
        tokenHash,
        email,
        name,
        passwordHash,
        company,
        createdAt: at.toISOString(),
        expiresAt: new Date(at.getTime() + signUpLifeMs).toISOString(),
      })
      .run()
    const values = { name, companyName: company.name, link: links.confirm(token) }
    queueMail(writer, context, mails.confirmSignUp(email, company.language, values))
  })
  context.mailIsWaiting()
}

/** Makes the account and its company, once whoever reads the mail says so; the address that is now good. */
export function confirmSignUp({ database, now }: AppContext, token: string): { email: string } {
  const outcome = database.transact((writer) => {
    const pending = writer
      .select()
      .from(signUps)
      .where(eq(signUps.tokenHash, hashToken(token)))
      .get()
    const at = now()
    if (!pending || pending.expiresAt <= at.toISOString()) return null
    // Whatever else was begun with this address ends here.
    writer.delete(signUps).where(eq(signUps.email, pending.email)).run()
    if (findAccountByEmail(writer, pending.email)) return null
    const { email, name, passwordHash, company } = pending
    const founder = { id: randomUUID(), name }
    writer
      .insert(accounts)
      .values({ ...founder, email, passwordHash, language: company.language, createdAt: at.toISOString() })
      .run()
    insertCompany(writer, at, founder, { id: randomUUID(), creationHash: '', input: company })
    return { email }
  })
  if (!outcome) throw makeProblem('link-not-good', 'This link has been used, or is too old. Sign up again.')
  return outcome
}
