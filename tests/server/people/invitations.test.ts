import { randomUUID } from 'node:crypto'
import { and, eq } from 'drizzle-orm'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { invitationViewSchema, sessionSchema } from '#shared/contracts/accounts.ts'
import { auditPageSchema, invitationSchema, peopleSchema } from '#shared/contracts/people.ts'
import type { Invitation, InvitationInput } from '#shared/contracts/people.ts'
import { accounts, emails, invitations, memberships } from '../../../server/db/schema/index.ts'
import { startMailer } from '../../../server/email/mailer.ts'
import { startMailServer } from '../../support/mailServer.ts'
import { askWith, makeCompany, makePerson, makeSessionCookie } from '../../support/people.ts'
import type { TestCompany, TestPerson } from '../../support/people.ts'
import { listErrors, readProblem } from '../../support/requests.ts'
import { startServer } from '../../support/server.ts'
import type { RunningServer } from '../../support/server.ts'

const dayMs = 24 * 3600_000
const password = 'seven copper whips'

let clockMs: number
let server: RunningServer
let company: TestCompany
let admin: TestPerson

beforeEach(async () => {
  clockMs = Date.now()
  server = await startServer({}, () => new Date(clockMs))
  company = makeCompany(server)
  admin = makePerson(server, company, ['admin'], { name: 'Ada Admin' })
})
afterEach(() => server.stop())

/** Longer than the session of a test lasts: the admin signs in again. */
function pass(ms: number): void {
  clockMs += ms
  admin.ask = askWith(server.address, makeSessionCookie(server, admin.accountId, company.id))
}

const visitor = (method: string, path: string, body?: unknown) => askWith(server.address)(method, path, body)

function makeInput(overrides: Partial<InvitationInput> = {}): InvitationInput {
  return { id: randomUUID(), email: 'new@example.test', roles: ['blaster'], language: 'en', ...overrides }
}

function invite(input: InvitationInput, asker = admin) {
  return asker.ask('POST', '/api/v1/people/invitations', input)
}

async function invited(response: Response, status = 201): Promise<Invitation> {
  expect(response.status).toBe(status)
  return invitationSchema.parse(await response.json())
}

function act(id: string, verb: 'resend' | 'withdraw', asker = admin) {
  return asker.ask('POST', `/api/v1/people/invitations/${id}/${verb}`)
}

/** The token of the link in the last mail to an address, as its receiver has it. */
function readToken(to: string): string {
  const rows = server.database.queries.select().from(emails).where(eq(emails.to, to)).all()
  const text = rows.at(-1)?.text ?? ''
  const token = /\/invitation#([\w-]+)/.exec(text)?.[1]
  if (token === undefined) throw new Error(`No invitation was sent to ${to}`)
  return token
}

const view = (token: string) => visitor('POST', '/api/v1/invitations/view', { token })
const accept = (body: object, ask = visitor) => ask('POST', '/api/v1/invitations/accept', body)

async function refused(response: Response): Promise<string> {
  const { status, code } = await readProblem(response)
  return `${status} ${code}`
}

async function readActions(): Promise<string[]> {
  const response = await admin.ask('GET', '/api/v1/audit')
  return auditPageSchema.parse(await response.json()).items.map(({ action }) => action)
}

async function readPeople() {
  return peopleSchema.parse(await (await admin.ask('GET', '/api/v1/people')).json())
}

function cookieOf(response: Response): string {
  return response.headers.getSetCookie()[0]?.split(';')[0] ?? ''
}

describe('an invitation', () => {
  it('waits for seven days, and goes out by mail with its link', async () => {
    const input = makeInput({ roles: ['estimator', 'blaster'], language: 'es' })
    const invitation = await invited(await invite(input))
    expect(invitation).toMatchObject({
      id: input.id,
      email: 'new@example.test',
      roles: ['blaster', 'estimator'],
      language: 'es',
      invitedBy: 'Ada Admin',
      state: 'pending',
      version: 1,
    })
    expect(Date.parse(invitation.expiresAt)).toBe(clockMs + 7 * dayMs)
    expect((await readPeople()).invitations).toEqual([invitation])
    const [mail] = server.database.queries.select().from(emails).all()
    expect(mail).toMatchObject({ to: 'new@example.test', state: 'waiting' })
    expect(mail?.html).toContain('lang="es"')
    expect(mail?.text).toContain(`${server.context.publicUrl}/invitation#`)
  })

  it('leaves no token in the database but in the mail that waits, nor in the audit log', async () => {
    await invited(await invite(makeInput()))
    const token = readToken('new@example.test')
    const { connection } = server.database
    const tables = connection
      .prepare("select name from sqlite_master where type = 'table' and name <> 'emails'")
      .pluck()
      .all() as string[]
    expect(tables).toContain('invitations')
    for (const table of tables) {
      const rows = JSON.stringify(connection.prepare(`select * from "${table}"`).all())
      expect(rows, table).not.toContain(token)
    }
  })

  it('is one, however often the same body is sent, and one mail', async () => {
    const input = makeInput()
    const first = await invited(await invite(input))
    expect(await invited(await invite(input))).toEqual(first)
    expect(server.database.queries.select().from(emails).all()).toHaveLength(1)
    expect(await readActions()).toEqual(['invitation.sent'])
    expect(await refused(await invite({ ...input, roles: ['admin'] }))).toBe('409 id-in-use')
  })

  it('is not for somebody who is in the company already', async () => {
    const member = makePerson(server, company, ['blaster'])
    const problem = await readProblem(await invite(makeInput({ email: member.email.toUpperCase() })))
    expect(problem.status).toBe(422)
    expect(listErrors(problem)).toEqual(['name-in-use /email'])
  })

  it('is not made twice for one address: the one that waits can be sent again', async () => {
    await invited(await invite(makeInput()))
    const problem = await readProblem(await invite(makeInput()))
    expect(listErrors(problem)).toEqual(['name-in-use /email'])
    expect(problem.errors?.[0]?.message).toMatch(/send that one again/)
    pass(7 * dayMs)
    await invited(await invite(makeInput()))
  })

  it.each(['blaster', 'estimator', 'owner'] as const)('is not for a %s to give', async (role) => {
    const asker = makePerson(server, company, [role])
    expect(await refused(await invite(makeInput(), asker))).toBe('403 forbidden')
    const { id } = await invited(await invite(makeInput()))
    expect(await refused(await act(id, 'resend', asker))).toBe('403 forbidden')
    expect(await refused(await act(id, 'withdraw', asker))).toBe('403 forbidden')
  })

  it('of one company is not there for another', async () => {
    const { id } = await invited(await invite(makeInput()))
    const stranger = makePerson(server, makeCompany(server))
    expect(await refused(await act(id, 'resend', stranger))).toBe('404 not-found')
    expect(await refused(await act(id, 'withdraw', stranger))).toBe('404 not-found')
    // The same id there is another record: keys are a company's own.
    await invited(await invite(makeInput({ id, roles: ['admin'] }), stranger))
  })

  it('goes to at most a hundred addresses a day', async () => {
    for (let number = 1; number <= 100; number += 1) {
      await invited(await invite(makeInput({ email: `a${number}@example.test` })))
    }
    expect(await refused(await invite(makeInput()))).toBe('429 too-many-requests')
    pass(dayMs + 1)
    await invited(await invite(makeInput()))
  })
})

describe('sending an invitation again', () => {
  it('makes another link for seven more days; the earlier one is dead', async () => {
    const { id } = await invited(await invite(makeInput()))
    const old = readToken('new@example.test')
    pass(6 * dayMs)
    const renewed = await invited(await act(id, 'resend'), 200)
    expect(renewed).toMatchObject({ state: 'pending', version: 2 })
    expect(Date.parse(renewed.expiresAt)).toBe(clockMs + 7 * dayMs)
    const token = readToken('new@example.test')
    expect(token).not.toBe(old)
    expect(await refused(await view(old))).toBe('410 link-not-good')
    expect((await view(token)).status).toBe(200)
    expect(await readActions()).toEqual(['invitation.resent', 'invitation.sent'])
  })

  it('revives one that was too old', async () => {
    const { id } = await invited(await invite(makeInput()))
    pass(8 * dayMs)
    expect((await readPeople()).invitations[0]?.state).toBe('expired')
    expect((await invited(await act(id, 'resend'), 200)).state).toBe('pending')
    expect((await view(readToken('new@example.test'))).status).toBe(200)
  })

  it('is refused once it was withdrawn, and says how it stands', async () => {
    const { id } = await invited(await invite(makeInput()))
    await invited(await act(id, 'withdraw'), 200)
    const problem = await readProblem(await act(id, 'resend'))
    expect(problem).toMatchObject({ status: 409, code: 'version-conflict' })
    expect(invitationSchema.parse(problem.stored).state).toBe('withdrawn')
  })
})

describe('withdrawing an invitation', () => {
  it('kills its link, once however often it is done', async () => {
    const { id } = await invited(await invite(makeInput()))
    const first = await invited(await act(id, 'withdraw'), 200)
    expect(first).toMatchObject({ state: 'withdrawn', version: 2 })
    expect(await invited(await act(id, 'withdraw'), 200)).toEqual(first)
    expect(await refused(await view(readToken('new@example.test')))).toBe('410 link-not-good')
    expect((await readPeople()).invitations).toEqual([])
    expect(await readActions()).toEqual(['invitation.withdrawn', 'invitation.sent'])
  })

  it.each([[{ state: 'deactivated' }], [{ roles: ['blaster'] }]])(
    'comes by itself once whoever sent it may invite no more: %j',
    async (change) => {
      const other = makePerson(server, company, ['admin'])
      await invited(await invite(makeInput(), other))
      await invited(await invite(makeInput({ email: 'another@example.test' })))
      const answer = await admin.ask('PUT', `/api/v1/people/${other.membershipId}`, { version: 1, ...change })
      expect(answer.status).toBe(200)
      expect(await refused(await view(readToken('new@example.test')))).toBe('410 link-not-good')
      expect((await view(readToken('another@example.test'))).status).toBe(200)
    },
  )
})

describe('the link of an invitation', () => {
  it('says who invites to what, and whether the address has an account', async () => {
    await invited(await invite(makeInput()))
    const response = await view(readToken('new@example.test'))
    expect(invitationViewSchema.parse(await response.json())).toEqual({
      companyName: company.name,
      email: 'new@example.test',
      invitedBy: 'Ada Admin',
      roles: ['blaster'],
      hasAccount: false,
    })
    const known = makePerson(server, makeCompany(server))
    await invited(await invite(makeInput({ email: known.email })))
    const other = await view(readToken(known.email))
    expect(invitationViewSchema.parse(await other.json()).hasAccount).toBe(true)
  })

  it('is dead after seven days to the millisecond', async () => {
    await invited(await invite(makeInput()))
    const token = readToken('new@example.test')
    pass(7 * dayMs - 1)
    expect((await view(token)).status).toBe(200)
    pass(1)
    expect(await refused(await view(token))).toBe('410 link-not-good')
    expect(await refused(await accept({ token, name: 'Nora New', password }))).toBe('410 link-not-good')
  })

  it('that nobody was sent opens nothing', async () => {
    expect(await refused(await view('guessed'))).toBe('410 link-not-good')
  })
})

describe('accepting an invitation', () => {
  it('from the real mail makes an account, signs it in and lets it do what it may', async () => {
    const mailServer = await startMailServer()
    server.context.config = { ...server.context.config, smtpUrl: mailServer.url }
    const mailer = startMailer(server.context, { pollMs: 10 })
    await invited(await invite(makeInput({ language: 'es' })))
    while (mailServer.received.length === 0) await new Promise((resolve) => setTimeout(resolve, 10))
    await mailer.stop()
    await mailServer.stop()
    const token = /\/invitation#([\w-]+)/.exec(mailServer.received[0]?.text ?? '')?.[1]

    const response = await accept({ token, name: 'Nora New', password })
    expect(response.status).toBe(200)
    const session = sessionSchema.parse(await response.json())
    expect(session).toMatchObject({
      account: { name: 'Nora New', email: 'new@example.test', language: 'es' },
      company: { id: company.id, name: company.name },
      roles: ['blaster'],
    })
    const ask = askWith(server.address, cookieOf(response))
    expect((await ask('GET', '/api/v1/people')).status).toBe(403)

    const account = server.database.queries
      .select()
      .from(accounts)
      .where(eq(accounts.email, 'new@example.test'))
      .get()
    expect(account?.passwordHash).not.toContain(password)
    expect(await server.context.passwords.verify(password, account?.passwordHash ?? '')).toBe(true)
    const { people, invitations: waiting } = await readPeople()
    expect(waiting).toEqual([])
    expect(people.find(({ email }) => email === 'new@example.test')).toMatchObject({
      name: 'Nora New',
      roles: ['blaster'],
      state: 'active',
    })
    expect(await readActions()).toEqual(['person.joined', 'invitation.sent'])
  })

  it('works once', async () => {
    await invited(await invite(makeInput()))
    const token = readToken('new@example.test')
    const both = await Promise.all([
      accept({ token, name: 'Nora New', password }),
      accept({ token, name: 'Nora New', password }),
    ])
    expect(both.map(({ status }) => status).sort()).toEqual([200, 410])
    expect(await refused(await view(token))).toBe('410 link-not-good')
    const made = server.database.queries
      .select()
      .from(accounts)
      .where(eq(accounts.email, 'new@example.test'))
      .all()
    expect(made).toHaveLength(1)
  })

  it('for a new address takes a name and a good password, and is not used up without', async () => {
    await invited(await invite(makeInput()))
    const token = readToken('new@example.test')
    expect(listErrors(await readProblem(await accept({ token })))).toEqual([
      'required /name',
      'required /password',
    ])
    const short = await readProblem(await accept({ token, name: 'Nora', password: 'short' }))
    expect(listErrors(short)).toEqual(['too-short /password'])
    const common = await readProblem(await accept({ token, name: 'Nora', password: 'password1234' }))
    expect(listErrors(common)).toEqual(['too-common /password'])
    expect((await accept({ token, name: 'Nora', password })).status).toBe(200)
  })

  it('for an address with an account takes that account, signed in', async () => {
    const known = makePerson(server, makeCompany(server, { name: 'First Company' }), ['owner'])
    const stranger = makePerson(server, makeCompany(server))
    await invited(await invite(makeInput({ email: known.email, roles: ['estimator'] })))
    const token = readToken(known.email)
    expect(await refused(await accept({ token }))).toBe('401 not-signed-in')
    expect(await refused(await accept({ token, name: 'Thief', password }))).toBe('401 not-signed-in')
    expect(await refused(await accept({ token }, stranger.ask))).toBe('401 not-signed-in')
    expect((await readPeople()).people).toHaveLength(1)

    const response = await accept({ token }, known.ask)
    const session = sessionSchema.parse(await response.json())
    expect(session.company?.id).toBe(company.id)
    expect(session.roles).toEqual(['estimator'])
    expect(session.memberships.map(({ companyName }) => companyName).sort()).toEqual([
      'First Company',
      company.name,
    ])
    expect(cookieOf(response)).not.toBe(known.cookie)
    expect((await readPeople()).people.map(({ roles }) => roles)).toContainEqual(['estimator'])
    expect(await readActions()).toEqual(['person.joined', 'invitation.sent'])
  })

  it('takes back whom the company let go, with the roles of the invitation', async () => {
    const person = makePerson(server, company, ['owner'])
    makePerson(server, company, ['owner'])
    const path = `/api/v1/people/${person.membershipId}`
    expect((await admin.ask('PUT', path, { version: 1, state: 'deactivated' })).status).toBe(200)
    await invited(await invite(makeInput({ email: person.email, roles: ['blaster'] })))
    const ask = askWith(server.address, makeSessionCookie(server, person.accountId, null))
    const response = await accept({ token: readToken(person.email) }, ask)
    expect(sessionSchema.parse(await response.json())).toMatchObject({
      company: { id: company.id },
      roles: ['blaster'],
    })
    const membership = server.database.queries
      .select()
      .from(memberships)
      .where(and(eq(memberships.accountId, person.accountId), eq(memberships.companyId, company.id)))
      .all()
    expect(membership).toMatchObject([{ id: person.membershipId, state: 'active', version: 3 }])
    expect((await readActions())[0]).toBe('person.reactivated')
  })

  it('leaves whom the admin took back meanwhile with the roles the admin gave', async () => {
    const person = makePerson(server, company, ['blaster'])
    const path = `/api/v1/people/${person.membershipId}`
    await admin.ask('PUT', path, { version: 1, state: 'deactivated' })
    await invited(await invite(makeInput({ email: person.email, roles: ['admin'] })))
    await admin.ask('PUT', path, { version: 2, state: 'active' })
    const ask = askWith(server.address, makeSessionCookie(server, person.accountId, company.id))
    const response = await accept({ token: readToken(person.email) }, ask)
    expect(sessionSchema.parse(await response.json()).roles).toEqual(['blaster'])
    const used = server.database.queries.select().from(invitations).all()
    expect(used[0]?.acceptedAt).not.toBeNull()
  })

  it('does not undo that somebody was let go after it was sent', async () => {
    const person = makePerson(server, company, ['blaster'])
    const path = `/api/v1/people/${person.membershipId}`
    await admin.ask('PUT', path, { version: 1, state: 'deactivated' })
    await invited(await invite(makeInput({ email: person.email, roles: ['admin'] })))
    const elsewhere = makeCompany(server, { name: 'Other Company' })
    const otherAdmin = makePerson(server, elsewhere, ['admin'])
    const other = await invited(await invite(makeInput({ email: person.email }), otherAdmin))
    await admin.ask('PUT', path, { version: 2, state: 'active' })
    expect((await admin.ask('PUT', path, { version: 3, state: 'deactivated' })).status).toBe(200)
    const ask = askWith(server.address, makeSessionCookie(server, person.accountId, null))
    const [ours, theirs] = server.database.queries
      .select()
      .from(emails)
      .where(eq(emails.to, person.email))
      .all()
      .map(({ text }) => /\/invitation#([\w-]+)/.exec(text)?.[1])
    expect(await refused(await accept({ token: ours }, ask))).toBe('410 link-not-good')
    expect((await readPeople()).invitations).toEqual([])
    expect((await readActions())[0]).toBe('invitation.withdrawn')
    // What another company sent is none of ours.
    const joined = sessionSchema.parse(await (await accept({ token: theirs }, ask)).json())
    expect(joined).toMatchObject({ company: { id: elsewhere.id }, roles: other.roles })
  })
})
