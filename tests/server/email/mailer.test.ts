import { Writable } from 'node:stream'
import { eq } from 'drizzle-orm'
import { pino } from 'pino'
import type { SMTPServerDataStream, SMTPServerOptions, SMTPServerSession } from 'smtp-server'
import { afterEach, describe, expect, it, vi } from 'vitest'
import type { Config } from '../../../server/config.ts'
import { emails } from '../../../server/db/schema/index.ts'
import { startMailer } from '../../../server/email/mailer.ts'
import { mails } from '../../../server/email/mails.ts'
import { queueMail } from '../../../server/email/queueMail.ts'
import { startMailServer } from '../../support/mailServer.ts'
import type { MailServer } from '../../support/mailServer.ts'
import { startServer } from '../../support/server.ts'
import type { RunningServer } from '../../support/server.ts'

const minuteMs = 60_000
const hourMs = 60 * minuteMs
const dayMs = 24 * hourMs

const ending: (() => Promise<void>)[] = []
afterEach(async () => {
  for (const end of ending.splice(0).reverse()) await end()
})

let clockMs = 0

async function start(overrides: Partial<Config> = {}): Promise<RunningServer> {
  clockMs = Date.parse('2026-05-03T15:00:00.000Z')
  const mailFrom = 'Sixteenth <no-reply@sixteenth.test>'
  const server = await startServer({ mailFrom, ...overrides }, () => new Date(clockMs))
  ending.push(server.stop)
  return server
}

function runMailer({ context }: RunningServer, random = () => 0) {
  const mailer = startMailer(context, { pollMs: 10, random })
  ending.push(() => mailer.stop())
  return mailer
}

async function runMailServer(options?: SMTPServerOptions, port?: number): Promise<MailServer> {
  const mailServer = await startMailServer(options, port)
  ending.push(mailServer.stop)
  return mailServer
}

/** A port at which nobody listens. */
async function findDeadPort(): Promise<number> {
  const { port, stop } = await startMailServer()
  await stop()
  return port
}

function queueInvitation({ context, database }: RunningServer, to: string, language: 'en' | 'es' = 'en') {
  const mail = mails.invitation(to, language, {
    companyName: 'Tom & Ana <Blasting>',
    invitedBy: 'José Peña',
    link: 'http://sixteenth.test/invitation#abc-123_x',
    expiresAt: '2026-05-10T15:00:00.000Z',
  })
  database.transact((writer) => queueMail(writer, context, mail))
  context.mailIsWaiting()
}

function readRow({ database }: RunningServer, to: string) {
  const row = database.queries.select().from(emails).where(eq(emails.to, to)).get()
  if (!row) throw new Error(`No mail to ${to}`)
  return row
}

function waitForState(server: RunningServer, to: string, state: 'sent' | 'given-up') {
  return vi.waitFor(() => expect(readRow(server, to).state).toBe(state), { timeout: 10_000, interval: 5 })
}

function waitForAttempts(server: RunningServer, to: string, attempts: number) {
  return vi.waitFor(() => expect(readRow(server, to).attempts).toBe(attempts), {
    timeout: 10_000,
    interval: 2,
  })
}

/** Long enough for the mailer to look into its queue several times. */
const severalPolls = () => new Promise((resolve) => setTimeout(resolve, 120))

describe('a mail that waits', () => {
  it('reaches the mail server as text and as HTML, in both languages', async () => {
    const mailServer = await runMailServer()
    const server = await start({ smtpUrl: mailServer.url })
    runMailer(server)
    queueInvitation(server, 'en@example.test', 'en')
    queueInvitation(server, 'es@example.test', 'es')
    await waitForState(server, 'es@example.test', 'sent')
    await waitForState(server, 'en@example.test', 'sent')

    const [english, spanish] = ['en@example.test', 'es@example.test'].map((to) =>
      mailServer.received.find((mail) => mail.to === to),
    )
    expect(mailServer.received).toHaveLength(2)
    expect(english?.headers['subject']).toBe('José Peña invites you to Tom & Ana <Blasting>')
    expect(spanish?.headers['subject']).toBe('José Peña le ofrece un lugar en Tom & Ana <Blasting>')
    for (const mail of [english, spanish]) {
      expect(mail?.from).toBe('no-reply@sixteenth.test')
      expect(mail?.headers['from']).toBe('Sixteenth <no-reply@sixteenth.test>')
      expect(mail?.text).toContain('http://sixteenth.test/invitation#abc-123_x')
      expect(mail?.text).toContain('Tom & Ana <Blasting>')
      expect(mail?.html).toContain('href="http://sixteenth.test/invitation#abc-123_x"')
      expect(mail?.html).toContain('Tom &amp; Ana &lt;Blasting&gt;')
      expect(mail?.html).not.toContain('<Blasting>')
    }
    expect(english?.html).toContain('<html lang="en">')
    expect(english?.text).toContain('May 10, 2026')
    expect(spanish?.html).toContain('<html lang="es">')
    expect(spanish?.text).toContain('10 de mayo de 2026')
  })

  it('is not kept once it was handed over, since its links are live', async () => {
    const mailServer = await runMailServer()
    const server = await start({ smtpUrl: mailServer.url })
    runMailer(server)
    queueInvitation(server, 'a@example.test')
    expect(readRow(server, 'a@example.test').text).toContain('abc-123_x')
    await waitForState(server, 'a@example.test', 'sent')
    expect(readRow(server, 'a@example.test')).toMatchObject({ text: '', html: '' })
  })

  it('waits while the mail server is down, and is delivered once when it is back', async () => {
    const port = await findDeadPort()
    const server = await start({ smtpUrl: `smtp://127.0.0.1:${port}` })
    runMailer(server)
    queueInvitation(server, 'a@example.test')
    await waitForAttempts(server, 'a@example.test', 1)
    expect(readRow(server, 'a@example.test')).toMatchObject({
      state: 'waiting',
      lastError: expect.stringContaining('ECONNREFUSED') as string,
      nextAttemptAt: new Date(clockMs + 30_000).toISOString(),
    })
    const mailServer = await runMailServer({}, port)
    await severalPolls()
    expect(mailServer.received).toHaveLength(0)

    clockMs += 30_000
    await waitForState(server, 'a@example.test', 'sent')
    clockMs += 2 * dayMs
    await severalPolls()
    expect(mailServer.received).toHaveLength(1)
  })

  it('outlives a restart', async () => {
    const port = await findDeadPort()
    const server = await start({ smtpUrl: `smtp://127.0.0.1:${port}` })
    const first = runMailer(server)
    queueInvitation(server, 'a@example.test')
    await waitForAttempts(server, 'a@example.test', 1)
    await first.stop()
    const mailServer = await runMailServer({}, port)
    clockMs += minuteMs
    runMailer(server)
    await waitForState(server, 'a@example.test', 'sent')
    expect(mailServer.received).toHaveLength(1)
  })
})

function refuseWith(responseCode: number): Error {
  return Object.assign(new Error('not now'), { responseCode })
}

describe('a mail server that refuses', () => {
  it('with a temporary answer is asked again later', async () => {
    let asked = 0
    const mailServer = await runMailServer({
      onRcptTo: (_address, _session, done) => {
        asked += 1
        done(asked === 1 ? refuseWith(451) : null)
      },
    })
    const server = await start({ smtpUrl: mailServer.url })
    runMailer(server)
    queueInvitation(server, 'a@example.test')
    await waitForAttempts(server, 'a@example.test', 1)
    expect(readRow(server, 'a@example.test').state).toBe('waiting')
    clockMs += minuteMs
    await waitForState(server, 'a@example.test', 'sent')
    expect(mailServer.received).toHaveLength(1)
    expect(asked).toBe(2)
  })

  it('the receiver for good is not asked again, and the next mail still goes', async () => {
    const mailServer = await runMailServer({
      onRcptTo: ({ address }, _session, done) => done(address.startsWith('gone') ? refuseWith(550) : null),
    })
    const server = await start({ smtpUrl: mailServer.url })
    runMailer(server)
    queueInvitation(server, 'gone@example.test')
    queueInvitation(server, 'here@example.test')
    await waitForState(server, 'gone@example.test', 'given-up')
    await waitForState(server, 'here@example.test', 'sent')
    expect(readRow(server, 'gone@example.test')).toMatchObject({
      attempts: 1,
      lastError: expect.stringContaining('550') as string,
      text: '',
      html: '',
    })
    const { length } = mailServer.received
    clockMs += dayMs
    await severalPolls()
    expect(mailServer.connections()).toBe(2)
    expect(length).toBe(1)
  })

  it('ourselves loses nothing: it is a matter of the operator’s', async () => {
    const mailServer = await runMailServer({
      onMailFrom: (_address, _session, done) => done(refuseWith(553)),
    })
    const server = await start({ smtpUrl: mailServer.url })
    runMailer(server)
    queueInvitation(server, 'a@example.test')
    await waitForAttempts(server, 'a@example.test', 1)
    expect(readRow(server, 'a@example.test')).toMatchObject({ state: 'waiting' })
    expect(readRow(server, 'a@example.test').text).not.toBe('')
  })

  it('or is not there is left alone ever longer, up to an hour, and for three days', async () => {
    const server = await start({ smtpUrl: `smtp://127.0.0.1:${await findDeadPort()}` })
    let turn = 0
    // The least and the most of what chance may take off.
    runMailer(server, () => (turn++ % 2 === 0 ? 0 : 0.999_999))
    queueInvitation(server, 'a@example.test')
    const begunMs = clockMs
    const waitsMs: number[] = []
    for (let attempts = 1; ; attempts += 1) {
      await waitForAttempts(server, 'a@example.test', attempts)
      const row = readRow(server, 'a@example.test')
      if (row.state !== 'waiting') break
      waitsMs.push(Date.parse(row.nextAttemptAt) - clockMs)
      clockMs = Date.parse(row.nextAttemptAt)
    }
    for (const [index, waitMs] of waitsMs.entries()) {
      const fullMs = Math.min(30_000 * 2 ** index, hourMs)
      expect(waitMs).toBeLessThanOrEqual(fullMs)
      expect(waitMs).toBeGreaterThanOrEqual(fullMs * 0.75)
      const before = waitsMs[index - 1]
      if (before !== undefined && fullMs < hourMs) expect(waitMs).toBeGreaterThan(before)
    }
    expect(new Set(waitsMs.slice(20)).size).toBe(2)
    expect(readRow(server, 'a@example.test')).toMatchObject({
      state: 'given-up',
      lastError: expect.stringContaining('ECONNREFUSED') as string,
    })
    expect(clockMs - begunMs).toBeGreaterThanOrEqual(3 * dayMs)
    expect(clockMs - begunMs).toBeLessThan(3 * dayMs + hourMs)
  })
})

describe('a connection that breaks', () => {
  it('half-way through the mail loses nothing, and the receiver can tell the second from the first', async () => {
    const seenIds: string[] = []
    let calls = 0
    let hangUp: (() => void) | undefined
    const mailServer = await runMailServer({
      onData: (stream: SMTPServerDataStream, _session: SMTPServerSession, done) => {
        const chunks: Buffer[] = []
        calls += 1
        const isFirst = calls === 1
        stream.on('data', (chunk: Buffer) => chunks.push(chunk))
        stream.on('end', () => {
          seenIds.push(/^message-id: (.*)$/im.exec(Buffer.concat(chunks).toString())?.[1] ?? '')
          if (isFirst) hangUp?.()
          else done()
        })
      },
    })
    const { createServer, connect } = await import('node:net')
    // In between stands a wire that can be cut.
    const wire = createServer((near) => {
      const far = connect(mailServer.port, '127.0.0.1')
      hangUp = () => {
        near.destroy()
        far.destroy()
      }
      near.pipe(far).pipe(near)
      near.on('error', () => far.destroy())
      far.on('error', () => near.destroy())
    })
    await new Promise<void>((resolve) => wire.listen(0, '127.0.0.1', resolve))
    ending.push(() => new Promise((resolve) => wire.close(() => resolve())))
    const { port } = wire.address() as { port: number }

    const server = await start({ smtpUrl: `smtp://127.0.0.1:${port}` })
    runMailer(server)
    queueInvitation(server, 'a@example.test')
    await waitForAttempts(server, 'a@example.test', 1)
    const { id, state } = readRow(server, 'a@example.test')
    expect(state).toBe('waiting')
    clockMs += minuteMs
    await waitForState(server, 'a@example.test', 'sent')
    expect(seenIds).toEqual([`<${id}@sixteenth.test>`, `<${id}@sixteenth.test>`])
  })

  it('does not keep the server from stopping', async () => {
    const mailServer = await runMailServer({ onRcptTo: () => {} })
    const server = await start({ smtpUrl: mailServer.url })
    const mailer = runMailer(server)
    queueInvitation(server, 'a@example.test')
    await vi.waitFor(() => expect(mailServer.connections()).toBe(1))
    const begun = performance.now()
    await mailer.stop()
    expect(performance.now() - begun).toBeLessThan(1000)
    expect(readRow(server, 'a@example.test')).toMatchObject({ state: 'waiting', attempts: 0 })
  })
})

describe('a mail that was accepted but could not be written down as sent', () => {
  async function acceptWhileUnwritable() {
    const mailServer = await runMailServer({
      onRcptTo: (_address, _session, done) => {
        server.database.connection.pragma('query_only = ON')
        done()
      },
    })
    const server = await start({ smtpUrl: mailServer.url })
    const mailer = runMailer(server)
    queueInvitation(server, 'a@example.test')
    await vi.waitFor(() => expect(mailServer.received).toHaveLength(1))
    await severalPolls()
    expect(readRow(server, 'a@example.test').state).toBe('waiting')
    return { server, mailer, mailServer }
  }

  it('is not sent over and over while the disk is full', async () => {
    const { server, mailServer } = await acceptWhileUnwritable()
    expect(mailServer.received).toHaveLength(1)
    server.database.connection.pragma('query_only = OFF')
    await waitForState(server, 'a@example.test', 'sent')
    expect(mailServer.received).toHaveLength(1)
  })

  it('is sent again by the next start, under the same id, rather than lost', async () => {
    const { server, mailer, mailServer } = await acceptWhileUnwritable()
    await mailer.stop()
    server.database.connection.pragma('query_only = OFF')
    runMailer(server)
    await vi.waitFor(() => expect(mailServer.received).toHaveLength(2))
    const [first, second] = mailServer.received.map(({ headers }) => headers['message-id'])
    expect(first).toMatch(/^<[0-9a-f-]{36}@sixteenth\.test>$/)
    expect(second).toBe(first)
  })
})

describe('without a mail server', () => {
  it('mails are kept to be read here', async () => {
    const server = await start()
    runMailer(server)
    queueInvitation(server, 'a@example.test')
    await waitForState(server, 'a@example.test', 'sent')
    expect(readRow(server, 'a@example.test').text).toContain('abc-123_x')
  })

  it('those that were kept lose their links once there is one', async () => {
    const server = await start()
    const mailer = runMailer(server)
    queueInvitation(server, 'a@example.test')
    await waitForState(server, 'a@example.test', 'sent')
    await mailer.stop()
    const mailServer = await runMailServer()
    server.context.config = { ...server.context.config, smtpUrl: mailServer.url }
    runMailer(server)
    expect(readRow(server, 'a@example.test')).toMatchObject({ text: '', html: '' })
    await severalPolls()
    expect(mailServer.received).toHaveLength(0)
  })

  it('production lets them wait, and says so once', async () => {
    const server = await start({ isProduction: true })
    const lines: string[] = []
    server.context.logger = pino(
      new Writable({
        write(chunk: Buffer, _encoding, done) {
          lines.push(chunk.toString())
          done()
        },
      }),
    )
    runMailer(server)
    queueInvitation(server, 'a@example.test')
    queueInvitation(server, 'b@example.test')
    await vi.waitFor(() => expect(lines).not.toHaveLength(0))
    await severalPolls()
    expect(lines.filter((line) => line.includes('SMTP_URL'))).toHaveLength(1)
    for (const to of ['a@example.test', 'b@example.test']) {
      expect(readRow(server, to)).toMatchObject({ state: 'waiting', attempts: 0 })
    }
  })
})
