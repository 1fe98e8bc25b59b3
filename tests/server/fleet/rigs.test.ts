import { randomUUID } from 'node:crypto'
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest'
import { fleetSchema, rigPageSchema, todaySchema } from '#shared/contracts/rigs.ts'
import type { Fleet, NewRig, Today } from '#shared/contracts/rigs.ts'
import { auditEntries } from '../../../server/db/schema/index.ts'
import { changeOf, makeCompressorBody, makeRigBody, makeSiteBody } from '../../support/fleet.ts'
import { makeCompany, makePerson } from '../../support/people.ts'
import type { TestPerson } from '../../support/people.ts'
import { listErrors, readProblem } from '../../support/requests.ts'
import { startServer } from '../../support/server.ts'
import type { RunningServer } from '../../support/server.ts'

let server: RunningServer
const noon = new Date('2026-05-03T12:00:00Z')
let now = noon
let owner: TestPerson
let blaster: TestPerson
let stranger: TestPerson

beforeAll(async () => {
  server = await startServer({}, () => now)
  const company = makeCompany(server)
  owner = makePerson(server, company, ['owner'], { name: 'Olive Owner' })
  blaster = makePerson(server, company, ['blaster'], { name: 'Bert Blaster' })
  stranger = makePerson(server, makeCompany(server))
})
afterEach(() => {
  now = noon
})
afterAll(() => server.stop())

async function save<Body extends { id: string }>(
  person: TestPerson,
  kind: string,
  body: Body,
): Promise<Body> {
  expect((await person.ask('POST', `/api/v1/${kind}`, body)).status).toBe(201)
  return body
}

async function readFleet(person: TestPerson): Promise<Fleet> {
  return fleetSchema.parse(await (await person.ask('GET', '/api/v1/fleet')).json())
}

describe('a rig', () => {
  it('keeps its whole outfit: two outlets, measured hoses, a curve of what it blasts', async () => {
    const compressor = await save(owner, 'compressors', makeCompressorBody())
    const site = await save(owner, 'sites', makeSiteBody())
    const [outlet] = makeRigBody().outlets
    const measured = {
      insideDiameterMm: 31.75,
      lengthM: null,
      couplings: 0,
      measured: { dropKpa: 34.5, freeAirM3Min: 5.24 },
      roughnessMm: null,
    }
    const body: NewRig = makeRigBody({
      outlets: [
        outlet!,
        {
          ...outlet!,
          hose: measured,
          whip: measured,
          regulatorKpa: 620,
          nozzle: { ...outlet!.nozzle, boreNowMm: 9 },
        },
      ],
      airLine: null,
      pot: null,
      toolsFreeAirM3Min: 0.4,
      compressorId: compressor.id,
      siteId: site.id,
      hour: {
        abrasive: 'coal-slag',
        mediaRateKgPerH: 500,
        bagMassKg: 25,
        isWet: true,
        waterRateLPerMin: 2,
        tankL: 400,
      },
    })
    await save(owner, 'rigs', body)
    expect(await (await owner.ask('GET', `/api/v1/rigs/${body.id}`)).json()).toMatchObject(body)
  })

  it.each([
    ['compressorId', 'compressors', makeCompressorBody],
    ['siteId', 'sites', makeSiteBody],
  ] as const)('has a %s of its own company that is there', async (field, kind, make) => {
    const theirs = await save(stranger, kind, make())
    const deleted = await save(owner, kind, make())
    await owner.ask('DELETE', `/api/v1/${kind}/${deleted.id}?version=1`)
    const archived = await save(owner, kind, make())
    await owner.ask('POST', `/api/v1/${kind}/${archived.id}/archive`, { version: 1 })
    const rig = await save(owner, 'rigs', makeRigBody())
    for (const id of [randomUUID(), theirs.id, deleted.id, archived.id]) {
      const refused = [
        await owner.ask('POST', '/api/v1/rigs', makeRigBody({ [field]: id })),
        await owner.ask('PUT', `/api/v1/rigs/${rig.id}`, changeOf({ ...rig, version: 1 }, { [field]: id })),
        await blaster.ask('PUT', `/api/v1/rigs/${rig.id}/today`, {
          localDate: '2026-05-03',
          compressorId: null,
          siteId: null,
          [field]: id,
        }),
      ]
      for (const response of refused) {
        const problem = await readProblem(response)
        expect(problem.status).toBe(422)
        expect(listErrors(problem)).toEqual([`unknown-reference /${field}`])
      }
    }
  })

  it('names both references that are not there', async () => {
    const body = makeRigBody({ compressorId: randomUUID(), siteId: randomUUID() })
    const problem = await readProblem(await owner.ask('POST', '/api/v1/rigs', body))
    expect(listErrors(problem)).toEqual(['unknown-reference /compressorId', 'unknown-reference /siteId'])
  })

  it('has an outlet, and a nozzle whose number and bore agree', async () => {
    const [outlet] = makeRigBody().outlets
    const wrong: [Partial<NewRig>, string][] = [
      [{ outlets: [] }, 'too-few /outlets'],
      [
        { outlets: [{ ...outlet!, nozzle: { ...outlet!.nozzle, numberSixteenths: 6 } }] },
        'number-and-bore-differ /outlets/0/nozzle/newBoreMm',
      ],
      [
        { outlets: [{ ...outlet!, nozzle: { ...outlet!.nozzle, boreNowMm: 7 } }] },
        'bore-now-under-new /outlets/0/nozzle/boreNowMm',
      ],
    ]
    for (const [overrides, expected] of wrong) {
      const problem = await readProblem(await owner.ask('POST', '/api/v1/rigs', makeRigBody(overrides)))
      expect(listErrors(problem)).toEqual([expected])
    }
  })

  it('is one short line of a list whose page of a hundred stays under 20 kB', async () => {
    const person = makePerson(server, makeCompany(server), ['owner'])
    for (let index = 1; index <= 101; index += 1) {
      const name = `${'Long name of a rig, as long as one may be, which is '.padEnd(56, '.')} ${100 + index}`
      expect(name).toHaveLength(60)
      await save(person, 'rigs', makeRigBody({ name }))
    }
    const text = await (await person.ask('GET', '/api/v1/rigs?limit=100')).text()
    expect(Buffer.byteLength(text)).toBeLessThanOrEqual(20_000)
    const page = rigPageSchema.parse(JSON.parse(text))
    expect(page.items).toHaveLength(100)
    const rest = await person.ask('GET', `/api/v1/rigs?limit=100&cursor=${page.nextCursor}`)
    const last = rigPageSchema.parse(await rest.json())
    expect(last).toMatchObject({
      items: [{ name: expect.stringMatching(/201$/) as string }],
      nextCursor: null,
    })
  })
})

describe('the fleet', () => {
  it('is everything of the company, archived too, deleted not, and nothing of another', async () => {
    const person = makePerson(server, makeCompany(server), ['owner'])
    const compressor = await save(person, 'compressors', makeCompressorBody())
    const site = await save(person, 'sites', makeSiteBody())
    const rig = await save(person, 'rigs', makeRigBody({ compressorId: compressor.id, siteId: site.id }))
    const archived = await save(person, 'rigs', makeRigBody())
    const deleted = await save(person, 'rigs', makeRigBody())
    await person.ask('POST', `/api/v1/rigs/${archived.id}/archive`, { version: 1 })
    await person.ask('DELETE', `/api/v1/rigs/${deleted.id}?version=1`)
    const fleet = await readFleet(person)
    expect(fleet.compressors.map(({ id }) => id)).toEqual([compressor.id])
    expect(fleet.sites.map(({ id }) => id)).toEqual([site.id])
    expect(fleet.rigs.map(({ id, isArchived }) => [id, isArchived])).toEqual([
      [rig.id, false],
      [archived.id, true],
    ])
    expect(fleet.today).toEqual([])
  })
})

describe('what a rig has today', () => {
  async function makeFleet() {
    const compressor = await save(owner, 'compressors', makeCompressorBody())
    const other = await save(owner, 'compressors', makeCompressorBody())
    const site = await save(owner, 'sites', makeSiteBody())
    const rig = await save(owner, 'rigs', makeRigBody({ compressorId: compressor.id }))
    const pick = (person: TestPerson, picked: Partial<Today>) =>
      person.ask('PUT', `/api/v1/rigs/${rig.id}/today`, {
        localDate: '2026-05-03',
        compressorId: null,
        siteId: null,
        ...picked,
      })
    const picksOf = async () => (await readFleet(owner)).today.filter(({ rigId }) => rigId === rig.id)
    const auditOf = () =>
      server.database.queries
        .select()
        .from(auditEntries)
        .all()
        .filter(({ subjectId, action }) => subjectId === rig.id && action === 'rig.today-picked')
    return { compressor, other, site, rig, pick, picksOf, auditOf }
  }

  it('is picked by a blaster, and seen by everybody with the blaster’s name', async () => {
    const { other, site, pick, picksOf, auditOf, rig } = await makeFleet()
    const response = await pick(blaster, { compressorId: other.id, siteId: site.id })
    expect(response.status).toBe(200)
    const picked = todaySchema.parse(await response.json())
    expect(picked).toMatchObject({
      rigId: rig.id,
      localDate: '2026-05-03',
      compressorId: other.id,
      siteId: site.id,
      pickedBy: 'Bert Blaster',
    })
    expect(await picksOf()).toEqual([picked])
    expect(auditOf()).toHaveLength(1)
  })

  it('is the last pick of the day; the same pick again is no other', async () => {
    const { other, site, pick, picksOf, auditOf } = await makeFleet()
    await pick(blaster, { compressorId: other.id })
    const first: unknown = await (await pick(blaster, { siteId: site.id })).json()
    expect(await (await pick(owner, { siteId: site.id })).json()).toEqual(first)
    expect(await picksOf()).toEqual([first])
    expect(auditOf().map(({ changes }) => changes['compressorId'])).toEqual([
      { from: null, to: other.id },
      { from: other.id, to: null },
    ])
  })

  it('stays with its day: another day has its own, and old ones are no longer sent', async () => {
    const { other, pick, picksOf, rig } = await makeFleet()
    const dates = ['2026-05-01', '2026-05-02', '2026-05-03', '2026-05-04', '2026-05-05']
    for (const localDate of dates) await pick(blaster, { localDate, compressorId: other.id })
    // At noon in Greenwich it is the 3rd west of it and, past 12 hours east, the 4th: yesterday is the 2nd or the 3rd.
    expect((await picksOf()).map(({ localDate }) => localDate)).toEqual([
      '2026-05-02',
      '2026-05-03',
      '2026-05-04',
    ])
    const datesAt = async (moment: string) => {
      now = new Date(moment)
      const { today } = await readFleet(makePerson(server, owner.company))
      return today.filter(({ rigId }) => rigId === rig.id).map(({ localDate }) => localDate)
    }
    // On an island 12 hours behind it is still the 3rd, and the 2nd is its yesterday.
    expect(await datesAt('2026-05-04T11:59:00Z')).toContain('2026-05-02')
    expect(await datesAt('2026-05-04T12:00:00Z')).toEqual(['2026-05-03', '2026-05-04', '2026-05-05'])
  })

  it('is not for another company, nor for a rig that is deleted', async () => {
    const { rig, pick } = await makeFleet()
    expect((await readProblem(await pick(stranger, {}))).status).toBe(404)
    await owner.ask('DELETE', `/api/v1/rigs/${rig.id}?version=1`)
    expect((await readProblem(await pick(blaster, {}))).status).toBe(404)
  })

  it('is of a day that exists', async () => {
    const { pick } = await makeFleet()
    for (const localDate of ['2026-02-30', 'today', '1889-01-01', '2026-5-3']) {
      const problem = await readProblem(await pick(blaster, { localDate }))
      expect(listErrors(problem)).toContain('invalid /localDate')
    }
  })
})
