import { randomUUID } from 'node:crypto'
import { parse } from 'csv-parse/sync'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { auditPageSchema } from '#shared/contracts/people.ts'
import type { AuditAction } from '#shared/contracts/people.ts'
import { roles as everyRole } from '#shared/contracts/permissions.ts'
import { writeAudit } from '../../../server/services/audit.ts'
import { makeCompany, makePerson } from '../../support/people.ts'
import type { TestCompany, TestPerson } from '../../support/people.ts'
import { listErrors, readProblem } from '../../support/requests.ts'
import { startServer } from '../../support/server.ts'
import type { RunningServer } from '../../support/server.ts'

let server: RunningServer
let company: TestCompany
let admin: TestPerson

beforeEach(async () => {
  server = await startServer()
  company = makeCompany(server)
  admin = makePerson(server, company, ['admin'], { name: 'Ada Admin' })
})
afterEach(() => server.stop())

interface Note {
  subject: string
  at?: string
  action?: AuditAction
  by?: string
  companyId?: string
  changes?: Record<string, { from: unknown; to: unknown }>
}

function note(...notes: Note[]): void {
  server.database.transact((writer) => {
    for (const { subject, at, action = 'rig.changed', by = 'Ada Admin', companyId, changes = {} } of notes) {
      const actor = { accountId: admin.accountId, name: by, companyId: companyId ?? company.id }
      writeAudit(writer, actor, new Date(at ?? Date.now()), { action, subject, changes })
    }
  })
}

async function read(query = '', asker = admin) {
  const response = await asker.ask('GET', `/api/v1/audit${query}`)
  expect(response.status).toBe(200)
  return auditPageSchema.parse(await response.json())
}

const subjectsOf = async (query: string) => (await read(query)).items.map(({ subject }) => subject)

describe('the audit log', () => {
  it('shows who did what, newest first, of this company alone', async () => {
    const other = makeCompany(server)
    note({ subject: 'first' }, { subject: 'elsewhere', companyId: other.id }, { subject: 'second' })
    const { items, nextCursor } = await read()
    expect(items.map(({ subject }) => subject)).toEqual(['second', 'first'])
    expect(items[0]).toMatchObject({ actorName: 'Ada Admin', action: 'rig.changed', subjectId: null })
    expect(nextCursor).toBeNull()
    const stranger = makePerson(server, other)
    expect((await read('', stranger)).items.map(({ subject }) => subject)).toEqual(['elsewhere'])
  })

  it.each(everyRole.filter((role) => role !== 'admin'))('is not for a %s', async (role) => {
    const asker = makePerson(server, company, [role])
    for (const path of ['/api/v1/audit', '/api/v1/audit.csv']) {
      const problem = await readProblem(await asker.ask('GET', path))
      expect(problem.code).toBe('forbidden')
    }
  })

  it('is read page by page, each entry once, also while more is written', async () => {
    const subjects = Array.from({ length: 25 }, (_, index) => `entry ${index + 1}`)
    note(...subjects.map((subject) => ({ subject })))
    const seen: string[] = []
    let cursor: string | null = null
    let pageCount = 0
    do {
      const page = await read(`?limit=10${cursor === null ? '' : `&cursor=${cursor}`}`)
      expect(page.items.length).toBeLessThanOrEqual(10)
      seen.push(...page.items.map(({ subject }) => subject))
      cursor = page.nextCursor
      pageCount += 1
      note({ subject: 'meanwhile' })
    } while (cursor !== null)
    expect(seen).toEqual(subjects.reverse())
    expect(pageCount).toBe(3)
  })

  it('is found by what was done, by whom or to what, and when', async () => {
    note(
      { subject: 'Big rig', at: '2026-05-01T10:00:00.000Z', by: 'Bo Blaster' },
      { subject: 'bo@example.test', at: '2026-05-02T10:00:00.000Z', action: 'invitation.sent' },
      { subject: '100 % rig_a', at: '2026-05-03T10:00:00.000Z' },
      { subject: '100 percent rigXa', at: '2026-05-03T10:00:00.001Z' },
    )
    expect(await subjectsOf('?action=invitation.sent')).toEqual(['bo@example.test'])
    expect(await subjectsOf('?search=BO')).toEqual(['bo@example.test', 'Big rig'])
    expect(await subjectsOf(`?search=${encodeURIComponent('0 %')}`)).toEqual(['100 % rig_a'])
    expect(await subjectsOf('?search=rig_a')).toEqual(['100 % rig_a'])
    expect(await subjectsOf(`?search=${encodeURIComponent("' or 1=1 --")}`)).toEqual([])
    // From the instant on, up to but without the other.
    expect(await subjectsOf('?from=2026-05-02T10:00:00Z&until=2026-05-03T10:00:00.001Z')).toEqual([
      '100 % rig_a',
      'bo@example.test',
    ])
    const denver = encodeURIComponent('2026-05-03T04:00:00-06:00')
    expect(await subjectsOf(`?from=${denver}&search=percent`)).toEqual(['100 percent rigXa'])
    expect(await subjectsOf(`?until=${denver}&action=rig.changed`)).toEqual(['Big rig'])
  })

  it.each([
    ['?cursor=nonsense', 'invalid /cursor'],
    [`?cursor=${Buffer.from('audit:-1').toString('base64url')}`, 'invalid /cursor'],
    ['?limit=101', 'too-big /limit'],
    ['?action=rig.eaten', 'not-a-choice /action'],
    ['?from=yesterday', 'invalid /from'],
    ['?who=me', 'unknown-field /who'],
  ])('says what is wrong with %s', async (query, error) => {
    const problem = await readProblem(await admin.ask('GET', `/api/v1/audit${query}`))
    expect(problem.status).toBe(422)
    expect(listErrors(problem)).toEqual([error])
  })

  it('is edited by nobody, not even in the database', () => {
    note({ subject: 'as it was' })
    const { connection } = server.database
    expect(() => connection.prepare("update audit_entries set subject = 'other'").run()).toThrow(
      /never changed/,
    )
    expect(() => connection.prepare('delete from audit_entries').run()).toThrow(/never deleted/)
    expect(connection.prepare('select subject from audit_entries').pluck().all()).toEqual(['as it was'])
  })

  it.each(['POST', 'PUT', 'PATCH', 'DELETE'])('has no %s', async (method) => {
    const problem = await readProblem(await admin.ask(method, '/api/v1/audit'))
    expect(problem.code).toBe('method-not-allowed')
  })

  it('has no entry of a change that did not come to be', async () => {
    const attempt = () =>
      server.database.transact((writer) => {
        const actor = { accountId: admin.accountId, name: 'Ada', companyId: company.id }
        writeAudit(writer, actor, new Date(), { action: 'rig.created', subject: 'never' })
        throw new Error('the change failed')
      })
    expect(attempt).toThrow('the change failed')
    expect(await subjectsOf('')).toEqual([])
  })
})

describe('the audit log as a table', () => {
  async function download(query = '') {
    const response = await admin.ask('GET', `/api/v1/audit.csv${query}`)
    expect(response.status).toBe(200)
    return { response, text: await response.text() }
  }

  const readLines = (text: string) => parse(text, { columns: true }) as Record<string, string>[]

  it('is a file of the same entries and filters, with formulas made texts', async () => {
    const changes = { name: { from: 'a', to: 'b, "c"' } }
    note(
      { subject: '=HYPERLINK("http://elsewhere.test")', at: '2026-05-01T10:00:00.000Z', changes },
      { subject: 'plain', at: '2026-05-02T10:00:00.000Z', by: '@evil', action: 'rig.created' },
    )
    const { response, text } = await download()
    expect(response.headers.get('content-type')).toBe('text/csv; charset=utf-8')
    expect(response.headers.get('content-disposition')).toMatch(
      /^attachment; filename="?sixteenth-audit-\d{4}-\d\d-\d\d\.csv"?$/,
    )
    expect(response.headers.get('cache-control')).toBe('no-store')
    const lines = readLines(text)
    expect(lines.map(({ at, who, action, subject }) => [at, who, action, subject])).toEqual([
      ['2026-05-02T10:00:00.000Z', "'@evil", 'rig.created', 'plain'],
      ['2026-05-01T10:00:00.000Z', 'Ada Admin', 'rig.changed', '\'=HYPERLINK("http://elsewhere.test")'],
    ])
    expect(JSON.parse(lines[1]?.['changes'] ?? '')).toEqual(changes)
    expect(readLines((await download('?action=rig.created')).text)).toHaveLength(1)
  })

  it('is whole, also when it is long', async () => {
    const subjects = Array.from({ length: 1203 }, () => randomUUID())
    note(...subjects.map((subject) => ({ subject })))
    const lines = readLines((await download()).text)
    expect(lines.map(({ subject }) => subject)).toEqual(subjects.reverse())
  })

  it('begins as UTF-8 that spreadsheets know as such', async () => {
    const response = await admin.ask('GET', '/api/v1/audit.csv')
    const bytes = new Uint8Array(await response.arrayBuffer())
    expect([...bytes.slice(0, 3)]).toEqual([0xef, 0xbb, 0xbf])
  })

  it('that nobody waits for any more leaves the server standing', async () => {
    note(...Array.from({ length: 5000 }, () => ({ subject: 'x'.repeat(2000) })))
    const leaving = new AbortController()
    const response = await fetch(`${server.address}/api/v1/audit.csv`, {
      headers: { cookie: admin.cookie, 'accept-encoding': 'identity' },
      signal: leaving.signal,
    })
    expect(response.status).toBe(200)
    leaving.abort()
    expect((await read('?limit=1')).items).toHaveLength(1)
  })
})
