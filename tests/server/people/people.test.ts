import { randomUUID } from 'node:crypto'
import { request } from 'node:http'
import { eq } from 'drizzle-orm'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { auditPageSchema, peopleSchema, personSchema } from '#shared/contracts/people.ts'
import type { Person } from '#shared/contracts/people.ts'
import { roles as everyRole } from '#shared/contracts/permissions.ts'
import { memberships, sessions } from '../../../server/db/schema/index.ts'
import { endSessionsOfAccount } from '../../../server/services/sessions.ts'
import { makeSiteBody } from '../../support/fleet.ts'
import { makeCompany, makePerson, makeSessionCookie, askWith } from '../../support/people.ts'
import type { TestCompany, TestPerson } from '../../support/people.ts'
import { readProblem } from '../../support/requests.ts'
import { startServer } from '../../support/server.ts'
import type { RunningServer } from '../../support/server.ts'

let server: RunningServer
let company: TestCompany
let admin: TestPerson

beforeEach(async () => {
  server = await startServer()
  company = makeCompany(server)
  admin = makePerson(server, company, everyRole, { name: 'Ada Admin' })
})
afterEach(() => server.stop())

async function list(asker: TestPerson) {
  const response = await asker.ask('GET', '/api/v1/people')
  expect(response.status).toBe(200)
  return peopleSchema.parse(await response.json())
}

function change(asker: TestPerson, person: TestPerson, body: object) {
  return asker.ask('PUT', `/api/v1/people/${person.membershipId}`, body)
}

async function changed(response: Response): Promise<Person> {
  expect(response.status).toBe(200)
  return personSchema.parse(await response.json())
}

async function refused(response: Response) {
  const { status, code, detail, stored } = await readProblem(response)
  return { answer: `${status} ${code}`, detail, stored }
}

async function readAudit(asker: TestPerson) {
  const response = await asker.ask('GET', '/api/v1/audit')
  return auditPageSchema.parse(await response.json()).items
}

describe('the people of a company', () => {
  it('are listed with what they may and when they were last there, and nobody else', async () => {
    const blaster = makePerson(server, company, ['blaster'], { name: 'Bo Blaster' })
    makePerson(server, makeCompany(server), everyRole, { name: 'Ned Next-Door' })
    await blaster.ask('GET', '/api/v1/fleet')
    const { people, invitations } = await list(admin)
    expect(invitations).toEqual([])
    expect(people.map(({ name, roles, state }) => ({ name, roles, state }))).toEqual([
      { name: 'Ada Admin', roles: [...everyRole], state: 'active' },
      { name: 'Bo Blaster', roles: ['blaster'], state: 'active' },
    ])
    const [ada, bo] = people
    expect(ada).toMatchObject({ id: admin.membershipId, email: admin.email, version: 1 })
    expect(Date.parse(bo?.lastSeenAt ?? '')).toBeGreaterThan(Date.now() - 60_000)
  })

  it.each([['blaster'], ['estimator'], ['owner']] as const)('are not for a %s', async (role) => {
    const asker = makePerson(server, company, [role])
    expect((await refused(await asker.ask('GET', '/api/v1/people'))).answer).toBe('403 forbidden')
    const escalation = { version: 1, roles: ['admin'] }
    expect((await refused(await change(asker, asker, escalation))).answer).toBe('403 forbidden')
  })

  it('of another company are not there, whoever asks', async () => {
    const stranger = makePerson(server, makeCompany(server))
    const attempt = { version: 1, state: 'deactivated' }
    expect((await refused(await change(stranger, admin, attempt))).answer).toBe('404 not-found')
    const unknown = await admin.ask('PUT', `/api/v1/people/${randomUUID()}`, attempt)
    expect((await refused(unknown)).answer).toBe('404 not-found')
    expect((await list(admin)).people[0]?.state).toBe('active')
  })
})

describe('changing what somebody may', () => {
  it('holds with their next request, and is noted', async () => {
    const person = makePerson(server, company, ['blaster'])
    expect((await person.ask('GET', '/api/v1/audit')).status).toBe(403)
    const after = await changed(await change(admin, person, { version: 1, roles: ['admin', 'blaster'] }))
    expect(after).toMatchObject({ roles: ['blaster', 'admin'], version: 2, state: 'active' })
    const [entry] = await readAudit(person)
    expect(entry).toMatchObject({
      actorName: 'Ada Admin',
      action: 'person.roles-changed',
      subject: person.email,
      subjectId: person.membershipId,
      changes: { roles: { from: ['blaster'], to: ['blaster', 'admin'] } },
    })
  })

  it('to what it is already changes and notes nothing', async () => {
    const person = makePerson(server, company, ['blaster'])
    const after = await changed(
      await change(admin, person, { version: 1, roles: ['blaster'], state: 'active' }),
    )
    expect(after.version).toBe(1)
    expect(await readAudit(admin)).toEqual([])
  })

  it('by two admins at once: the second is shown what the first did', async () => {
    const second = makePerson(server, company, ['admin'])
    const person = makePerson(server, company, ['blaster'])
    const responses = await Promise.all([
      change(admin, person, { version: 1, roles: ['estimator'] }),
      change(second, person, { version: 1, roles: ['owner'] }),
    ])
    expect(responses.map(({ status }) => status).sort()).toEqual([200, 409])
    const winner = personSchema.parse(await responses.find(({ ok }) => ok)?.json())
    const loser = responses.find(({ ok }) => !ok)
    const { answer, stored } = await refused(loser as Response)
    expect(answer).toBe('409 version-conflict')
    expect(personSchema.parse(stored)).toEqual(winner)
    expect(await readAudit(admin)).toHaveLength(1)
  })

  it.each([
    ['no role', { version: 1, roles: [] }, 'too-few /roles'],
    ['a role twice', { version: 1, roles: ['admin', 'admin'] }, 'invalid /roles'],
    ['a role there is not', { version: 1, roles: ['king'] }, 'not-a-choice /roles/0'],
    ['no version', { roles: ['admin'] }, 'required /version'],
    ['another field', { version: 1, email: 'x@example.test' }, 'unknown-field /email'],
  ])('takes not %s', async (_what, body, error) => {
    const problem = await readProblem(await change(admin, admin, body))
    expect(problem.status).toBe(422)
    expect(problem.errors?.map(({ code, path }) => `${code} ${path}`)).toContain(error)
  })
})

describe('letting somebody go', () => {
  it('ends their sessions here at once, and leaves those elsewhere', async () => {
    const person = makePerson(server, company, ['estimator'])
    const other = makeCompany(server, { name: 'Other Company' })
    const joinedAt = new Date().toISOString()
    server.database.queries
      .insert(memberships)
      .values({
        id: randomUUID(),
        companyId: other.id,
        accountId: person.accountId,
        roles: ['admin'],
        state: 'active',
        joinedAt,
        version: 1,
      })
      .run()
    const elsewhere = askWith(server.address, makeSessionCookie(server, person.accountId, other.id))
    expect((await person.ask('GET', '/api/v1/fleet')).status).not.toBe(401)

    const after = await changed(await change(admin, person, { version: 1, state: 'deactivated' }))
    expect(after).toMatchObject({ state: 'deactivated', roles: ['estimator'], version: 2 })
    const kept = server.database.queries
      .select()
      .from(sessions)
      .where(eq(sessions.accountId, person.accountId))
      .all()
    expect(kept.map(({ companyId }) => companyId)).toEqual([other.id])
    expect((await refused(await person.ask('GET', '/api/v1/people'))).answer).toBe('401 not-signed-in')
    expect((await elsewhere('GET', '/api/v1/people')).status).toBe(200)
    const [entry] = await readAudit(admin)
    expect(entry).toMatchObject({
      action: 'person.deactivated',
      subject: person.email,
      changes: { state: { from: 'active', to: 'deactivated' } },
    })
  })

  it('holds against a session that names the company all the same', async () => {
    const person = makePerson(server, company, ['admin'])
    await changed(await change(admin, person, { version: 1, state: 'deactivated' }))
    const ask = askWith(server.address, makeSessionCookie(server, person.accountId, company.id))
    expect((await refused(await ask('GET', '/api/v1/people'))).answer).toBe('403 forbidden')
  })

  it('can be undone: they sign in again and have what they had', async () => {
    const person = makePerson(server, company, ['admin'])
    await changed(await change(admin, person, { version: 1, state: 'deactivated' }))
    await changed(await change(admin, person, { version: 2, state: 'active' }))
    const ask = askWith(server.address, makeSessionCookie(server, person.accountId, company.id))
    expect((await ask('GET', '/api/v1/people')).status).toBe(200)
    const actions = (await readAudit(admin)).map(({ action }) => action)
    expect(actions).toEqual(['person.reactivated', 'person.deactivated'])
  })

  it('together with new roles notes both', async () => {
    const person = makePerson(server, company, ['admin'])
    await changed(await change(admin, person, { version: 1, state: 'deactivated', roles: ['blaster'] }))
    const actions = (await readAudit(admin)).map(({ action }) => action)
    expect(actions.sort()).toEqual(['person.deactivated', 'person.roles-changed'])
  })
})

describe('the last one', () => {
  it.each([
    ['admin', 'last-admin', ['blaster', 'estimator', 'owner']],
    ['owner', 'last-owner', ['blaster', 'estimator', 'admin']],
  ] as const)('that is %s keeps the role', async (_role, code, left) => {
    const { answer, detail } = await refused(await change(admin, admin, { version: 1, roles: left }))
    expect(answer).toBe(`409 ${code}`)
    expect(detail).toContain('Ada Admin')
    expect((await list(admin)).people[0]?.roles).toEqual([...everyRole])
  })

  it('cannot be let go, also where others with the role are out already', async () => {
    const out = makePerson(server, company, ['admin', 'owner'])
    await changed(await change(admin, out, { version: 1, state: 'deactivated' }))
    const { answer } = await refused(await change(admin, admin, { version: 1, state: 'deactivated' }))
    expect(answer).toBe('409 last-admin')
    expect((await admin.ask('GET', '/api/v1/people')).status).toBe(200)
  })

  it('owner cannot be let go by an admin who is not one', async () => {
    const otherAdmin = makePerson(server, company, ['admin'])
    const attempt = { version: 1, state: 'deactivated' }
    expect((await refused(await change(otherAdmin, admin, attempt))).answer).toBe('409 last-owner')
  })

  it('may go once somebody else has the role', async () => {
    const second = makePerson(server, company, ['blaster'])
    await changed(await change(admin, second, { version: 1, roles: ['owner', 'admin'] }))
    await changed(await change(admin, admin, { version: 1, state: 'deactivated' }))
    expect((await second.ask('GET', '/api/v1/people')).status).toBe(200)
    expect((await admin.ask('GET', '/api/v1/people')).status).toBe(401)
  })

  it('remains when two admins take the role from each other at once', async () => {
    const owner = makePerson(server, company, ['owner'])
    const second = makePerson(server, company, ['admin'])
    const responses = await Promise.all([
      change(admin, second, { version: 1, roles: ['blaster'] }),
      change(second, admin, { version: 1, roles: ['blaster'] }),
    ])
    const outcomes = responses.map(({ status }) => status).sort()
    expect(outcomes[0]).toBe(200)
    expect([403, 409]).toContain(outcomes[1])
    const left = server.database.queries
      .select()
      .from(memberships)
      .where(eq(memberships.companyId, owner.company.id))
      .all()
    expect(left.filter(({ roles }) => roles.includes('admin'))).toHaveLength(1)
  })
})

describe('while a request is on its way', () => {
  /** Sends the head and a little of the body, which is enough to be let in, and the rest after something has happened. */
  async function askSlowly(
    { cookie }: TestPerson,
    [method, path, record]: [method: string, path: string, record: object],
    happens: () => unknown,
  ): Promise<number | undefined> {
    const body = JSON.stringify(record)
    const headers = { cookie, 'content-type': 'application/json', 'content-length': body.length }
    const asking = request(server.address + path, { method, headers })
    const status = new Promise<number | undefined>((resolve, reject) => {
      asking.on('response', (response) => {
        response.resume()
        resolve(response.statusCode)
      })
      asking.on('error', reject)
    })
    asking.write(body.slice(0, 5))
    await new Promise((resolve) => setTimeout(resolve, 100))
    await happens()
    asking.end(body.slice(5))
    return status
  }

  it('an admin who is let go gives nobody anything any more', async () => {
    const second = makePerson(server, company, ['admin'])
    const friend = makePerson(server, company, ['blaster'])
    const status = await askSlowly(
      second,
      ['PUT', `/api/v1/people/${friend.membershipId}`, { version: 1, roles: ['admin'] }],
      async () => changed(await change(admin, second, { version: 1, state: 'deactivated' })),
    )
    expect(status).toBe(403)
    const { people } = await list(admin)
    expect(people.find(({ id }) => id === friend.membershipId)?.roles).toEqual(['blaster'])
  })

  it('whose sessions are ended, as by a new password, writes nothing any more', async () => {
    const site = makeSiteBody()
    const post: [string, string, object] = ['POST', '/api/v1/sites', site]
    const end = () => endSessionsOfAccount(server.database.queries, admin.accountId)
    expect(await askSlowly(admin, post, end)).toBe(401)
    const again = askWith(server.address, makeSessionCookie(server, admin.accountId, company.id))
    expect((await again('GET', `/api/v1/sites/${site.id}`)).status).toBe(404)
  })
})
