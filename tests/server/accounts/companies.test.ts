import { auditPageSchema } from '#shared/contracts/people.ts'
import { randomUUID } from 'node:crypto'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { companySchema, sessionSchema, visitSchema } from '#shared/contracts/accounts.ts'
import { auditEntries, companies, sessions } from '../../../server/db/schema/index.ts'
import { endSessionsOfAccount } from '../../../server/services/sessions.ts'
import { askSignedIn, cookieOf, makeAccount } from '../../support/accounts.ts'
import { askWith, makeCompany, makePerson, makeSessionCookie } from '../../support/people.ts'
import { listErrors, readProblem } from '../../support/requests.ts'
import { startServer } from '../../support/server.ts'
import type { RunningServer } from '../../support/server.ts'

let server: RunningServer
beforeEach(async () => {
  server = await startServer()
})
afterEach(() => server.stop())

const input = { name: 'Second Yard', currency: 'MXN', language: 'es', timeZone: 'America/Hermosillo' }
const visitAs = async (cookie?: string) =>
  visitSchema.parse(await (await askWith(server.address, cookie)('GET', '/api/v1/visit')).json())

describe('one more company', () => {
  it('becomes the active one of whoever makes it, with every role', async () => {
    const person = makePerson(server, makeCompany(server), ['blaster'])
    const response = await person.ask('POST', '/api/v1/companies', { ...input, id: randomUUID() })
    expect(response.status).toBe(201)
    const session = sessionSchema.parse(await response.json())
    expect(session.company).toMatchObject(input)
    expect(session.roles).toEqual(['blaster', 'estimator', 'owner', 'admin'])
    expect((await visitAs(cookieOf(response))).session).toEqual(session)
  })

  it('is one, however often the same is sent; with other words under its id it is refused', async () => {
    const person = makePerson(server, makeCompany(server))
    const id = randomUUID()
    await person.ask('POST', '/api/v1/companies', { ...input, id })
    const again = await person.ask('POST', '/api/v1/companies', { ...input, id: id.toUpperCase() })
    expect(again.status).toBe(201)
    expect(server.database.queries.select().from(companies).all()).toHaveLength(2)
    const other = await person.ask('POST', '/api/v1/companies', {
      ...input,
      name: 'Third Yard',
      id,
    })
    expect((await readProblem(other)).code).toBe('id-in-use')
    const stranger = makePerson(server, makeCompany(server))
    expect((await stranger.ask('POST', '/api/v1/companies', { ...input, id })).status).toBe(409)
  })

  it('is refused after twenty', async () => {
    const person = makePerson(server, makeCompany(server))
    let { cookie } = person
    for (let count = 0; count < 19; count += 1) {
      const response = await askWith(server.address, cookie)('POST', '/api/v1/companies', {
        ...input,
        id: randomUUID(),
      })
      expect(response.status).toBe(201)
      cookie = cookieOf(response)
    }
    const refused = await askWith(server.address, cookie)('POST', '/api/v1/companies', {
      ...input,
      id: randomUUID(),
    })
    expect((await readProblem(refused)).code).toBe('too-many-records')
  })
})

describe('the active company', () => {
  it('is another of one’s own when one chooses it, and is remembered for the next sign-in', async () => {
    await makeAccount(server)
    const { cookie } = await askSignedIn(server, 'robin@ridge.test')
    const first = (await visitAs(cookie)).session?.company
    const made = await askWith(server.address, cookie)('POST', '/api/v1/companies', {
      ...input,
      id: randomUUID(),
    })
    const ask = askWith(server.address, cookieOf(made))
    const chosen = await ask('PUT', '/api/v1/session/company', { companyId: first?.id })
    expect(sessionSchema.parse(await chosen.json()).company).toEqual(first)
    const next = await askSignedIn(server, 'robin@ridge.test')
    expect((await visitAs(next.cookie)).session?.company?.name).toBe('Ridge Line')
  })

  it('is never another’s: that is not to be found', async () => {
    const person = makePerson(server, makeCompany(server))
    const foreign = makeCompany(server, { name: 'Foreign' })
    for (const companyId of [foreign.id, randomUUID()]) {
      const response = await person.ask('PUT', '/api/v1/session/company', { companyId })
      expect((await readProblem(response)).code).toBe('not-found')
    }
  })

  it('cannot be chosen in a session that was ended meanwhile', async () => {
    const person = makePerson(server, makeCompany(server))
    // The session is read with the request's head; this body comes after it has been ended.
    const encoder = new TextEncoder()
    const body = new ReadableStream<Uint8Array>({
      async start(controller) {
        controller.enqueue(encoder.encode('{'))
        await new Promise((resolve) => setTimeout(resolve, 150))
        endSessionsOfAccount(server.database.queries, person.accountId)
        controller.enqueue(encoder.encode(`"companyId":"${person.company.id}"}`))
        controller.close()
      },
    })
    const response = await fetch(`${server.address}/api/v1/session/company`, {
      method: 'PUT',
      headers: { 'content-type': 'application/json', cookie: person.cookie },
      body,
      duplex: 'half',
    } as RequestInit)
    expect(response.status).toBe(401)
    expect(server.database.queries.select().from(sessions).all()).toEqual([])
  })
})

describe('a page that shows another company than the session has', () => {
  it('changes nothing there, and is told', async () => {
    const person = makePerson(server, makeCompany(server))
    const change = (companyId: string) =>
      fetch(`${server.address}/api/v1/company`, {
        method: 'PUT',
        headers: {
          cookie: person.cookie,
          'content-type': 'application/json',
          'sixteenth-company': companyId,
        },
        body: JSON.stringify({ ...input, version: 1 }),
      })
    const problem = await readProblem(await change(makeCompany(server).id))
    expect([problem.status, problem.code]).toEqual([409, 'other-company'])
    expect(server.database.queries.select().from(auditEntries).all()).toEqual([])
    expect((await change(person.company.id)).status).toBe(200)
  })
})

describe('changing the company', () => {
  it('is noted with what was and what became', async () => {
    const person = makePerson(server, makeCompany(server), ['owner'])
    const response = await person.ask('PUT', '/api/v1/company', { ...input, language: 'en', version: 1 })
    expect(companySchema.parse(await response.json())).toEqual({
      ...input,
      language: 'en',
      id: person.company.id,
      version: 2,
    })
    const [entry] = server.database.queries.select().from(auditEntries).all()
    expect(entry).toMatchObject({ action: 'company.changed', actorName: person.name, subject: 'Second Yard' })
    expect(entry?.changes).toEqual({
      name: { from: 'Ridge Line Blasting', to: 'Second Yard' },
      currency: { from: 'USD', to: 'MXN' },
      timeZone: { from: 'America/Denver', to: 'America/Hermosillo' },
    })
  })

  it('that somebody else has changed meanwhile shows how it stands', async () => {
    const person = makePerson(server, makeCompany(server))
    await person.ask('PUT', '/api/v1/company', { ...input, version: 1 })
    const problem = await readProblem(await person.ask('PUT', '/api/v1/company', { ...input, version: 1 }))
    expect(problem.code).toBe('version-conflict')
    expect(problem.stored).toEqual({ ...input, id: person.company.id, version: 2 })
  })

  it('keeps to currencies and time zones that exist', async () => {
    const person = makePerson(server, makeCompany(server))
    const body = { ...input, currency: 'QQQ', timeZone: 'Mars/Base', version: 1 }
    const problem = await readProblem(await person.ask('PUT', '/api/v1/company', body))
    expect(listErrors(problem)).toEqual(['not-a-currency /currency', 'not-a-time-zone /timeZone'])
  })

  it.each(['blaster', 'estimator', 'admin'] as const)('is not for a mere %s', async (role) => {
    const person = makePerson(server, makeCompany(server), [role])
    expect((await person.ask('PUT', '/api/v1/company', { ...input, version: 1 })).status).toBe(403)
  })
})

describe('a visit', () => {
  it('knows nobody, or whoever is signed in, or somebody whom no company has', async () => {
    expect((await visitAs()).session).toBeNull()
    const person = makePerson(server, makeCompany(server), ['estimator'])
    const { session } = await visitAs(person.cookie)
    expect(session).toMatchObject({ account: { email: person.email }, roles: ['estimator'] })
    const cookie = makeSessionCookie(server, person.accountId, null)
    expect((await visitAs(cookie)).session).toMatchObject({ company: null, roles: [] })
  })

  it('shows a changed name and language', async () => {
    const person = makePerson(server, makeCompany(server), ['blaster'])
    const response = await person.ask('PUT', '/api/v1/account', { name: 'Alex Moor', language: 'es' })
    expect(sessionSchema.parse(await response.json()).account).toMatchObject({
      name: 'Alex Moor',
      language: 'es',
    })
    expect((await visitAs(person.cookie)).session?.account.name).toBe('Alex Moor')
  })

  it('is noted where the old name is known, with the address that stays', async () => {
    const company = makeCompany(server)
    const person = makePerson(server, company, ['blaster'], { name: 'Sam Sand' })
    const admin = makePerson(server, company)
    for (const name of ['Olga Owner', 'Olga Owner']) {
      await person.ask('PUT', '/api/v1/account', { name, language: 'en' })
    }
    const { items } = auditPageSchema.parse(await (await admin.ask('GET', '/api/v1/audit')).json())
    expect(items).toMatchObject([
      {
        action: 'account.renamed',
        actorName: 'Sam Sand',
        actorEmail: person.email,
        changes: { name: { from: 'Sam Sand', to: 'Olga Owner' } },
      },
    ])
  })

  it('offers neither demo nor mail page in production, off the own machine, or with a mail server', async () => {
    expect((await visitAs()).hasMailPage).toBe(true)
    for (const overrides of [
      { isProduction: true },
      { isLoopback: false },
      { smtpUrl: 'smtp://127.0.0.1:9' },
    ]) {
      await server.stop()
      server = await startServer(overrides)
      expect(await visitAs()).toEqual({ session: null, demoPeople: [], hasMailPage: false })
    }
  })
})
