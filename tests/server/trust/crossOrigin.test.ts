import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { problemSchema } from '#shared/contracts/problems.ts'
import { sendRaw } from '../../support/rawRequest.ts'
import type { RawAnswer } from '../../support/rawRequest.ts'
import { accessTable } from './accessTable.ts'
import type { AccessRow } from './accessTable.ts'
import { AccessWorld } from './accessWorld.ts'

let world: AccessWorld
beforeAll(async () => {
  world = await AccessWorld.make()
  await world.askAs('all')('GET', '/api/v1/visit')
}, 60_000)
afterAll(() => world.server.stop())

const methodOf = ({ route }: AccessRow) => route.split(' ')[0] ?? ''
const writing = accessTable.filter((row) => methodOf(row) !== 'GET')
const reading = accessTable.filter((row) => methodOf(row) === 'GET')
const json = { 'content-type': 'application/json' }

/** What a browser says of a request that a page of somebody else makes. */
const fromElsewhere: Record<string, Record<string, string>> = {
  'a script of another site': { ...json, origin: 'https://evil.example', 'sec-fetch-site': 'cross-site' },
  'a browser that says no more than the origin': { ...json, origin: 'https://evil.example' },
  'the same host at another port': { ...json, origin: 'http://127.0.0.1:1' },
  'a sister site': { ...json, 'sec-fetch-site': 'same-site' },
  'a page without an origin': { ...json, origin: 'null' },
  'a form': {
    'content-type': 'application/x-www-form-urlencoded',
    origin: 'https://evil.example',
    'sec-fetch-site': 'cross-site',
    'sec-fetch-mode': 'navigate',
  },
  'a form in a sandboxed frame': {
    'content-type': 'text/plain',
    origin: 'null',
    'sec-fetch-site': 'cross-site',
  },
}

/** What a form can send as without asking first: https://fetch.spec.whatwg.org/#cors-safelisted-request-header */
const formTypes = ['application/x-www-form-urlencoded', 'multipart/form-data; boundary=x', 'text/plain']

async function send(row: AccessRow, headers: Record<string, string>): Promise<RawAnswer> {
  const { path, body } = await row.ask(world, 'all')
  const cookie = world.makeCookie('all')
  const writes = world.countWrites()
  const answer = await sendRaw(world.server.address, methodOf(row), path, {
    headers: { cookie, ...headers },
    ...(body !== undefined && { body: JSON.stringify(body) }),
  })
  if (answer.status >= 400) expect(world.countWrites()).toBe(writes)
  return answer
}

const codeOf = (answer: RawAnswer) => problemSchema.parse(JSON.parse(answer.text)).code

describe.each(writing.map((row) => [row.route, row] as const))('%s', (_route, row) => {
  it.each(Object.entries(fromElsewhere))(
    'is refused to %s, and nothing is written',
    async (_name, headers) => {
      const answer = await send(row, headers)
      expect(answer.status).toBe(403)
      expect(codeOf(answer)).toBe('cross-origin')
      expect(answer.headers).not.toHaveProperty('set-cookie')
    },
  )

  it('takes no body as a form sends it, even where a browser keeps its origin to itself', async () => {
    for (const type of formTypes) {
      const asked = await row.ask(world, 'all')
      if (asked.body === undefined) continue
      const answer = await send(row, { 'content-type': type })
      expect(answer.status).toBe(415)
    }
  })
})

it('the pages of the site itself may write', async () => {
  const row = writing.find(({ route }) => route === 'POST /api/v1/sites')
  if (!row) throw new Error('The route is gone.')
  const { address } = world.server
  const own: Record<string, string>[] = [
    { origin: address, 'sec-fetch-site': 'same-origin' },
    { origin: address },
    {},
  ]
  for (const headers of own) expect((await send(row, { ...json, ...headers })).status).toBe(201)
})

it('a request for permission from another site gets none', async () => {
  for (const row of [...writing, ...reading]) {
    const { path } = await row.ask(world, 'all')
    const answer = await sendRaw(world.server.address, 'OPTIONS', path, {
      headers: {
        origin: 'https://evil.example',
        'access-control-request-method': methodOf(row),
        'access-control-request-headers': 'content-type',
      },
    })
    const granted = Object.keys(answer.headers).filter((name) => name.startsWith('access-control-'))
    expect(granted, row.route).toEqual([])
  }
})

it('what is read with somebody’s cookie is not shown to the page of another site', async () => {
  for (const row of reading) {
    const { path } = await row.ask(world, 'all')
    const headers = { origin: 'https://evil.example', cookie: world.makeCookie('all') }
    const answer = await sendRaw(world.server.address, 'GET', path, { headers })
    const granted = Object.keys(answer.headers).filter((name) => name.startsWith('access-control-'))
    expect(granted, row.route).toEqual([])
    expect(answer.headers['cross-origin-resource-policy'], row.route).toBe('same-origin')
  }
})

it('the cookie goes along to no other site’s form, and no script reads it', async () => {
  const body = JSON.stringify({ email: world.bystanderEmail, password: 'seventeen wet hoses' })
  const answer = await sendRaw(world.server.address, 'POST', '/api/v1/session', { headers: json, body })
  expect(answer.status).toBe(200)
  const [cookie = ''] = answer.headers['set-cookie'] ?? []
  expect(cookie).toMatch(/; HttpOnly/)
  expect(cookie).toMatch(/; SameSite=Lax/)
})
