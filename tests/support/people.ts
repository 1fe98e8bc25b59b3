import { createHash, createHmac, randomBytes, randomUUID } from 'node:crypto'
import type { Role } from '#shared/contracts/permissions.ts'
import { roles as everyRole } from '#shared/contracts/permissions.ts'
import { accounts, companies, memberships, sessions } from '../../server/db/schema/index.ts'
import type { RunningServer } from './server.ts'

export interface TestCompany {
  id: string
  name: string
}

/** Somebody with a session: what they ask is asked with their cookie. */
export interface TestPerson {
  accountId: string
  membershipId: string
  email: string
  name: string
  company: TestCompany
  cookie: string
  ask(method: string, path: string, body?: unknown): Promise<Response>
}

type Data = Pick<RunningServer, 'database' | 'context' | 'address'>

export function makeCompany({ database }: Data, overrides: Partial<TestCompany> = {}): TestCompany {
  const company = { id: randomUUID(), name: 'Ridge Line Blasting', ...overrides }
  database.queries
    .insert(companies)
    .values({
      ...company,
      currency: 'USD',
      language: 'en',
      timeZone: 'America/Denver',
      version: 1,
      creationHash: '',
      createdAt: new Date().toISOString(),
    })
    .run()
  return company
}

/** A person with these roles, straight in the database, since signing in is tested where it belongs. */
export function makePerson(
  server: Data,
  company: TestCompany,
  roles: readonly Role[] = everyRole,
  overrides: { name?: string; email?: string; passwordHash?: string } = {},
): TestPerson {
  const { queries } = server.database
  const accountId = randomUUID()
  const membershipId = randomUUID()
  const name = overrides.name ?? `Pat ${accountId.slice(0, 4)}`
  const email = overrides.email ?? `pat-${accountId.slice(0, 8)}@example.test`
  const now = new Date().toISOString()
  const passwordHash = overrides.passwordHash ?? 'none'
  queries
    .insert(accounts)
    .values({ id: accountId, email, name, passwordHash, language: 'en', createdAt: now })
    .run()
  queries
    .insert(memberships)
    .values({
      id: membershipId,
      companyId: company.id,
      accountId,
      roles: [...roles],
      state: 'active',
      joinedAt: now,
      version: 1,
    })
    .run()
  const cookie = makeSessionCookie(server, accountId, company.id)
  return { accountId, membershipId, email, name, company, cookie, ask: askWith(server.address, cookie) }
}

/** A session as express-session keeps and signs it. */
export function makeSessionCookie(
  { database, context }: Pick<RunningServer, 'database' | 'context'>,
  accountId: string,
  companyId: string | null,
): string {
  const sessionId = randomBytes(24).toString('base64url')
  const now = context.now()
  const expires = new Date(now.getTime() + 3600_000)
  database.queries
    .insert(sessions)
    .values({
      idHash: createHash('sha256').update(sessionId).digest('hex'),
      accountId,
      companyId,
      data: JSON.stringify({
        cookie: { originalMaxAge: 3600_000, expires, httpOnly: true, path: '/', sameSite: 'lax' },
        accountId,
        companyId,
      }),
      createdAt: now.toISOString(),
      lastUsedAt: now.toISOString(),
      expiresAt: expires.toISOString(),
    })
    .run()
  const mac = createHmac('sha256', context.sessionSecret)
    .update(sessionId)
    .digest('base64')
    .replace(/=+$/, '')
  return `sixteenth=${encodeURIComponent(`s:${sessionId}.${mac}`)}`
}

export function askWith(address: string, cookie?: string) {
  return (method: string, path: string, body?: unknown): Promise<Response> =>
    fetch(address + path, {
      method,
      headers: {
        ...(cookie && { cookie }),
        ...(body !== undefined && { 'content-type': 'application/json' }),
      },
      ...(body !== undefined && { body: JSON.stringify(body) }),
    })
}
