import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { compressorPageSchema, compressorRecordSchema } from '#shared/contracts/compressors.ts'
import { recordLimits } from '#shared/contracts/limits.ts'
import { rigRecordSchema } from '#shared/contracts/rigs.ts'
import { siteRecordSchema } from '#shared/contracts/sites.ts'
import { auditEntries, sites } from '../../../server/db/schema/index.ts'
import { changeOf, makeCompressorBody, makeRigBody, makeSiteBody } from '../../support/fleet.ts'
import { makeCompany, makePerson } from '../../support/people.ts'
import type { TestPerson } from '../../support/people.ts'
import { listErrors, readProblem } from '../../support/requests.ts'
import { startServer } from '../../support/server.ts'
import type { RunningServer } from '../../support/server.ts'

let server: RunningServer
let owner: TestPerson
let stranger: TestPerson

beforeAll(async () => {
  server = await startServer()
  owner = makePerson(server, makeCompany(server), ['owner'], { name: 'Olive Owner' })
  stranger = makePerson(server, makeCompany(server, { name: 'Other Company' }))
})
afterAll(() => server.stop())

function makeOtherOwner(): TestPerson {
  return makePerson(server, makeCompany(server), ['owner'])
}

interface Kept {
  id: string
  version: number
  name: string
  isArchived: boolean
}

async function save(person: TestPerson, path: string, body: object): Promise<Kept & Record<string, unknown>> {
  const response = await person.ask('POST', path, body)
  expect(response.status).toBe(201)
  return (await response.json()) as Kept & Record<string, unknown>
}

function actionsOn(subjectId: string): string[] {
  return server.database.queries
    .select()
    .from(auditEntries)
    .all()
    .filter((entry) => entry.subjectId === subjectId)
    .map(({ action, actorName }) => `${actorName}: ${action}`)
}

const kinds = [
  {
    noun: 'compressor',
    path: '/api/v1/compressors',
    make: makeCompressorBody,
    schema: compressorRecordSchema,
  },
  { noun: 'site', path: '/api/v1/sites', make: makeSiteBody, schema: siteRecordSchema },
  { noun: 'rig', path: '/api/v1/rigs', make: makeRigBody, schema: rigRecordSchema },
] as const

describe.each(kinds)('a saved $noun', ({ noun, path, make, schema }) => {
  it('comes back as it was sent, with its version and who wrote it', async () => {
    const body = make()
    const created = schema.parse(await save(owner, path, body))
    expect(created).toMatchObject({ ...body, version: 1, isArchived: false, updatedBy: 'Olive Owner' })
    const read = await owner.ask('GET', `${path}/${body.id}`)
    expect(await read.json()).toEqual(created)
    expect(actionsOn(body.id)).toEqual([`Olive Owner: ${noun}.created`])
  })

  it('is one record when the same post comes twice, in any order of its fields', async () => {
    const body = make()
    const first = await save(owner, path, body)
    const turned = Object.fromEntries(Object.entries(body).reverse())
    expect(await save(owner, path, turned)).toEqual(first)
    expect(actionsOn(body.id)).toHaveLength(1)
  })

  it('is one record when the same post comes eight times at once', async () => {
    const body = make()
    const answers = await Promise.all(Array.from({ length: 8 }, () => owner.ask('POST', path, body)))
    expect(answers.map(({ status }) => status)).toEqual(Array.from({ length: 8 }, () => 201))
    expect(actionsOn(body.id)).toHaveLength(1)
  })

  it('is not overwritten by another post under its id', async () => {
    const body = make()
    const first = await save(owner, path, body)
    const problem = await readProblem(await owner.ask('POST', path, make({ id: body.id })))
    expect(problem).toMatchObject({ status: 409, code: 'id-in-use' })
    const read = await owner.ask('GET', `${path}/${body.id}`)
    expect(await read.json()).toEqual(first)
  })

  it('may have the id of another company’s record, and neither sees the other’s', async () => {
    const body = make()
    const theirs = make({ id: body.id })
    await save(owner, path, body)
    await save(stranger, path, theirs)
    expect(await (await owner.ask('GET', `${path}/${body.id}`)).json()).toMatchObject({ name: body.name })
    expect(await (await stranger.ask('GET', `${path}/${body.id}`)).json()).toMatchObject({
      name: theirs.name,
    })
  })

  it('is not there for another company, whatever it tries', async () => {
    const body = make()
    const record = await save(owner, path, body)
    const version = { version: 1 }
    const tries: [string, string, unknown?][] = [
      ['GET', ''],
      ['PUT', '', changeOf(record as never)],
      ['DELETE', '?version=1'],
      ['POST', '/archive', version],
      ['POST', '/unarchive', version],
      ['POST', '/restore', version],
    ]
    for (const [method, rest, sent] of tries) {
      const problem = await readProblem(await stranger.ask(method, `${path}/${body.id}${rest}`, sent))
      expect(problem).toMatchObject({ status: 404, code: 'not-found' })
    }
    expect(await (await owner.ask('GET', `${path}/${body.id}`)).json()).toEqual(record)
  })

  it('is not found under an id that is none', async () => {
    const problem = await readProblem(await owner.ask('GET', `${path}/not-an-id`))
    expect(problem.status).toBe(404)
  })

  it('is changed from the version that was read, and the change is on record', async () => {
    const record = await save(owner, path, make())
    const name = `${record.name} renamed`
    const response = await owner.ask('PUT', `${path}/${record.id}`, changeOf(record as never, { name }))
    expect(response.status).toBe(200)
    expect(await response.json()).toMatchObject({ id: record.id, name, version: 2 })
    const changes = server.database.queries
      .select()
      .from(auditEntries)
      .all()
      .find(({ subjectId, action }) => subjectId === record.id && action === `${noun}.changed`)?.changes
    expect(changes).toEqual({ name: { from: record.name, to: name } })
  })

  it('shows the second of two people what the first one saved, and overwrites nothing', async () => {
    const other = makePerson(server, owner.company, ['owner'], { name: 'Otto Owner' })
    const record = await save(owner, path, make())
    const mine = changeOf(record as never, { name: `${record.name} mine` })
    const theirs = changeOf(record as never, { name: `${record.name} theirs` })
    const [first, second] = await Promise.all([
      owner.ask('PUT', `${path}/${record.id}`, mine),
      other.ask('PUT', `${path}/${record.id}`, theirs),
    ])
    const [kept, refused] = first.ok ? [first, second] : [second, first]
    const stored: unknown = await kept.json()
    const problem = await readProblem(refused)
    expect(problem).toMatchObject({ status: 409, code: 'version-conflict' })
    expect(problem.stored).toEqual(stored)
    expect(await (await owner.ask('GET', `${path}/${record.id}`)).json()).toEqual(stored)
  })

  it('refuses a second of its name, however it is capitalised', async () => {
    const record = await save(owner, path, make({ name: `Ñandú ${noun}` }))
    const second = await readProblem(await owner.ask('POST', path, make({ name: `ÑANDÚ ${noun}` })))
    expect(second.status).toBe(422)
    expect(listErrors(second)).toEqual(['name-in-use /name'])
    const another = await save(owner, path, make())
    const renamed = changeOf(another as never, { name: record.name })
    const problem = await readProblem(await owner.ask('PUT', `${path}/${another.id}`, renamed))
    expect(listErrors(problem)).toEqual(['name-in-use /name'])
  })

  it('may keep its own name, and another company may use it', async () => {
    const record = await save(owner, path, make())
    const same = changeOf(record as never, { name: record.name.toUpperCase() })
    expect((await owner.ask('PUT', `${path}/${record.id}`, same)).status).toBe(200)
    await save(stranger, path, make({ name: record.name }))
  })

  it('is archived and brought back, once each', async () => {
    const record = await save(owner, path, make())
    const at = (verb: string, version: number) =>
      owner.ask('POST', `${path}/${record.id}/${verb}`, { version })
    expect(await (await at('archive', 1)).json()).toMatchObject({ isArchived: true, version: 2 })
    expect(await (await at('archive', 2)).json()).toMatchObject({ isArchived: true, version: 2 })
    const stale = await readProblem(await at('unarchive', 1))
    expect(stale).toMatchObject({ code: 'version-conflict', stored: { version: 2, isArchived: true } })
    expect(await (await at('unarchive', 2)).json()).toMatchObject({ isArchived: false, version: 3 })
    expect(actionsOn(record.id).slice(1)).toEqual([
      `Olive Owner: ${noun}.archived`,
      `Olive Owner: ${noun}.unarchived`,
    ])
  })

  it('is gone when it is deleted, and back as it was when that is undone', async () => {
    const record = await save(owner, path, make())
    const at = `${path}/${record.id}`
    expect((await readProblem(await owner.ask('DELETE', `${at}?version=7`))).code).toBe('version-conflict')
    const deleted = await owner.ask('DELETE', `${at}?version=1`)
    expect(deleted.status).toBe(204)
    expect(await deleted.text()).toBe('')
    expect((await owner.ask('GET', at)).status).toBe(404)
    expect((await owner.ask('PUT', at, changeOf(record as never))).status).toBe(404)
    expect((await owner.ask('DELETE', `${at}?version=1`)).status).toBe(404)
    const restored = (await (await owner.ask('POST', `${at}/restore`, { version: 1 })).json()) as Kept
    expect({ ...restored, updatedAt: record['updatedAt'] }).toEqual({ ...record, version: 2 })
    expect((await readProblem(await owner.ask('POST', `${at}/restore`, { version: 1 }))).status).toBe(409)
    expect(actionsOn(record.id).slice(1)).toEqual([
      `Olive Owner: ${noun}.deleted`,
      `Olive Owner: ${noun}.restored`,
    ])
  })

  it('does not come back by the post that made it', async () => {
    const body = make()
    await save(owner, path, body)
    await owner.ask('DELETE', `${path}/${body.id}?version=1`)
    const problem = await readProblem(await owner.ask('POST', path, body))
    expect(problem).toMatchObject({ status: 409, code: 'id-in-use' })
    expect(problem.detail).toContain('restore')
  })

  it('does not come back beside another that has taken its name', async () => {
    const record = await save(owner, path, make())
    await owner.ask('DELETE', `${path}/${record.id}?version=1`)
    await save(owner, path, make({ name: record.name }))
    const problem = await readProblem(await owner.ask('POST', `${path}/${record.id}/restore`, { version: 1 }))
    expect(problem).toMatchObject({ status: 409, code: 'in-use' })
    expect(problem.detail).toContain(record.name)
  })

  it('names a deletion’s version, which must be one', async () => {
    const record = await save(owner, path, make())
    for (const query of ['', '?version=', '?version=x', '?version=1.5', '?version=1&force=yes']) {
      const problem = await readProblem(await owner.ask('DELETE', `${path}/${record.id}${query}`))
      expect(problem.status).toBe(422)
    }
  })
})

describe('a list', () => {
  it('goes by name in pages that miss nothing and repeat nothing', async () => {
    const person = makeOtherOwner()
    const names = ['b', 'A', 'c', 'á', 'B 2', 'a 1', 'zz']
    for (const name of names) await save(person, '/api/v1/compressors', makeCompressorBody({ name }))
    const seen: string[] = []
    let cursor: string | null = ''
    while (cursor !== null) {
      const query: string = `limit=2${cursor && `&cursor=${cursor}`}`
      const response = await person.ask('GET', `/api/v1/compressors?${query}`)
      const page = compressorPageSchema.parse(await response.json())
      expect(page.items.length).toBeLessThanOrEqual(2)
      seen.push(...page.items.map(({ name }) => name))
      cursor = page.nextCursor
    }
    expect(seen).toHaveLength(names.length)
    expect(new Set(seen)).toEqual(new Set(names))
    expect(seen).toEqual([...seen].sort())
  })

  it('shows what is archived and not what is deleted', async () => {
    const person = makeOtherOwner()
    const archived = await save(person, '/api/v1/sites', makeSiteBody())
    const deleted = await save(person, '/api/v1/sites', makeSiteBody())
    await person.ask('POST', `/api/v1/sites/${archived.id}/archive`, { version: 1 })
    await person.ask('DELETE', `/api/v1/sites/${deleted.id}?version=1`)
    const page = (await (await person.ask('GET', '/api/v1/sites')).json()) as { items: Kept[] }
    expect(page.items.map(({ id, isArchived }) => [id, isArchived])).toEqual([[archived.id, true]])
  })

  it.each(['cursor=!!', 'cursor=e30', 'cursor=WzEsMl0', 'cursor=', 'limit=0', 'limit=101', 'page=2'])(
    'refuses %s',
    async (query) => {
      for (const { path } of kinds) {
        const problem = await readProblem(await owner.ask('GET', `${path}?${query}`))
        expect(problem).toMatchObject({ status: 422, code: 'invalid-fields' })
      }
    },
  )
})

describe('a compressor or a site', () => {
  it.each([
    ['compressor', 'compressors', 'compressorId', makeCompressorBody],
    ['site', 'sites', 'siteId', makeSiteBody],
  ] as const)(
    'that rigs use: the %s may not go, and the rigs are named',
    async (_noun, plural, field, make) => {
      const record = await save(owner, `/api/v1/${plural}`, make())
      const rig = await save(owner, '/api/v1/rigs', makeRigBody({ [field]: record.id }))
      const at = `/api/v1/${plural}/${record.id}`
      const refusals = [
        await owner.ask('DELETE', `${at}?version=1`),
        await owner.ask('POST', `${at}/archive`, { version: 1 }),
      ]
      for (const refusal of refusals) {
        const problem = await readProblem(refusal)
        expect(problem).toMatchObject({ status: 409, code: 'in-use' })
        expect(problem.detail).toContain(rig.name)
      }
      await owner.ask('POST', `/api/v1/rigs/${rig.id}/archive`, { version: 1 })
      expect((await owner.ask('POST', `${at}/archive`, { version: 1 })).status).toBe(200)
      expect((await readProblem(await owner.ask('DELETE', `${at}?version=2`))).code).toBe('in-use')
      const back = await owner.ask('POST', `/api/v1/rigs/${rig.id}/unarchive`, { version: 2 })
      expect((await readProblem(back)).detail).toContain(record.name)
      await owner.ask('DELETE', `/api/v1/rigs/${rig.id}?version=2`)
      expect((await owner.ask('DELETE', `${at}?version=2`)).status).toBe(204)
      const restore = await readProblem(
        await owner.ask('POST', `/api/v1/rigs/${rig.id}/restore`, { version: 2 }),
      )
      expect(restore).toMatchObject({ status: 409, code: 'in-use' })
    },
  )

  it('refuses a compressor whose fields do not agree', async () => {
    const cases: [Partial<ReturnType<typeof makeCompressorBody>>, string][] = [
      [{ unloadPressureKpa: 695 }, 'unload-too-near-set /unloadPressureKpa'],
      [{ rentedFrom: '2026-05-01' }, 'invalid /rentedFrom'],
      [
        { ownership: 'rented', rentedFrom: '2026-05-02', rentedUntil: '2026-05-01' },
        'dates-reversed /rentedUntil',
      ],
      [{ ownership: 'rented', rentedFrom: '2026-02-30' }, 'invalid /rentedFrom'],
      [{ ratedFreeAirM3Min: 151 }, 'too-big /ratedFreeAirM3Min'],
    ]
    for (const [overrides, expected] of cases) {
      const response = await owner.ask('POST', '/api/v1/compressors', makeCompressorBody(overrides))
      expect(listErrors(await readProblem(response))).toEqual([expected])
    }
  })

  it('takes the time zones that the runtime knows', async () => {
    for (const timeZone of ['Mars/Olympus', '+0530', 'America/']) {
      const problem = await readProblem(await owner.ask('POST', '/api/v1/sites', makeSiteBody({ timeZone })))
      expect(problem.status).toBe(422)
      expect(listErrors(problem)).toEqual(['not-a-time-zone /timeZone'])
    }
    const record = await save(owner, '/api/v1/sites', makeSiteBody({ timeZone: 'America/Sao_Paulo' }))
    const change = changeOf(record as never, { timeZone: 'America/Nowhere' })
    const problem = await readProblem(await owner.ask('PUT', `/api/v1/sites/${record.id}`, change))
    expect(listErrors(problem)).toEqual(['not-a-time-zone /timeZone'])
  })

  it('is one of at most a thousand', async () => {
    const person = makeOtherOwner()
    const stamp = new Date().toISOString()
    server.database.transact((writer) => {
      for (let index = 0; index < recordLimits.records; index += 1) {
        const { id, ...profile } = makeSiteBody()
        const kept = { version: 1, creationHash: '', createdAt: stamp, updatedAt: stamp, updatedBy: 'Olive' }
        writer
          .insert(sites)
          .values({ ...profile, ...kept, id, companyId: person.company.id })
          .run()
      }
    })
    const body = makeSiteBody()
    const problem = await readProblem(await person.ask('POST', '/api/v1/sites', body))
    expect(problem).toMatchObject({ status: 409, code: 'too-many-records' })
    const page = (await (await person.ask('GET', '/api/v1/sites?limit=1')).json()) as { items: Kept[] }
    const [first] = page.items
    await person.ask('DELETE', `/api/v1/sites/${first?.id}?version=1`)
    await save(person, '/api/v1/sites', body)
    const restore = await person.ask('POST', `/api/v1/sites/${first?.id}/restore`, { version: 1 })
    expect((await readProblem(restore)).code).toBe('too-many-records')
  })

  it('is nobody’s before somebody signs in', async () => {
    for (const { path, make } of kinds) {
      const asked = await fetch(`${server.address}${path}/${randomUUID()}`)
      expect((await readProblem(asked)).code).toBe('not-signed-in')
      const sent = await fetch(server.address + path, {
        method: 'POST',
        headers: { 'content-type': 'application/json' },
        body: JSON.stringify(make()),
      })
      expect((await readProblem(sent)).code).toBe('not-signed-in')
    }
  })
})
