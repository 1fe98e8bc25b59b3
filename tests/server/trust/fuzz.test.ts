import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { problemSchema } from '#shared/contracts/problems.ts'
import { makeCompressorBody, makeRigBody, makeSiteBody } from '../../support/fleet.ts'
import { makeFuzzRequest } from '../../support/fuzz.ts'
import type { Description, FuzzRequest, Operation } from '../../support/fuzz.ts'
import type { SchemaSource } from '../../support/jsonSchema.ts'
import { makeCompany, makePerson, makeSessionCookie } from '../../support/people.ts'
import type { TestPerson } from '../../support/people.ts'
import { makeRandom } from '../../support/random.ts'
import { sendRaw } from '../../support/rawRequest.ts'
import type { RawAnswer } from '../../support/rawRequest.ts'
import { startServer } from '../../support/server.ts'
import type { RunningServer } from '../../support/server.ts'

/** npm run fuzz asks for more. */
const perRoute = Number(process.env['FUZZ_PER_ROUTE'] ?? 40)
const seed = Number(process.env['FUZZ_SEED'] ?? 16)
const atOnce = 8
const timeoutMs = 10_000

/* The routes are known only to a running server: one tells them, and a fresh one takes the blows. */
const telling = await startServer()
const description = (await (await fetch(`${telling.address}/api/openapi.json`)).json()) as Description
await telling.stop()
const routes = Object.entries(description.paths).flatMap(([path, methods]) =>
  Object.entries(methods).map(
    ([method, operation]) => [`${method} ${path}`, method, path, operation] as const,
  ),
)

let server: RunningServer
let person: TestPerson
let known: Record<string, unknown>
const tally = new Map<number, number>()
beforeAll(async () => {
  // Each request comes from an address of its own, else the limits would take all blows but the first.
  server = await startServer({ trustProxy: true })
  // What is lost with the machine is lost: the disk would set the pace.
  server.database.connection.pragma('synchronous = OFF')
  const company = makeCompany(server)
  person = makePerson(server, company)
  const site = makeSiteBody()
  const compressor = makeCompressorBody()
  const rig = makeRigBody({ compressorId: compressor.id, siteId: site.id })
  for (const [kind, body] of Object.entries({ sites: site, compressors: compressor, rigs: rig })) {
    expect((await person.ask('POST', `/api/v1/${kind}`, body)).status).toBe(201)
  }
  const invitationId = crypto.randomUUID()
  const invitation = { id: invitationId, email: 'kim@example.test', roles: ['blaster'], language: 'en' }
  expect((await person.ask('POST', '/api/v1/people/invitations', invitation)).status).toBe(201)
  known = {
    rigId: rig.id,
    siteId: site.id,
    compressorId: compressor.id,
    personId: makePerson(server, company, ['blaster']).membershipId,
    invitationId,
    companyId: company.id,
    version: 1,
    timeZone: 'America/Denver',
    currency: 'USD',
    csv: 'name,rated_free_air_m3_min\nA,1\n',
  }
}, 60_000)
afterAll(() => server.stop())

/** Mostly signed in, with a session of its own, since some of what is asked ends it. */
function addCaller(request: FuzzRequest, random: () => number): FuzzRequest {
  const address = `10.${[0, 0, 0].map(() => Math.floor(random() * 256)).join('.')}`
  const isSignedIn = random() < 0.85
  const cookie = isSignedIn ? makeSessionCookie(server, person.accountId, person.company.id) : undefined
  const headers = { 'x-forwarded-for': address, ...(cookie && { cookie }), ...request.headers }
  return { ...request, headers }
}

/** Null where the answer is as it may be. */
function findFault(operation: Operation, answer: RawAnswer): string | null {
  const { status, headers, text } = answer
  const isDeclared = String(status) in operation.responses
  if (status >= 500 && !(status === 503 && isDeclared)) return `answered ${status}: ${text.slice(0, 300)}`
  if (status < 400) return isDeclared || status === 304 ? null : `answered ${status}, which is not described`
  if (!String(headers['content-type']).startsWith('application/problem+json')) {
    return `refused with ${status} as ${String(headers['content-type'])}: ${text.slice(0, 200)}`
  }
  const problem = problemSchema.safeParse(JSON.parse(text))
  if (!problem.success) return `refused with ${status} in another shape: ${text.slice(0, 300)}`
  // Beyond a route's own refusals any address may be unreadable or not there.
  return isDeclared || status === 400 || status === 404
    ? null
    : `refused with ${status}, which is not described`
}

function describeRequest({ method, path, headers, body = '' }: FuzzRequest): string {
  const { cookie, ...others } = headers
  const isOwn = cookie?.startsWith('sixteenth=s%3A') && cookie.length < 200
  const shown = JSON.stringify({ ...others, ...(cookie && { cookie: isOwn ? 'own' : cookie.slice(0, 80) }) })
  return `${method} ${path.slice(0, 200)} ${shown.slice(0, 300)} ${body.slice(0, 600)}`
}

async function fuzzRoute(method: string, path: string, operation: Operation): Promise<string[]> {
  const random = makeRandom(
    [...`${method} ${path}`].reduce((sum, letter) => sum * 31 + letter.charCodeAt(0), seed),
  )
  const source: SchemaSource = { schemas: description.components.schemas, random, known }
  const faults: string[] = []
  let left = perRoute
  const worker = async () => {
    while (left > 0) {
      left -= 1
      const request = addCaller(makeFuzzRequest(method, path, operation, source), random)
      try {
        const { headers, body } = request
        const options = { headers, timeoutMs, ...(body !== undefined && { body }) }
        const answer = await sendRaw(server.address, request.method, request.path, options)
        tally.set(answer.status, (tally.get(answer.status) ?? 0) + 1)
        const fault = findFault(operation, answer)
        if (fault) faults.push(`${fault}\n  ${describeRequest(request)}`)
      } catch (error) {
        faults.push(`${String(error)}\n  ${describeRequest(request)}`)
      }
    }
  }
  await Promise.all(Array.from({ length: atOnce }, worker))
  return faults
}

describe(`${perRoute} bad requests, seed ${seed}, to`, () => {
  it.each(routes)(
    '%s are each answered in time and in order',
    async (_name, method, path, operation) => {
      const faults = await fuzzRoute(method, path, operation)
      expect(faults.slice(0, 5).join('\n'), `${faults.length} faults`).toBe('')
    },
    60_000 + perRoute * 200,
  )

  it('many of them got past the guard, to the contract and beyond it', () => {
    const share = (status: number) => (tally.get(status) ?? 0) / (routes.length * perRoute)
    console.log(JSON.stringify(Object.fromEntries([...tally].toSorted(([one], [other]) => one - other))))
    expect(share(422)).toBeGreaterThan(0.1)
    expect(share(200) + share(201) + share(202) + share(204)).toBeGreaterThan(0.1)
  })

  it('the server is there afterwards, whole, and no object has become another', async () => {
    expect((await fetch(`${server.address}/api/v1/health`)).status).toBe(200)
    expect(server.database.connection.pragma('integrity_check', { simple: true })).toBe('ok')
    expect(server.database.connection.pragma('foreign_key_check')).toEqual([])
    expect(({} as Record<string, unknown>)['isAdmin']).toBeUndefined()
    expect((await person.ask('GET', '/api/v1/fleet')).status).toBe(200)
  })
})
