import { request } from 'node:http'
import { afterEach, describe, expect, it } from 'vitest'
import { keptMailsSchema } from '#shared/contracts/mails.ts'
import type { Config } from '../../../server/config.ts'
import { queueMail } from '../../../server/email/queueMail.ts'
import { startServer } from '../../support/server.ts'
import type { RunningServer } from '../../support/server.ts'

let server: RunningServer
let clockMs = Date.parse('2026-05-03T15:00:00.000Z')
afterEach(() => server.stop())

async function startWith(overrides: Partial<Config> = {}, mailCount = 1): Promise<void> {
  server = await startServer(overrides, () => new Date(clockMs))
  const { context, database } = server
  for (let number = 1; number <= mailCount; number += 1) {
    clockMs += 1000
    const mail = {
      to: `a${number}@example.test`,
      subject: `Mail ${number}`,
      text: 'link#x',
      html: '<p>link#x</p>',
    }
    database.transact((writer) => queueMail(writer, context, mail))
  }
}

/** With headers that a browser or fetch would not let one choose. */
function ask(headers: Record<string, string> = {}): Promise<{ status: number; text: string }> {
  return new Promise((resolve, reject) => {
    const asking = request(`${server.address}/api/v1/mails`, { headers }, (response) => {
      let text = ''
      response.on('data', (chunk: Buffer) => (text += chunk.toString()))
      response.on('end', () => resolve({ status: response.statusCode ?? 0, text }))
    })
    asking.on('error', reject).end()
  })
}

describe('mails that went nowhere', () => {
  it('are read on the own machine, the newest fifty, newest first', async () => {
    await startWith({}, 52)
    const { status, text } = await ask()
    expect(status).toBe(200)
    const { mails } = keptMailsSchema.parse(JSON.parse(text))
    expect(mails.map(({ subject }) => subject)).toEqual(
      Array.from({ length: 50 }, (_, index) => `Mail ${52 - index}`),
    )
    expect(mails[0]).toMatchObject({ to: 'a52@example.test', text: 'link#x', html: '<p>link#x</p>' })
  })

  it.each([
    ['in production', { isProduction: true }],
    ['where others can reach the server', { isLoopback: false }],
    ['where a mail server takes them', { smtpUrl: 'smtp://127.0.0.1:1' }],
  ])('are not there %s', async (_where, overrides) => {
    await startWith(overrides)
    const { status, text } = await ask()
    expect(status).toBe(404)
    expect(text).not.toContain('link#x')
  })

  it.each(['localhost:3000', '127.0.0.1:3000', '[::1]:3000', 'localhost'])('are told to %s', async (host) => {
    await startWith()
    expect((await ask({ host })).status).toBe(200)
  })

  it.each([
    'rebound.example.test:3000',
    'localhost.example.test',
    '127.0.0.1.example.test:3000',
    'example.test@localhost',
    '0.0.0.0:3000',
  ])('are not told to a page that calls us %s', async (host) => {
    await startWith()
    const { status, text } = await ask({ host })
    expect(status).toBe(404)
    expect(text).not.toContain('link#x')
  })

  it.each(['x-forwarded-for', 'forwarded', 'via'])('are not told through a proxy (%s)', async (name) => {
    await startWith()
    expect((await ask({ [name]: '203.0.113.9' })).status).toBe(404)
  })
})
