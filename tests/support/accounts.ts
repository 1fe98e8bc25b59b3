import { desc, eq } from 'drizzle-orm'
import { expect } from 'vitest'
import type { SignUp } from '#shared/contracts/accounts.ts'
import { emails } from '../../server/db/schema/index.ts'
import { askWith } from './people.ts'
import type { RunningServer } from './server.ts'

export const goodPassword = 'seven wet trailers'
export const otherPassword = 'nine dry hoses hang'

export function makeSignUp(overrides: Partial<SignUp> = {}): SignUp {
  return {
    name: 'Robin Vale',
    email: 'robin@ridge.test',
    password: goodPassword,
    company: { name: 'Ridge Line', currency: 'USD', language: 'en', timeZone: 'America/Denver' },
    ...overrides,
  }
}

/** The newest mail to somebody, as it waits to be sent. */
export function findMail({ database }: RunningServer, to: string) {
  return database.queries
    .select()
    .from(emails)
    .where(eq(emails.to, to))
    .orderBy(desc(emails.createdAt), desc(emails.id))
    .all()
}

/** The token of the newest link in a mail to somebody. */
export function findToken(server: RunningServer, to: string, page: string): string {
  for (const { text } of findMail(server, to)) {
    const token = new RegExp(`/${page}#([\\w-]+)`).exec(text)?.[1]
    if (token) return token
  }
  throw new Error(`no mail to ${to} leads to ${page}`)
}

export function cookieOf(response: Response): string {
  const [cookie] = response.headers.getSetCookie()
  if (!cookie) throw new Error('the answer sets no cookie')
  return cookie.split(';')[0] ?? ''
}

/** An account made as people make it: signed up, the address confirmed. */
export async function makeAccount(server: RunningServer, overrides: Partial<SignUp> = {}): Promise<SignUp> {
  const ask = askWith(server.address)
  const signUp = makeSignUp(overrides)
  expect((await ask('POST', '/api/v1/sign-up', signUp)).status).toBe(202)
  const token = findToken(server, signUp.email, 'confirm')
  expect((await ask('POST', '/api/v1/sign-up/confirm', { token })).status).toBe(200)
  return signUp
}

export function postSignIn(server: RunningServer, email: string, password = goodPassword, cookie?: string) {
  return askWith(server.address, cookie)('POST', '/api/v1/session', { email, password })
}

/** Asks as somebody who has just signed in. */
export async function askSignedIn(server: RunningServer, email: string, password = goodPassword) {
  const response = await postSignIn(server, email, password)
  expect(response.status).toBe(200)
  const cookie = cookieOf(response)
  return { cookie, ask: askWith(server.address, cookie) }
}

/** Counts what the passwords cost: as many hashes and verifications take as much time. */
export function countHashing({ context }: RunningServer) {
  const counts = { hashes: 0, verifications: 0 }
  const { passwords } = context
  context.passwords = {
    hash: (password) => {
      counts.hashes += 1
      return passwords.hash(password)
    },
    verify: (password, hash) => {
      counts.verifications += 1
      return passwords.verify(password, hash)
    },
    close: () => passwords.close(),
  }
  return counts
}
