import { mkdtempSync, readdirSync, readFileSync, rmSync } from 'node:fs'
import { createServer } from 'node:http'
import type { AddressInfo } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { Writable } from 'node:stream'
import { eq } from 'drizzle-orm'
import { pino } from 'pino'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { sessionSchema, visitSchema } from '#shared/contracts/accounts.ts'
import { createApp } from '../../../server/app.ts'
import { readConfig } from '../../../server/config.ts'
import { createContext } from '../../../server/context.ts'
import { prepareDemo } from '../../../server/db/seed.ts'
import { openDatabase } from '../../../server/db/client.ts'
import { emails, passwordResets, sessions, signUps } from '../../../server/db/schema/index.ts'
import { queueMail } from '../../../server/email/queueMail.ts'
import { createLogger } from '../../../server/middleware/requestLog.ts'
import { deleteExpired } from '../../../server/services/expiry.ts'
import {
  askSignedIn,
  cookieOf,
  findToken,
  goodPassword,
  makeAccount,
  makeSignUp,
  otherPassword,
  postSignIn,
} from '../../support/accounts.ts'
import { askWith } from '../../support/people.ts'
import { startServer } from '../../support/server.ts'
import type { RunningServer } from '../../support/server.ts'

const email = 'robin@ridge.test'
let dataDir: string
const opened: RunningServer[] = []
beforeEach(() => {
  dataDir = mkdtempSync(join(tmpdir(), 'sixteenth-test-'))
})
afterEach(async () => {
  for (const server of opened.splice(0)) await server.stop()
  rmSync(dataDir, { recursive: true, force: true })
})

/** A server on a folder that outlives it, whose every line of log is kept. */
async function startLogging(): Promise<RunningServer & { lines: string[] }> {
  const lines: string[] = []
  const keep = new Writable({
    write(line: Buffer, _encoding, done) {
      lines.push(line.toString())
      done()
    },
  })
  const environment = { NODE_ENV: 'test', PORT: '0', DATA_DIR: dataDir, CHECK_RATE_PER_MINUTE: 'off' }
  const config = { ...readConfig(environment), passwordCost: 4 }
  const server = createServer()
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve))
  const database = openDatabase(dataDir)
  const logger = createLogger('trace')
  // The logger of the server as it is, its output turned aside.
  Object.defineProperty(logger, pino.symbols.streamSym, { value: keep })
  const context = createContext(config, database, logger)
  server.on('request', createApp(context))
  const running = {
    lines,
    database,
    context,
    address: `http://127.0.0.1:${(server.address() as AddressInfo).port}`,
    async stop() {
      server.closeAllConnections()
      await new Promise((resolve) => server.close(resolve))
      await context.passwords.close()
      database.close()
    },
  }
  opened.push(running)
  return running
}

/** Everything that makes, takes or refuses a secret; the secrets. */
async function useSecrets(server: RunningServer) {
  const secrets: Record<string, string> = { goodPassword, otherPassword, wrong: 'eleven grey buckets' }
  const ask = askWith(server.address)
  await ask('POST', '/api/v1/sign-up', makeSignUp())
  secrets.confirmToken = findToken(server, email, 'confirm')
  await ask('POST', '/api/v1/sign-up/confirm', { token: secrets.confirmToken })
  await postSignIn(server, email, secrets.wrong)
  const first = await askSignedIn(server, email)
  await first.ask('PUT', '/api/v1/account/password', {
    currentPassword: goodPassword,
    password: otherPassword,
  })
  await ask('POST', '/api/v1/password/forgotten', { email, language: 'en' })
  secrets.resetToken = findToken(server, email, 'reset-password')
  await ask('POST', '/api/v1/password/reset', { token: secrets.resetToken, password: goodPassword })
  await ask('POST', '/api/v1/password/reset', { token: secrets.resetToken, password: goodPassword })
  const second = await askSignedIn(server, email)
  for (const [name, cookie] of Object.entries({ first: first.cookie, second: second.cookie })) {
    secrets[`${name}Cookie`] = cookie.replace('sixteenth=', '')
    const sessionId = /^sixteenth=s%3A([^.]+)\./.exec(cookie)?.[1]
    if (!sessionId) throw new Error('the cookie holds no session id')
    secrets[`${name}SessionId`] = sessionId
  }
  secrets.sessionSecret = server.context.sessionSecret
  return secrets
}

const findIn = (text: string, secrets: Record<string, string>) =>
  Object.entries(secrets)
    .filter(([, secret]) => text.includes(secret))
    .map(([name]) => name)

describe('a secret', () => {
  it('stands in no line of the log, whatever is logged', async () => {
    const server = await startLogging()
    const secrets = await useSecrets(server)
    server.context.logger.error('the log is read')
    const log = server.lines.join('')
    expect(log).toContain('the log is read')
    expect(log.match(/"url":"\/api\/v1\/session"/g)?.length).toBe(3)
    expect(findIn(log, secrets)).toEqual([])
  })

  it('stands in the database as its hash only; a mail that waits has its link, until it is sent', async () => {
    const server = await startLogging()
    const { sessionSecret: _sessionSecret, ...secrets } = await useSecrets(server)
    // What a link opens goes with the mail; all else is looked for in the bytes of the files.
    server.database.connection.exec('delete from emails; vacuum; pragma wal_checkpoint(truncate)')
    const bytes = readdirSync(dataDir)
      .map((name) => readFileSync(join(dataDir, name), 'latin1'))
      .join('')
    expect(bytes).toContain('robin@ridge.test')
    expect(findIn(bytes, secrets)).toEqual([])
  })
})

describe('a restart', () => {
  it('signs nobody out, and leaves links good', async () => {
    const first = await startLogging()
    await makeAccount(first)
    const { cookie } = await askSignedIn(first, email)
    await askWith(first.address)('POST', '/api/v1/password/forgotten', { email, language: 'en' })
    await opened.pop()?.stop()

    const second = await startLogging()
    const visit = await askWith(second.address, cookie)('GET', '/api/v1/visit')
    expect(((await visit.json()) as { session: { account: object } }).session.account).toMatchObject({
      email,
    })
    const token = findToken(second, email, 'reset-password')
    const body = { token, password: otherPassword }
    expect((await askWith(second.address)('POST', '/api/v1/password/reset', body)).status).toBe(200)
  })
})

describe('clearing away', () => {
  it('takes what has run out and leaves the rest', async () => {
    let now = new Date()
    const server = await startServer({}, () => now)
    opened.push(server)
    await makeAccount(server)
    await askSignedIn(server, email)
    const ask = askWith(server.address)
    const count = () =>
      [signUps, passwordResets, sessions].map(
        (table) => server.database.queries.select().from(table).all().length,
      )
    const fill = async () => {
      await ask('POST', '/api/v1/sign-up', makeSignUp({ email: 'new@ridge.test' }))
      await ask('POST', '/api/v1/password/forgotten', { email, language: 'en' })
    }
    await fill()
    now = new Date(now.getTime() + 3 * 3600_000)
    await fill()
    deleteExpired(server.context)
    expect(count()).toEqual([2, 1, 1])
    now = new Date(now.getTime() + 46 * 3600_000)
    deleteExpired(server.context)
    expect(count()).toEqual([1, 0, 1])
    now = new Date(now.getTime() + 14 * 24 * 3600_000)
    deleteExpired(server.context)
    expect(count()).toEqual([0, 0, 0])
  })

  it('takes mails 90 days after they were written, but none that waits', async () => {
    let now = new Date()
    const server = await startServer({}, () => now)
    opened.push(server)
    const day = 24 * 3600_000
    const write = (to: string, state: 'waiting' | 'sent' | 'given-up') =>
      server.database.transact((writer) => {
        queueMail(writer, server.context, { to, subject: 'x', text: '', html: '' })
        writer.update(emails).set({ state }).where(eq(emails.to, to)).run()
      })
    write('old-sent', 'sent')
    write('old-lost', 'given-up')
    write('old-waiting', 'waiting')
    now = new Date(now.getTime() + day)
    write('newer', 'sent')
    const left = () =>
      server.database.queries
        .select()
        .from(emails)
        .all()
        .map(({ to }) => to)
    now = new Date(now.getTime() + 89 * day)
    deleteExpired(server.context)
    expect(left()).toEqual(['old-sent', 'old-lost', 'old-waiting', 'newer'])
    now = new Date(now.getTime() + 1)
    deleteExpired(server.context)
    expect(left()).toEqual(['old-waiting', 'newer'])
  })
})

describe('a demo sign-in', () => {
  it('is not there where the demo is not', async () => {
    const server = await startServer()
    opened.push(server)
    await makeAccount(server)
    const response = await askWith(server.address)('POST', '/api/v1/demo-session', { email })
    expect(response.status).toBe(404)
    expect(() => cookieOf(response)).toThrow()
  })

  it('is there where the demo is, for its own people only and without a password', async () => {
    const server = await startServer()
    opened.push(server)
    prepareDemo(server.database, server.context.config)
    await makeAccount(server)
    const ask = askWith(server.address)
    const { demoPeople } = visitSchema.parse(await (await ask('GET', '/api/v1/visit')).json())
    expect(demoPeople.map(({ roles }) => roles)).toHaveLength(4)
    for (const { email: address, roles } of demoPeople) {
      const response = await ask('POST', '/api/v1/demo-session', { email: address })
      expect(sessionSchema.parse(await response.json())).toMatchObject({ account: { email: address }, roles })
    }
    expect((await ask('POST', '/api/v1/demo-session', { email })).status).toBe(404)
  })

  it.each([{ isProduction: true }, { isLoopback: false }])(
    'is not there with the demo’s data and %o',
    async (overrides) => {
      const server = await startServer()
      opened.push(server)
      prepareDemo(server.database, server.context.config)
      const [person] = visitSchema.parse(
        await (await askWith(server.address)('GET', '/api/v1/visit')).json(),
      ).demoPeople
      Object.assign(server.context.config, overrides)
      const response = await askWith(server.address)('POST', '/api/v1/demo-session', { email: person?.email })
      expect(response.status).toBe(404)
    },
  )
})
