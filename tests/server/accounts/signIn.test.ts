import { eq } from 'drizzle-orm'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { sessionSchema } from '#shared/contracts/accounts.ts'
import { auditEntries, memberships, sessions } from '../../../server/db/schema/index.ts'
import { SignInSlowdown, slowdownOf } from '../../../server/services/signInSlowdown.ts'
import {
  askSignedIn,
  cookieOf,
  countHashing,
  goodPassword,
  makeAccount,
  otherPassword,
  postSignIn,
} from '../../support/accounts.ts'
import { askWith, makeCompany } from '../../support/people.ts'
import { readProblem } from '../../support/requests.ts'
import { startServer } from '../../support/server.ts'
import type { RunningServer } from '../../support/server.ts'

let server: RunningServer
let now = new Date()
const email = 'robin@ridge.test'
const day = 24 * 3600_000
const later = (milliseconds: number) => (now = new Date(now.getTime() + milliseconds))
const visit = async (cookie: string) =>
  ((await (await askWith(server.address, cookie)('GET', '/api/v1/visit')).json()) as { session: unknown })
    .session

beforeEach(async () => {
  now = new Date()
  server = await startServer({}, () => now)
})
afterEach(() => server.stop())

describe('signing in', () => {
  it('opens the company that was last used, and none where nobody has them any more', async () => {
    await makeAccount(server)
    const second = makeCompany(server, { name: 'Second Company' })
    const [membership] = server.database.queries.select().from(memberships).all()
    if (!membership) throw new Error('the sign-up made no membership')
    const lastSeenAt = new Date(now.getTime() + day).toISOString()
    const inSecond = { ...membership, id: 'second', companyId: second.id, lastSeenAt }
    server.database.queries.insert(memberships).values(inSecond).run()

    const open = async () => sessionSchema.parse(await (await postSignIn(server, email)).json())
    const session = await open()
    expect(session.company?.name).toBe('Second Company')
    expect(session.memberships.map(({ companyName }) => companyName)).toEqual([
      'Ridge Line',
      'Second Company',
    ])

    const deactivate = (id: string) =>
      server.database.queries
        .update(memberships)
        .set({ state: 'deactivated' })
        .where(eq(memberships.id, id))
        .run()
    deactivate('second')
    expect((await open()).company?.name).toBe('Ridge Line')
    deactivate(membership.id)
    expect(await open()).toMatchObject({ company: null, roles: [], memberships: [] })
  })

  it('answers and costs the same for a wrong password as for an address without an account', async () => {
    await makeAccount(server)
    const counts = countHashing(server)
    const wrong = await postSignIn(server, email, otherPassword)
    expect(counts).toEqual({ hashes: 0, verifications: 1 })
    const unknown = await postSignIn(server, 'nobody@ridge.test', otherPassword)
    expect(counts).toEqual({ hashes: 0, verifications: 2 })
    const problem = await readProblem(wrong)
    expect(problem.code).toBe('wrong-credentials')
    expect(await readProblem(unknown)).toEqual(problem)
    expect(wrong.headers.getSetCookie()).toEqual([])
  })

  it('is noted, and so is each failure of an account that exists', async () => {
    await makeAccount(server)
    await postSignIn(server, email, otherPassword)
    await postSignIn(server, 'nobody@ridge.test')
    await postSignIn(server, email)
    const listActions = () =>
      server.database.queries
        .select()
        .from(auditEntries)
        .all()
        .map(({ action }) => action)
    await vi.waitFor(() =>
      expect(listActions()).toEqual(['company.created', 'account.sign-in-failed', 'account.signed-in']),
    )
  })

  it('with a password that was changed while it was verified does not succeed', async () => {
    await makeAccount(server)
    const { passwords } = server.context
    const changed = await passwords.hash(otherPassword)
    server.context.passwords = {
      ...passwords,
      hash: (password) => passwords.hash(password),
      close: () => passwords.close(),
      verify: async (password, hash) => {
        const isRight = await passwords.verify(password, hash)
        server.database.connection.prepare('update accounts set password_hash = ?').run(changed)
        return isRight
      },
    }
    expect((await postSignIn(server, email)).status).toBe(401)
  })
})

describe('the cookie of a session', () => {
  it('is read by no script, sent by no other site, and kept for 14 days', async () => {
    await makeAccount(server)
    const [cookie] = (await postSignIn(server, email)).headers.getSetCookie()
    const marks = cookie
      ?.split('; ')
      .slice(1)
      .map((mark) => mark.replace(/^Expires=.*/, 'Expires'))
    expect(marks?.sort()).toEqual(['Expires', 'HttpOnly', 'Path=/', 'SameSite=Lax'])
    const expires = Date.parse(/Expires=([^;]+)/.exec(cookie ?? '')?.[1] ?? '')
    expect(Math.abs(expires - Date.now() - 14 * day)).toBeLessThan(60_000)
  })

  it('goes over TLS only, where people reach the server over TLS', async () => {
    await server.stop()
    server = await startServer({ publicUrl: 'https://sixteenth.example', trustProxy: 1 })
    await makeAccount(server)
    const response = await fetch(`${server.address}/api/v1/session`, {
      method: 'POST',
      headers: { 'content-type': 'application/json', 'x-forwarded-proto': 'https' },
      body: JSON.stringify({ email, password: goodPassword }),
    })
    expect(response.headers.getSetCookie()[0]).toContain('; Secure')
  })

  it('goes over TLS only in production, whatever is said of the address', async () => {
    await server.stop()
    server = await startServer({ isProduction: true, publicUrl: 'http://127.0.0.1' })
    await makeAccount(server)
    const signedIn = await postSignIn(server, email)
    expect(signedIn.headers.getSetCookie()[0]).toContain('; Secure')
    const signedOut = await askWith(server.address, cookieOf(signedIn))('DELETE', '/api/v1/session')
    expect(signedOut.headers.getSetCookie()[0]).toContain('; Secure')
  })

  it('is another one after signing in, and the one before is worth nothing', async () => {
    await makeAccount(server)
    const first = await askSignedIn(server, email)
    const again = await postSignIn(server, email, goodPassword, first.cookie)
    expect(cookieOf(again)).not.toBe(first.cookie)
    expect(await visit(first.cookie)).toBeNull()
    expect(await visit(cookieOf(again))).not.toBeNull()
  })

  it('that somebody made up is not taken over', async () => {
    await makeAccount(server)
    const planted = 'sixteenth=s%3Aplanted.c2lnbmF0dXJl'
    const response = await postSignIn(server, email, goodPassword, planted)
    expect(cookieOf(response)).not.toContain('planted')
    expect(await visit(planted)).toBeNull()
  })

  it('is taken away at sign-out, and the session with it', async () => {
    await makeAccount(server)
    const { ask, cookie } = await askSignedIn(server, email)
    const response = await ask('DELETE', '/api/v1/session')
    expect(response.status).toBe(204)
    expect(response.headers.getSetCookie()[0]).toMatch(/^sixteenth=;.*Expires=Thu, 01 Jan 1970/)
    expect(await visit(cookie)).toBeNull()
    expect(server.database.queries.select().from(sessions).all()).toEqual([])
    expect((await askWith(server.address)('DELETE', '/api/v1/session')).status).toBe(204)
  })
})

describe('a session', () => {
  it('ends 14 days after it was last used', async () => {
    await makeAccount(server)
    const { cookie } = await askSignedIn(server, email)
    later(14 * day - 1)
    expect(await visit(cookie)).not.toBeNull()
    later(14 * day - 1)
    expect(await visit(cookie)).not.toBeNull()
    later(14 * day)
    expect(await visit(cookie)).toBeNull()
  })

  it('ends 90 days after it began, however much it is used', async () => {
    await makeAccount(server)
    const { cookie } = await askSignedIn(server, email)
    for (let count = 0; count < 8; count += 1) {
      later(11 * day)
      expect(await visit(cookie)).not.toBeNull()
    }
    later(2 * day - 1)
    expect(await visit(cookie)).not.toBeNull()
    later(1)
    expect(await visit(cookie)).toBeNull()
  })
})

describe('whoever guesses', () => {
  function noteWaits() {
    const waits: number[] = []
    slowdownOf(server.context).wait = async (milliseconds) => void waits.push(milliseconds)
    return waits
  }

  it('waits longer after each failure, five seconds at most, whether or not the account exists', async () => {
    await makeAccount(server)
    const waitsFor = async (address: string) => {
      const waits = noteWaits()
      for (let count = 0; count < 9; count += 1) {
        expect((await postSignIn(server, address, otherPassword)).status).toBe(401)
      }
      return waits
    }
    const known = await waitsFor(email)
    expect(known).toEqual([500, 1000, 2000, 4000, 5000, 5000])
    later(31 * 60_000)
    expect(await waitsFor('nobody@ridge.test')).toEqual(known)
  })

  it('shuts nobody out: the right password still opens, and the account is quick again', async () => {
    await makeAccount(server)
    const waits = noteWaits()
    for (let count = 0; count < 6; count += 1) await postSignIn(server, email, otherPassword)
    expect((await postSignIn(server, email)).status).toBe(200)
    waits.length = 0
    expect((await postSignIn(server, email)).status).toBe(200)
    expect(waits).toEqual([])
  })

  it('at many accounts is slowed by address, and one right password does not help', async () => {
    await makeAccount(server)
    const waits = noteWaits()
    for (let count = 0; count < 11; count += 1) await postSignIn(server, `crew${count}@ridge.test`)
    expect(waits).toEqual([500])
    expect((await postSignIn(server, email)).status).toBe(200)
    await postSignIn(server, 'crew@ridge.test')
    expect(waits).toEqual([500, 1000, 1000])
    later(31 * 60_000)
    await postSignIn(server, 'crew@ridge.test')
    expect(waits).toEqual([500, 1000, 1000])
  })

  it('really waits before the answer', async () => {
    for (let count = 0; count < 3; count += 1) await postSignIn(server, email)
    const start = performance.now()
    await postSignIn(server, email)
    expect(performance.now() - start).toBeGreaterThan(490)
  })

  it('with many tries at once has a few that wait, and is told to come again with the rest', async () => {
    const slowdown = slowdownOf(server.context)
    for (let count = 0; count < 3; count += 1) await postSignIn(server, email)
    let release = () => {}
    const gate = new Promise<void>((resolve) => (release = resolve))
    const waits: number[] = []
    slowdown.wait = (milliseconds) => {
      waits.push(milliseconds)
      return gate
    }
    const answers: Response[] = []
    const tries = Array.from({ length: 8 }, async () => answers.push(await postSignIn(server, email)))
    await vi.waitFor(() => expect(answers).toHaveLength(5))
    for (const refused of answers) {
      expect(refused.headers.get('retry-after')).toBe('5')
      expect((await readProblem(refused)).code).toBe('too-many-requests')
    }
    // Those who wait count already: the second and the third are let go later than the first.
    expect(waits).toEqual([500, 1000, 2000])
    release()
    await Promise.all(tries)
    expect(answers.slice(5).map(({ status }) => status)).toEqual([401, 401, 401])
  })

  it('gains nothing by sending all guesses before the first is answered', async () => {
    const { passwords } = server.context
    let release = () => {}
    const gate = new Promise<void>((resolve) => (release = resolve))
    let verified = 0
    server.context.passwords = {
      ...passwords,
      verify: async () => {
        verified += 1
        await gate
        return false
      },
    }
    const waits: number[] = []
    slowdownOf(server.context).wait = async (milliseconds) => {
      waits.push(milliseconds)
      await gate
    }
    const answers: number[] = []
    const send = async (address: string) => answers.push((await postSignIn(server, address)).status)
    const tries = Array.from({ length: 20 }, () => send(email))
    await vi.waitFor(() => expect(answers).toHaveLength(14))
    expect(answers.every((status) => status === 429)).toBe(true)
    expect(waits).toEqual([500, 1000, 2000])
    expect(verified).toBe(3)

    // Nor by guessing at one account each: ten from one address are verified, twenty wait.
    tries.push(...Array.from({ length: 40 }, (_, count) => send(`crew${count}@ridge.test`)))
    await vi.waitFor(() => expect(answers).toHaveLength(14 + 19))
    expect(verified).toBe(3 + 4)
    expect(waits).toHaveLength(3 + 17)
    release()
    await Promise.all(tries)
    expect(answers.filter((status) => status === 401)).toHaveLength(6 + 21)
  })

  it('by guessing at ever new accounts fills no memory', () => {
    const slowdown = new SignInSlowdown(() => now)
    for (let count = 0; count < 25_000; count += 1) {
      slowdown.noteFailure(`crew${count}@ridge.test`, `192.0.${count % 200}.${count % 250}`)
    }
    expect(slowdown.keyCount).toBeLessThanOrEqual(20_000)
  })

  it('from all over one network of IPv6 is one', async () => {
    const waits: number[] = []
    const slowdown = new SignInSlowdown(
      () => now,
      async (milliseconds) => void waits.push(milliseconds),
    )
    for (let count = 0; count < 10; count += 1) {
      slowdown.noteFailure(`crew${count}@ridge.test`, `2001:db8:1:1::${count + 1}`)
    }
    await slowdown.admit('new@ridge.test', '2001:db8:1:1::ffff')
    await slowdown.admit('new@ridge.test', '2001:db8:2:1::1')
    expect(waits).toEqual([500])
  })
})
