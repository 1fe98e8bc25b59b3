import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { mediumPageSchema, mediumRecordSchema } from '#shared/contracts/media.ts'
import { nozzlePageSchema, nozzleRecordSchema } from '#shared/contracts/nozzles.ts'
import type { NozzleRecord } from '#shared/contracts/nozzles.ts'
import type { Role } from '#shared/contracts/permissions.ts'
import { roles } from '#shared/contracts/permissions.ts'
import { workSchema } from '#shared/contracts/work.ts'
import { auditEntries } from '../../../server/db/schema/index.ts'
import { changeRecord } from '../../../server/services/records.ts'
import { nozzleKind, toNozzleProfile } from '../../../server/services/nozzles.ts'
import { ProblemError } from '../../../server/problems.ts'
import { makeRigBody } from '../../support/fleet.ts'
import { makeCompany, makePerson } from '../../support/people.ts'
import type { TestPerson } from '../../support/people.ts'
import { listErrors, readProblem } from '../../support/requests.ts'
import { startServer } from '../../support/server.ts'
import type { RunningServer } from '../../support/server.ts'
import { makeMediumBody, makeNozzleBody, save } from '../../support/work.ts'

let server: RunningServer
let owner: TestPerson
let blaster: TestPerson
let stranger: TestPerson

beforeAll(async () => {
  server = await startServer()
  owner = makePerson(server, makeCompany(server), ['owner'], { name: 'Olive Owner' })
  blaster = makePerson(server, owner.company, ['blaster'], { name: 'Bo Blaster' })
  stranger = makePerson(server, makeCompany(server, { name: 'Other Company' }))
})
afterAll(() => server.stop())

const saveNozzle = async (person: TestPerson, body: object) =>
  nozzleRecordSchema.parse(await save(person, 'nozzles', body))

const makeUnknown = (overrides: object = {}) => ({
  id: randomUUID(),
  shape: 'fan' as const,
  boxRigId: null,
  photoId: null,
  ...overrides,
})

async function registerUnknown(person: TestPerson, body: object = makeUnknown()): Promise<NozzleRecord> {
  return nozzleRecordSchema.parse(await save(person, 'nozzles/unknown', body))
}

/** A stored nozzle as a change sends it back. */
function changeOf(record: NozzleRecord, overrides: object = {}) {
  const { id: _id, isArchived, createdAt, updatedAt, updatedBy, name, photoId, ...fields } = record
  void [isArchived, createdAt, updatedAt, updatedBy, name, photoId]
  return { ...fields, priceMinor: record.priceMinor ?? null, ...overrides }
}

const entriesOn = (subjectId: string) =>
  server.database.queries
    .select()
    .from(auditEntries)
    .all()
    .filter((entry) => entry.subjectId === subjectId)

describe('a nozzle', () => {
  it('comes back as it was sent, called by its tag', async () => {
    const body = makeNozzleBody()
    const created = await saveNozzle(owner, body)
    expect(created).toMatchObject({ ...body, name: body.tag, version: 1, photoId: null, isArchived: false })
    expect(await (await owner.ask('GET', `/api/v1/nozzles/${body.id}`)).json()).toEqual(created)
    expect(await saveNozzle(owner, body)).toEqual(created)
    expect(entriesOn(body.id).map(({ action }) => action)).toEqual(['nozzle.created'])
    const other = await owner.ask('POST', '/api/v1/nozzles', { ...body, shape: 'straight' })
    expect((await readProblem(other)).code).toBe('id-in-use')
    expect((await stranger.ask('GET', `/api/v1/nozzles/${body.id}`)).status).toBe(404)
  })

  it('snaps its bore to the 64th that it stands for', async () => {
    const created = await saveNozzle(owner, makeNozzleBody({ newBoreMm: 9.5254 }))
    expect(created.newBoreMm).toBe(9.525)
  })

  it('is refused where number and bore do not say the same', async () => {
    const response = await owner.ask('POST', '/api/v1/nozzles', makeNozzleBody({ newBoreMm: 9.6 }))
    expect(listErrors(await readProblem(response))).toEqual(['number-and-bore-differ /newBoreMm'])
  })

  it('shares its tag with no other in use, whatever the capitals, but with one that is archived', async () => {
    const first = await saveNozzle(owner, makeNozzleBody({ tag: 'Two notches' }))
    const twin = makeNozzleBody({ tag: 'two NOTCHES' })
    const refused = await owner.ask('POST', '/api/v1/nozzles', twin)
    expect(listErrors(await readProblem(refused))).toEqual(['name-in-use /tag'])
    await owner.ask('POST', `/api/v1/nozzles/${first.id}/archive`, { version: 1 })
    await saveNozzle(owner, twin)
    const back = await owner.ask('POST', `/api/v1/nozzles/${first.id}/unarchive`, { version: 2 })
    expect((await readProblem(back)).code).toBe('in-use')
    const renamed = await owner.ask(
      'PUT',
      `/api/v1/nozzles/${first.id}`,
      changeOf({ ...first, version: 2 }, { thread: null }),
    )
    expect(renamed.status).toBe(200)
  })

  it('lies in the box of a rig of the company', async () => {
    const rig = makeRigBody()
    await save(owner, 'rigs', rig)
    expect((await saveNozzle(owner, makeNozzleBody({ boxRigId: rig.id }))).boxRigId).toBe(rig.id)
    const theirs = await stranger.ask('POST', '/api/v1/nozzles', makeNozzleBody({ boxRigId: rig.id }))
    expect(listErrors(await readProblem(theirs))).toEqual(['unknown-reference /boxRigId'])
  })

  it('may be archived, deleted and brought back', async () => {
    const { id } = await saveNozzle(owner, makeNozzleBody())
    const move = async (verb: string, version: number) =>
      (await owner.ask('POST', `/api/v1/nozzles/${id}/${verb}`, { version })).status
    expect(await move('archive', 1)).toBe(200)
    expect(await move('unarchive', 2)).toBe(200)
    expect((await owner.ask('DELETE', `/api/v1/nozzles/${id}?version=3`)).status).toBe(204)
    expect((await owner.ask('GET', `/api/v1/nozzles/${id}`)).status).toBe(404)
    expect(await move('restore', 3)).toBe(200)
  })

  it('is listed a page at a time', async () => {
    const other = makePerson(server, makeCompany(server), ['owner'])
    for (const tag of ['c', 'a', 'b']) await save(other, 'nozzles', makeNozzleBody({ tag }))
    const read = async (query: string) =>
      nozzlePageSchema.parse(await (await other.ask('GET', `/api/v1/nozzles?${query}`)).json())
    const first = await read('limit=2')
    expect(first.items.map(({ tag }) => tag)).toEqual(['a', 'b'])
    const second = await read(`limit=2&cursor=${first.nextCursor}`)
    expect(second.items.map(({ tag }) => tag)).toEqual(['c'])
    expect(second.nextCursor).toBeNull()
  })
})

describe('a price', () => {
  it.each(roles.map((role) => [role, role === 'estimator' || role === 'owner'] as const))(
    'is shown to the %s: %s',
    async (role, isShown) => {
      const { id } = await saveNozzle(owner, makeNozzleBody({ priceMinor: 91_817 }))
      const person = makePerson(server, owner.company, [role])
      for (const path of [`nozzles/${id}`, 'nozzles', 'work']) {
        const text = await (await person.ask('GET', `/api/v1/${path}`)).text()
        expect(text.includes('91817')).toBe(isShown)
        expect(text.includes('priceMinor')).toBe(isShown)
      }
    },
  )

  it('stands in no audit entry, though who changed the nozzle does', async () => {
    const created = await saveNozzle(owner, makeNozzleBody({ priceMinor: 91_817 }))
    const change = changeOf(created, { priceMinor: 92_818, thread: '1 1/4 in NPSM' })
    const changed = await owner.ask('PUT', `/api/v1/nozzles/${created.id}`, change)
    expect(((await changed.json()) as NozzleRecord).priceMinor).toBe(92_818)
    const entries = entriesOn(created.id)
    expect(entries.at(-1)).toMatchObject({
      action: 'nozzle.changed',
      changes: { thread: { from: '50 mm coarse', to: '1 1/4 in NPSM' } },
    })
    expect(JSON.stringify(entries)).not.toMatch(/price|91817|92818/)
  })

  it('is in the stored record of a conflict only for who may see it', async () => {
    const created = await saveNozzle(owner, makeNozzleBody({ priceMinor: 91_817 }))
    const path = `/api/v1/nozzles/${created.id}`
    const stale = changeOf(created, { version: 7 })
    const problem = await readProblem(await owner.ask('PUT', path, stale))
    expect(problem.stored).toEqual(created)
    // No role may change nozzles without seeing prices; were there one, its conflict would not show them.
    const actor = { accountId: owner.accountId, name: 'Ida', companyId: owner.company.id }
    const { version, ...profile } = stale
    const change = (held: readonly Role[]) => () =>
      changeRecord(
        nozzleKind,
        server.context,
        { ...actor, roles: held },
        { id: created.id, version },
        toNozzleProfile(profile),
      )
    const storedFor = (held: readonly Role[]) => {
      try {
        change(held)()
      } catch (error) {
        if (error instanceof ProblemError) return error.problem.stored
      }
      throw new Error('the change was not refused')
    }
    expect(storedFor(['admin'])).not.toHaveProperty('priceMinor')
    expect(storedFor(['estimator'])).toHaveProperty('priceMinor', 91_817)
  })
})

describe('a nozzle whose tag nobody can read', () => {
  it('is registered by a blaster under a name of its own, which it keeps', async () => {
    const other = makePerson(server, makeCompany(server), ['owner', 'blaster'])
    const body = makeUnknown()
    const first = await registerUnknown(other, body)
    expect(first).toMatchObject({ name: 'unknown 1', tag: null, newBoreMm: null, hoursBefore: null })
    expect(first.shape).toBe('fan')
    const second = await registerUnknown(other)
    expect(second.name).toBe('unknown 2')
    expect(await registerUnknown(other, body)).toEqual(first)
    const changed = await other.ask(
      'PUT',
      `/api/v1/nozzles/${first.id}`,
      changeOf(first, { liner: 'boron-carbide' }),
    )
    expect(await changed.json()).toMatchObject({ name: 'unknown 1', liner: 'boron-carbide' })
    await other.ask('DELETE', `/api/v1/nozzles/${second.id}?version=1`)
    expect((await registerUnknown(other)).name).toBe('unknown 3')
  })

  it('takes no name that is somebody’s tag', async () => {
    const other = makePerson(server, makeCompany(server), ['owner'])
    await save(other, 'nozzles', makeNozzleBody({ tag: 'Unknown 1' }))
    expect((await registerUnknown(other)).name).toBe('unknown 2')
  })

  it('is called by its tag once it can be read', async () => {
    const unknown = await registerUnknown(blaster)
    const response = await owner.ask(
      'PUT',
      `/api/v1/nozzles/${unknown.id}`,
      changeOf(unknown, { tag: 'T-read' }),
    )
    expect(await response.json()).toMatchObject({ name: 'T-read', tag: 'T-read' })
  })

  it('is refused with a photo or a rig that is not there', async () => {
    const body = makeUnknown({ photoId: randomUUID(), boxRigId: randomUUID() })
    const problem = await readProblem(await blaster.ask('POST', '/api/v1/nozzles/unknown', body))
    expect(listErrors(problem).sort()).toEqual(['unknown-reference /boxRigId', 'unknown-reference /photoId'])
  })

  it('is all that a blaster may add', async () => {
    const response = await blaster.ask('POST', '/api/v1/nozzles', makeNozzleBody())
    expect((await readProblem(response)).code).toBe('forbidden')
  })
})

describe('a medium', () => {
  it('is kept, changed and listed under its own name', async () => {
    const other = makePerson(server, makeCompany(server), ['owner'])
    const body = makeMediumBody({ name: 'Black slag, fine', bulkDensityKgM3: 1400 })
    const created = mediumRecordSchema.parse(await save(other, 'media', body))
    expect(created).toMatchObject({ ...body, version: 1 })
    const { id: _id, ...fields } = body
    const change = { ...fields, hasFreeSilica: true, version: 1 }
    const changed = await other.ask('PUT', `/api/v1/media/${body.id}`, change)
    expect(await changed.json()).toMatchObject({ hasFreeSilica: true, version: 2 })
    const page = mediumPageSchema.parse(await (await other.ask('GET', '/api/v1/media')).json())
    expect(page.items.map(({ name }) => name)).toEqual(['Black slag, fine'])
    const twin = await other.ask('POST', '/api/v1/media', makeMediumBody({ name: 'BLACK SLAG, FINE' }))
    expect(listErrors(await readProblem(twin))).toEqual(['name-in-use /name'])
    const work = workSchema.parse(await (await other.ask('GET', '/api/v1/work')).json())
    expect(work.media).toEqual(page.items)
  })

  it('is of a type that is known', async () => {
    const body = { ...makeMediumBody(), abrasive: 'moon-dust' }
    const problem = await readProblem(await owner.ask('POST', '/api/v1/media', body))
    expect(listErrors(problem)).toEqual(['not-a-choice /abrasive'])
  })
})
