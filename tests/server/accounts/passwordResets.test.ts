import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { auditEntries } from '../../../server/db/schema/index.ts'
import { slowdownOf } from '../../../server/services/signInSlowdown.ts'
import {
  askSignedIn,
  cookieOf,
  findMail,
  findToken,
  goodPassword,
  makeAccount,
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
const email = 'robin@ridge.test'
const hour = 3600_000

beforeEach(async () => {
  now = new Date()
  server = await startServer({}, () => now)
  ask = askWith(server.address)
  await makeAccount(server)
})
afterEach(() => server.stop())

const later = (milliseconds: number) => (now = new Date(now.getTime() + milliseconds))
const isIn = async (cookie: string) =>
  (await askWith(server.address, cookie)('PUT', '/api/v1/account', { name: 'Robin', language: 'en' }))
    .status === 200
const listActions = () =>
  server.database.queries
    .select()
    .from(auditEntries)
    .all()
    .map(({ action }) => action)

async function askForToken(): Promise<string> {
  later(1000)
  expect((await ask('POST', '/api/v1/password/forgotten', { email, language: 'es' })).status).toBe(202)
  return findToken(server, email, 'reset-password')
}

const reset = (token: string, password = otherPassword) =>
  ask('POST', '/api/v1/password/reset', { token, password })

describe('a forgotten password', () => {
  it('is replaced over the link in the mail, and whoever was signed in no longer is', async () => {
    const { cookie } = await askSignedIn(server, email)
    const response = await reset(await askForToken())
    expect(await response.json()).toEqual({ email })
    expect(response.headers.getSetCookie()).toEqual([])
    expect(await isIn(cookie)).toBe(false)
    expect((await postSignIn(server, email, goodPassword)).status).toBe(401)
    expect((await postSignIn(server, email, otherPassword)).status).toBe(200)
  })

  it('is reported to its owner, and noted', async () => {
    await reset(await askForToken())
    expect(listActions()).toContain('account.password-reset')
    const mails = findMail(server, email).filter(({ text }) => text.includes('/forgotten-password'))
    expect(mails).toHaveLength(1)
  })

  it('is replaced once with one link, and by no link that was sent before', async () => {
    const first = await askForToken()
    const second = await askForToken()
    expect((await reset(second)).status).toBe(200)
    for (const token of [first, second]) {
      expect((await readProblem(await reset(token, 'eleven grey buckets'))).code).toBe('link-not-good')
    }
    expect((await postSignIn(server, email, otherPassword)).status).toBe(200)
  })

  it('is replaced once, also by two who use the link at the same time', async () => {
    const token = await askForToken()
    const statuses = (await Promise.all([reset(token), reset(token)])).map(({ status }) => status)
    expect(statuses.sort()).toEqual([200, 410])
  })

  it('can be replaced for two hours and not longer', async () => {
    const token = await askForToken()
    later(2 * hour)
    expect((await reset(token)).status).toBe(410)
    later(-1)
    expect((await reset(token)).status).toBe(200)
  })

  it('is not replaced by a common one, and the link stays good', async () => {
    const token = await askForToken()
    expect(listErrors(await readProblem(await reset(token, 'robinvale1')))).toEqual(['too-common /password'])
    expect((await reset(token)).status).toBe(200)
  })

  it('is not replaced with a made-up token', async () => {
    expect((await reset('made-up')).status).toBe(410)
  })

  it('of an address without an account is answered alike, and says so by mail only', async () => {
    const known = await ask('POST', '/api/v1/password/forgotten', { email, language: 'en' })
    const unknown = await ask('POST', '/api/v1/password/forgotten', {
      email: 'who@ridge.test',
      language: 'en',
    })
    expect([unknown.status, await unknown.text()]).toEqual([known.status, await known.text()])
    const [mail] = findMail(server, 'who@ridge.test')
    expect(mail?.text).toContain('/sign-up')
    expect(mail?.text).not.toContain('#')
  })
})

describe('changing the password', () => {
  it('asks for the one there is, keeps this device, and signs out the others', async () => {
    const here = await askSignedIn(server, email)
    const there = await askSignedIn(server, email)
    const response = await here.ask('PUT', '/api/v1/account/password', {
      currentPassword: goodPassword,
      password: otherPassword,
    })
    expect(response.status).toBe(204)
    expect(await isIn(cookieOf(response))).toBe(true)
    expect(await isIn(here.cookie)).toBe(false)
    expect(await isIn(there.cookie)).toBe(false)
    expect((await postSignIn(server, email, goodPassword)).status).toBe(401)
    expect((await postSignIn(server, email, otherPassword)).status).toBe(200)
    expect(listActions()).toContain('account.password-changed')
    expect(findMail(server, email).some(({ text }) => text.includes('/forgotten-password'))).toBe(true)
  })

  it('kills a link that was sent for the old one', async () => {
    const token = await askForToken()
    const here = await askSignedIn(server, email)
    const body = { currentPassword: goodPassword, password: otherPassword }
    expect((await here.ask('PUT', '/api/v1/account/password', body)).status).toBe(204)
    expect((await reset(token, 'eleven grey buckets')).status).toBe(410)
  })

  it('with a wrong one is refused, and slowed like signing in', async () => {
    const waits: number[] = []
    slowdownOf(server.context).wait = async (milliseconds) => void waits.push(milliseconds)
    const here = await askSignedIn(server, email)
    for (let count = 0; count < 4; count += 1) {
      const body = { currentPassword: 'eleven grey buckets', password: otherPassword }
      const problem = await readProblem(await here.ask('PUT', '/api/v1/account/password', body))
      expect(listErrors(problem)).toEqual(['wrong-password /currentPassword'])
    }
    expect(waits).toEqual([500])
  })

  it('is for who is signed in', async () => {
    const body = { currentPassword: goodPassword, password: otherPassword }
    expect((await readProblem(await ask('PUT', '/api/v1/account/password', body))).code).toBe('not-signed-in')
  })
})
