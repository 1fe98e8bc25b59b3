import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { nozzleEventSchema } from '#shared/contracts/nozzles.ts'
import {
  boreCheckSchema,
  gaugeReadingSchema,
  shiftPageSchema,
  shiftSchema,
  workSchema,
} from '#shared/contracts/work.ts'
import { auditEntries } from '../../../server/db/schema/index.ts'
import { makeCompany, makePerson } from '../../support/people.ts'
import type { TestPerson } from '../../support/people.ts'
import { listErrors, readProblem } from '../../support/requests.ts'
import { startServer } from '../../support/server.ts'
import type { RunningServer } from '../../support/server.ts'
import {
  makeBoreCheckBody,
  makeEventBody,
  makeGaugeReadingBody,
  makeShiftBody,
  makeYard,
  save,
} from '../../support/work.ts'
import type { Yard } from '../../support/work.ts'

const now = new Date('2026-05-04T01:30:00Z')
let server: RunningServer
let owner: TestPerson
let blaster: TestPerson
let stranger: TestPerson
let yard: Yard

beforeAll(async () => {
  server = await startServer({}, () => now)
  owner = makePerson(server, makeCompany(server), ['owner'], { name: 'Olive Owner' })
  blaster = makePerson(server, owner.company, ['blaster'], { name: 'Bo Blaster' })
  stranger = makePerson(server, makeCompany(server, { name: 'Other Company' }))
  yard = await makeYard(owner)
})
afterAll(() => server.stop())

const readWork = async (person: TestPerson) =>
  workSchema.parse(await (await person.ask('GET', '/api/v1/work')).json())

const actionsOn = (subjectId: string) =>
  server.database.queries
    .select()
    .from(auditEntries)
    .all()
    .filter((entry) => entry.subjectId === subjectId)
    .map(({ action, actorName, subject }) => `${actorName}: ${action} ${subject}`)

interface Kind {
  path: string
  list: 'events' | 'shifts' | 'boreChecks' | 'gaugeReadings'
  make: (of: Yard, overrides?: object) => { id: string; at: string }
  /** another body under the same id */
  other: object
  schema: { parse: (value: unknown) => { id: string } }
  references: readonly string[]
  action: string
}

const kinds: readonly Kind[] = [
  {
    path: 'nozzle-events',
    list: 'events',
    make: ({ nozzleId, rigId }, overrides = {}) =>
      makeEventBody({ nozzleId, rigId, outletIndex: 0, kind: 'mounted', ...overrides }),
    other: { kind: 'taken-off' },
    schema: nozzleEventSchema,
    references: ['nozzleId', 'rigId'],
    action: 'nozzle.event',
  },
  {
    path: 'shifts',
    list: 'shifts',
    make: ({ rigId, mediumId }, overrides = {}) => makeShiftBody({ rigId, mediumId, ...overrides }),
    other: { blastHours: 6 },
    schema: shiftSchema,
    references: ['rigId', 'mediumId', 'supersedesId'],
    action: 'shift.logged',
  },
  {
    path: 'bore-checks',
    list: 'boreChecks',
    make: ({ nozzleId, rigId }, overrides = {}) => makeBoreCheckBody({ nozzleId, rigId, ...overrides }),
    other: { refusedMm: null },
    schema: boreCheckSchema,
    references: ['nozzleId', 'rigId', 'photoId', 'supersedesId'],
    action: 'bore-check.logged',
  },
  {
    path: 'gauge-readings',
    list: 'gaugeReadings',
    make: ({ rigId, compressorId, siteId, nozzleId }, overrides = {}) =>
      makeGaugeReadingBody({ rigId, compressorId, siteId, nozzleId, ...overrides }),
    other: { boreMm: 10 },
    schema: gaugeReadingSchema,
    references: ['rigId', 'compressorId', 'siteId', 'nozzleId', 'supersedesId'],
    action: 'gauges.logged',
  },
]

describe.each(kinds)('what is sent to $path', ({ path, list, make, other, schema, references, action }) => {
  it('is kept as it was made, with its own time and offset, by whom, and when it arrived', async () => {
    const body = make(yard)
    const answer = schema.parse(await save(blaster, path, body))
    expect(answer).toMatchObject({ ...body, by: 'Bo Blaster', receivedAt: now.toISOString() })
    expect((await readWork(owner))[list]).toContainEqual(answer)
    const [entry] = server.database.queries
      .select()
      .from(auditEntries)
      .all()
      .filter((one) => one.companyId === owner.company.id)
      .slice(-1)
    expect(entry).toMatchObject({ action, actorName: 'Bo Blaster' })
    expect([yard.rigName, yard.tag]).toContain(entry!.subject)
  })

  it('is one record when it comes eight times at once', async () => {
    const body = make(yard)
    const turned = Object.fromEntries(Object.entries(body).reverse())
    const answers = await Promise.all(
      Array.from({ length: 8 }, (_, index) =>
        blaster.ask('POST', `/api/v1/${path}`, index % 2 === 0 ? body : turned),
      ),
    )
    const texts = await Promise.all(answers.map((answer) => answer.text()))
    expect(answers.map(({ status }) => status)).toEqual(Array.from({ length: 8 }, () => 201))
    expect(new Set(texts).size).toBe(1)
    expect((await readWork(owner))[list].filter(({ id }) => id === body.id)).toHaveLength(1)
  })

  it('is not overwritten by another under its id', async () => {
    const body = make(yard)
    const first = await save(blaster, path, body)
    const refused = await readProblem(await blaster.ask('POST', `/api/v1/${path}`, { ...body, ...other }))
    expect(refused).toMatchObject({ status: 409, code: 'id-in-use' })
    expect((await readWork(owner))[list].find(({ id }) => id === body.id)).toEqual(first)
  })

  it('says which of the things it names is not the company’s', async () => {
    for (const field of references) {
      const body = make(yard, { [field]: randomUUID() })
      const problem = await readProblem(await blaster.ask('POST', `/api/v1/${path}`, body))
      expect(problem.status).toBe(422)
      expect(listErrors(problem)).toEqual([`unknown-reference /${field}`])
    }
    const theirs = await readProblem(await stranger.ask('POST', `/api/v1/${path}`, make(yard)))
    expect(theirs.status).toBe(422)
    expect((await readWork(stranger))[list]).toEqual([])
  })

  it('may come from a clock that is far off: when it arrived stands beside it', async () => {
    const body = make(yard, { at: '2031-01-01T00:00:00+05:30' })
    const answer = await save(blaster, path, body)
    expect(answer).toMatchObject({ at: '2031-01-01T00:00:00+05:30', receivedAt: now.toISOString() })
  })

  it('needs a time with an offset', async () => {
    for (const at of ['2026-05-03T16:40:00', 'yesterday', '2026-05-03']) {
      const response = await blaster.ask('POST', `/api/v1/${path}`, make(yard, { at }))
      expect(listErrors(await readProblem(response))).toEqual(['invalid /at'])
    }
  })

  it('is kept for a rig and a nozzle that were archived or deleted meanwhile', async () => {
    const old = await makeYard(owner)
    const body = make(old)
    await owner.ask('POST', `/api/v1/nozzles/${old.nozzleId}/archive`, { version: 1 })
    await owner.ask('POST', `/api/v1/rigs/${old.rigId}/archive`, { version: 1 })
    await save(blaster, path, body)
    await owner.ask('DELETE', `/api/v1/rigs/${old.rigId}?version=2`)
    await save(blaster, path, make(old))
  })
})

describe.each(kinds.filter(({ references }) => references.includes('supersedesId')))(
  'a correction sent to $path',
  ({ path, list, make, other }) => {
    it('supersedes, and nothing is overwritten, also where two correct the same', async () => {
      const first = make(yard)
      await save(blaster, path, first)
      const corrections = [
        make(yard, { ...other, supersedesId: first.id }),
        make(yard, { ...other, supersedesId: first.id }),
      ]
      for (const body of corrections) await save(blaster, path, body)
      const again = make(yard, { supersedesId: corrections[0]!.id })
      await save(owner, path, again)
      const ids = (await readWork(owner))[list].map(({ id }) => id)
      expect(ids).toEqual(
        expect.arrayContaining([first.id, corrections[0]!.id, corrections[1]!.id, again.id]),
      )
    })

    it('is of the same kind and the same company', async () => {
      const shift = makeShiftBody({ rigId: yard.rigId })
      const check = makeBoreCheckBody({ nozzleId: yard.nozzleId })
      await save(blaster, 'shifts', shift)
      await save(blaster, 'bore-checks', check)
      const wrong = path === 'shifts' ? check.id : shift.id
      const response = await blaster.ask('POST', `/api/v1/${path}`, make(yard, { supersedesId: wrong }))
      expect(listErrors(await readProblem(response))).toEqual(['unknown-reference /supersedesId'])
      const theirs = await makeYard(stranger)
      const body = make(yard)
      await save(blaster, path, body)
      const other = await stranger.ask('POST', `/api/v1/${path}`, make(theirs, { supersedesId: body.id }))
      expect(listErrors(await readProblem(other))).toEqual(['unknown-reference /supersedesId'])
    })
  },
)

describe('what happens to a nozzle', () => {
  it('is kept from two phones that disagree', async () => {
    const { nozzleId, rigId } = await makeYard(owner)
    const other = await makeYard(owner)
    const at = '2026-05-03T07:00:00-06:00'
    const here = makeEventBody({ nozzleId, kind: 'mounted', rigId, outletIndex: 0, at })
    const there = makeEventBody({ nozzleId, kind: 'mounted', rigId: other.rigId, outletIndex: 0, at })
    const broken = makeEventBody({ nozzleId, kind: 'broken', breakage: 'cracked', at })
    for (const body of [here, there, broken]) await save(blaster, 'nozzle-events', body)
    const { events, nozzles } = await readWork(owner)
    expect(events.filter((event) => event.nozzleId === nozzleId)).toHaveLength(3)
    // What is broken is a fact of its own: the nozzle's record stands as the owner wrote it.
    expect(nozzles.find(({ id }) => id === nozzleId)).toMatchObject({ version: 1, isArchived: false })
  })

  it('is on record with the nozzle’s name', async () => {
    const { nozzleId, tag } = await makeYard(owner)
    await save(blaster, 'nozzle-events', makeEventBody({ nozzleId, kind: 'broken', breakage: 'chipped' }))
    expect(actionsOn(nozzleId)).toContain(`Bo Blaster: nozzle.event ${tag}`)
  })

  it('needs an outlet to be mounted on, and is broken in a way only where it is broken', async () => {
    const { nozzleId } = yard
    const refusalOf = async (overrides: object) =>
      listErrors(
        await readProblem(
          await blaster.ask('POST', '/api/v1/nozzle-events', makeEventBody({ nozzleId, ...overrides })),
        ),
      )
    expect(await refusalOf({ kind: 'mounted', rigId: yard.rigId })).toEqual(['required /rigId'])
    expect(await refusalOf({ kind: 'retired', breakage: 'cracked' })).toEqual(['invalid /breakage'])
  })
})

describe('a bore check', () => {
  const refusalOf = async (overrides: object) => {
    const body = makeBoreCheckBody({ nozzleId: yard.nozzleId, ...overrides })
    return listErrors(await readProblem(await blaster.ask('POST', '/api/v1/bore-checks', body)))
  }

  it('needs a bit that went through or one that did not, or a gauge’s reading', async () => {
    expect(await refusalOf({ passedMm: null, refusedMm: null })).toEqual(['required /passedMm'])
    expect(await refusalOf({ refusedMm: 9.525 })).toEqual(['invalid /refusedMm'])
    expect(await refusalOf({ method: 'caliper', boreMm: 10 })).toEqual(['required /accuracyMm'])
    expect(await refusalOf({ method: 'pin', accuracyMm: 0.1 })).toEqual(['required /boreMm'])
  })

  it('of a cracked nozzle needs no bit, and leaves the nozzle’s record as it is', async () => {
    const { nozzleId } = await makeYard(owner)
    const body = makeBoreCheckBody({ nozzleId, passedMm: null, refusedMm: null, isCracked: true })
    expect(await save(blaster, 'bore-checks', body)).toMatchObject({ isCracked: true })
    const { nozzles } = await readWork(owner)
    expect(nozzles.find(({ id }) => id === nozzleId)).toMatchObject({ version: 1, isArchived: false })
  })
})

describe('a reading of gauges', () => {
  const setAside = (person: TestPerson, id: string, isSetAside: boolean) =>
    person.ask('PUT', `/api/v1/gauge-readings/${id}/set-aside`, { isSetAside })

  it('is set aside by the owner alone, with name and date, and taken back', async () => {
    const { rigId, compressorId, siteId } = yard
    const { id } = await save<{ id: string }>(
      blaster,
      'gauge-readings',
      makeGaugeReadingBody({ rigId, compressorId, siteId }),
    )
    expect((await readProblem(await setAside(blaster, id, true))).code).toBe('forbidden')
    const aside = gaugeReadingSchema.parse(await (await setAside(owner, id, true)).json())
    expect(aside).toMatchObject({ setAsideBy: 'Olive Owner', setAsideAt: now.toISOString() })
    expect(await (await setAside(owner, id, true)).json()).toEqual(aside)
    expect((await readWork(blaster)).gaugeReadings).toContainEqual(aside)
    const back = gaugeReadingSchema.parse(await (await setAside(owner, id, false)).json())
    expect(back).toMatchObject({ setAsideBy: null, setAsideAt: null })
    expect(actionsOn(id)).toEqual([
      `Bo Blaster: gauges.logged ${yard.rigName}`,
      `Olive Owner: gauges.set-aside ${yard.rigName}`,
      `Olive Owner: gauges.used-again ${yard.rigName}`,
    ])
    expect((await setAside(stranger, id, true)).status).toBe(404)
  })
})

describe('the shifts', () => {
  it('are listed newest day first, a page at a time, each once', async () => {
    const other = makePerson(server, makeCompany(server), ['owner'])
    const { rigId } = await makeYard(other)
    const days = ['2026-04-30', '2026-05-02', '2026-05-01', '2026-05-02', '2026-04-29', '2026-05-02']
    for (const localDate of days) await save(other, 'shifts', makeShiftBody({ rigId, localDate }))
    const seen: { id: string; localDate: string }[] = []
    let query = 'limit=2'
    for (let pages = 0; pages < 10; pages += 1) {
      const response = await other.ask('GET', `/api/v1/shifts?${query}`)
      const { items, nextCursor } = shiftPageSchema.parse(await response.json())
      seen.push(...items)
      if (nextCursor === null) break
      query = `limit=2&cursor=${nextCursor}`
    }
    expect(seen.map(({ localDate }) => localDate)).toEqual(days.toSorted().toReversed())
    expect(new Set(seen.map(({ id }) => id)).size).toBe(days.length)
    const wrong = await other.ask('GET', '/api/v1/shifts?cursor=nonsense')
    expect(listErrors(await readProblem(wrong))).toEqual(['invalid /cursor'])
  })
})
