import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { sessionSchema } from '#shared/contracts/accounts.ts'
import { accounts, auditEntries, companies, signUps } from '../../../server/db/schema/index.ts'
import {
  askSignedIn,
  countHashing,
  findMail,
  findToken,
  goodPassword,
  makeAccount,
  makeSignUp,
  otherPassword,
  postSignIn,
} from '../../support/accounts.ts'
import { askWith } from '../../support/people.ts'
import { listErrors, readProblem } from '../../support/requests.ts'
import { startServer } from '../../support/server.ts'
import type { RunningServer } from '../../support/server.ts'

let server: RunningServer
let now = new Date()
let ask: ReturnType<typeof askWith>
beforeEach(async () => {
  now = new Date()
  server = await startServer({}, () => now)
  ask = askWith(server.address)
})
afterEach(() => server.stop())

const hour = 3600_000
const postSignUp = (overrides = {}) => ask('POST', '/api/v1/sign-up', makeSignUp(overrides))

describe('signing up', () => {
  it('makes nothing before the address is confirmed', async () => {
    expect((await postSignUp()).status).toBe(202)
    expect(server.database.queries.select().from(accounts).all()).toEqual([])
    expect(server.database.queries.select().from(companies).all()).toEqual([])
    expect((await postSignIn(server, 'robin@ridge.test')).status).toBe(401)
  })

  it('gives whoever confirms a company with every role, once they sign in', async () => {
    await postSignUp()
    const token = findToken(server, 'robin@ridge.test', 'confirm')
    const confirmed = await ask('POST', '/api/v1/sign-up/confirm', { token })
    expect(await confirmed.json()).toEqual({ email: 'robin@ridge.test' })
    expect(confirmed.headers.getSetCookie()).toEqual([])
    const response = await postSignIn(server, ' Robin@Ridge.test ')
    const session = sessionSchema.parse(await response.json())
    expect(session.roles).toEqual(['blaster', 'estimator', 'owner', 'admin'])
    expect(session.account).toMatchObject({ name: 'Robin Vale', email: 'robin@ridge.test', language: 'en' })
    expect(session.company).toMatchObject({ name: 'Ridge Line', currency: 'USD', timeZone: 'America/Denver' })
    const actions = server.database.queries.select().from(auditEntries).all()
    expect(actions.map(({ action }) => action)).toEqual(['company.created', 'account.signed-in'])
  })

  it('is confirmed once only', async () => {
    await makeAccount(server)
    const token = findToken(server, 'robin@ridge.test', 'confirm')
    const again = await ask('POST', '/api/v1/sign-up/confirm', { token })
    expect((await readProblem(again)).code).toBe('link-not-good')
    expect(server.database.queries.select().from(companies).all()).toHaveLength(1)
  })

  it('can be confirmed for 48 hours and not longer', async () => {
    await postSignUp()
    const token = findToken(server, 'robin@ridge.test', 'confirm')
    now = new Date(now.getTime() + 48 * hour)
    expect((await ask('POST', '/api/v1/sign-up/confirm', { token })).status).toBe(410)
    now = new Date(now.getTime() - 1)
    expect((await ask('POST', '/api/v1/sign-up/confirm', { token })).status).toBe(200)
  })

  it('with two mails for one address makes one account, of the first that is confirmed', async () => {
    await postSignUp()
    const first = findToken(server, 'robin@ridge.test', 'confirm')
    now = new Date(now.getTime() + 1000)
    await postSignUp({ password: otherPassword })
    const second = findToken(server, 'robin@ridge.test', 'confirm')
    expect(second).not.toBe(first)
    expect((await ask('POST', '/api/v1/sign-up/confirm', { token: second })).status).toBe(200)
    expect((await ask('POST', '/api/v1/sign-up/confirm', { token: first })).status).toBe(410)
    expect((await postSignIn(server, 'robin@ridge.test', goodPassword)).status).toBe(401)
    expect((await postSignIn(server, 'robin@ridge.test', otherPassword)).status).toBe(200)
    expect(server.database.queries.select().from(signUps).all()).toEqual([])
  })

  it('with an address that has an account answers and costs the same, and only its owner is told', async () => {
    await makeAccount(server)
    const counts = countHashing(server)
    const unknown = await postSignUp({ email: 'new@ridge.test' })
    expect(counts).toEqual({ hashes: 1, verifications: 0 })
    const known = await postSignUp({ password: otherPassword })
    expect(counts).toEqual({ hashes: 2, verifications: 0 })
    expect([known.status, await known.text()]).toEqual([unknown.status, await unknown.text()])
    const [mail] = findMail(server, 'robin@ridge.test').filter(({ text }) => !text.includes('/confirm#'))
    expect(mail?.text).toContain('/sign-in')
    expect((await postSignIn(server, 'robin@ridge.test', otherPassword)).status).toBe(401)
  })

  it('sends no mailbox more than five mails an hour, whatever is answered', async () => {
    for (let count = 0; count < 7; count += 1) expect((await postSignUp()).status).toBe(202)
    expect(findMail(server, 'robin@ridge.test')).toHaveLength(5)
    now = new Date(now.getTime() + hour)
    await postSignUp()
    expect(findMail(server, 'robin@ridge.test')).toHaveLength(6)
  })

  it('is refused for an hour to an address that never stops', async () => {
    for (let count = 0; count < 60; count += 1) {
      const body = { email: `crew${count}@ridge.test`, language: 'en' }
      expect((await ask('POST', '/api/v1/password/forgotten', body)).status).toBe(202)
    }
    const response = await postSignUp()
    expect(response.headers.get('retry-after')).toBe('3600')
    expect((await readProblem(response)).code).toBe('too-many-requests')
  })
})

describe('what a sign-up may say', () => {
  const company = makeSignUp().company
  it.each([
    [
      'a currency that does not exist',
      { company: { ...company, currency: 'ZZZ' } },
      'not-a-currency /company/currency',
    ],
    [
      'a time zone that does not exist',
      { company: { ...company, timeZone: 'America/Ridge' } },
      'not-a-time-zone /company/timeZone',
    ],
    ['a password of 9 characters', { password: 'k7#vQ2m!x' }, 'too-short /password'],
    ['a password of 73 bytes', { password: 'kv7 '.repeat(18) + 'x' }, 'too-long /password'],
    [
      'a password of 37 letters and 74 bytes',
      { password: 'ñéüöäßåøæ'.repeat(4) + 'ç' },
      'too-long /password',
    ],
    ['a common password', { password: 'Password2024!' }, 'too-common /password'],
    ['a password of the own name', { password: 'RobinVale99' }, 'too-common /password'],
    ['a password of the company’s name', { password: 'ridgeline2026' }, 'too-common /password'],
    ['something that is no address', { email: 'robin at ridge' }, 'not-an-email /email'],
  ])('is not %s', async (_case, overrides, error) => {
    const response = await postSignUp(overrides)
    expect(response.status).toBe(422)
    expect(listErrors(await readProblem(response))).toEqual([error])
    expect(findMail(server, 'robin@ridge.test')).toEqual([])
  })

  it('can be a password of 72 bytes, all of which count', async () => {
    const password = 'kestrel over a yard '.repeat(3) + 'and a cold pot'.slice(0, 12)
    expect(Buffer.byteLength(password)).toBe(72)
    await makeAccount(server, { password })
    expect((await postSignIn(server, 'robin@ridge.test', password)).status).toBe(200)
    expect((await postSignIn(server, 'robin@ridge.test', `${password}x`)).status).toBe(401)
    expect((await postSignIn(server, 'robin@ridge.test', password.slice(0, 71))).status).toBe(401)
  })

  it('can be a password with accents, from whichever keyboard', async () => {
    await makeAccount(server, { password: 'cañón y lluvia fría'.normalize('NFD') })
    await askSignedIn(server, 'robin@ridge.test', 'cañón y lluvia fría'.normalize('NFC'))
  })
})
