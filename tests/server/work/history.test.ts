import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { importAnswerSchema } from '#shared/contracts/imports.ts'
import type { ImportAnswer } from '#shared/contracts/imports.ts'
import type { Work } from '#shared/contracts/work.ts'
import { boreCheckSchema, shiftSchema } from '#shared/contracts/work.ts'
import { auditEntries } from '../../../server/db/schema/index.ts'
import { makeRigBody } from '../../support/fleet.ts'
import { makeCompany, makePerson } from '../../support/people.ts'
import type { TestPerson } from '../../support/people.ts'
import { readProblem } from '../../support/requests.ts'
import { startServer } from '../../support/server.ts'
import type { RunningServer } from '../../support/server.ts'
import { makeMediumBody, makeNozzleBody, save } from '../../support/work.ts'

let server: RunningServer
let owner: TestPerson
beforeAll(async () => {
  server = await startServer()
})
beforeEach(async () => {
  owner = makePerson(server, makeCompany(server), ['owner'])
  await save(owner, 'rigs', makeRigBody({ name: 'Truck 1' }))
  await save(owner, 'media', makeMediumBody({ name: 'Garnet 30/60' }))
  for (const tag of ['T-14', 'T-15']) await save(owner, 'nozzles', makeNozzleBody({ tag }))
})
afterAll(() => server.stop())

async function send(csv: string, isPreview = false, person = owner): Promise<ImportAnswer> {
  const response = await person.ask('POST', '/api/v1/history/import', { csv, isPreview })
  expect(response.status, await response.clone().text()).toBe(200)
  return importAnswerSchema.parse(await response.json())
}

const readWork = async () => (await (await owner.ask('GET', '/api/v1/work')).json()) as Work
const errorsOf = ({ rows }: ImportAnswer) =>
  rows.flatMap(({ line, errors }) => errors.map(({ code, path }) => `${line}: ${code} ${path}`))
const idOf = async (tag: string) => (await readWork()).nozzles.find((nozzle) => nozzle.tag === tag)!.id

const log = [
  'date,rig,nozzle,hours,medium,is_wet,nozzle_pressure_psi,passed_in,refused_in,bore_mm,accuracy_mm,note',
  '2026-01-05,Truck 1,t-14,5.5,garnet 30/60,no,95,,,,,first day',
  '2026-01-06,Truck 1,T-14,4,,yes,,25/64,13/32,,,',
  '2026-01-06,Truck 1,T-14,4,,yes,,,,,,',
  '2026-07-07,truck 1,T-15,3,,,,,,,,',
  '2026-07-08,,T-14,,,,,,,10.2,0.1,from the shop',
].join('\n')

describe('a log of hours and checks', () => {
  it('is looked at row by row before anything is written', async () => {
    const preview = await send(log, true)
    expect(preview).toMatchObject({ errors: [], written: 0 })
    expect(preview.rows.map(({ line, name, errors }) => [line, name, errors.length])).toEqual([
      [2, 't-14', 0],
      [3, 'T-14', 0],
      [4, 'T-14', 0],
      [5, 'T-15', 0],
      [6, 'T-14', 0],
    ])
    const { shifts, boreChecks, events } = await readWork()
    expect([shifts, boreChecks, events]).toEqual([[], [], []])
  })

  it('becomes shifts, checks, and what was mounted when, at the hours of the company’s clocks', async () => {
    expect((await send(log)).written).toBe(6)
    const { shifts, boreChecks, events, media, nozzles } = await readWork()
    const byDay = shifts.toSorted((one, other) => (one.at < other.at ? -1 : 1))
    for (const shift of shifts) shiftSchema.parse(shift)
    expect(byDay.map(({ localDate, blastHours, isWet }) => [localDate, blastHours, isWet])).toEqual([
      ['2026-01-05', 5.5, false],
      ['2026-01-06', 4, true],
      ['2026-01-06', 4, true],
      ['2026-07-07', 3, false],
    ])
    // Denver is seven hours behind in winter and six in summer.
    expect(byDay[0]).toMatchObject({
      at: '2026-01-05T12:00:00-07:00',
      mediumId: media[0]!.id,
      note: 'first day',
    })
    expect(byDay[0]!.nozzlePressureKpa).toBeCloseTo(95 * 6.894757, 3)
    expect(byDay[3]!.at).toBe('2026-07-07T12:00:00-06:00')
    const nameOf = (id: string) => nozzles.find((nozzle) => nozzle.id === id)!.tag
    expect(
      events
        .map(({ at, kind, nozzleId, outletIndex }) => `${at} ${kind} ${nameOf(nozzleId)} ${outletIndex}`)
        .sort(),
    ).toEqual(['2026-01-05T00:00:00-07:00 mounted T-14 0', '2026-07-07T00:00:00-06:00 mounted T-15 0'])
    const checks = boreChecks.toSorted((one, other) => (one.at < other.at ? -1 : 1))
    for (const check of checks) boreCheckSchema.parse(check)
    expect(checks).toMatchObject([
      { at: '2026-01-06T18:00:00-07:00', method: 'bits', passedMm: 9.921875, refusedMm: 10.31875 },
      { method: 'caliper', boreMm: 10.2, accuracyMm: 0.1, rigId: null },
    ])
  })

  it('may be imported again when it has grown: what is there already is not doubled', async () => {
    await send(log)
    expect((await send(log)).written).toBe(0)
    const grown = await send(`${log}\n2026-07-09,Truck 1,T-15,2,,,,,,,,`)
    expect(grown.written).toBe(1)
    const { shifts, events } = await readWork()
    expect(shifts).toHaveLength(5)
    expect(events).toHaveLength(2)
  })

  it('is refused whole for any error, each told at its heading', async () => {
    const csv = [
      'date,rig,nozzle,hours,passed_in,refused_in,bore_mm,accuracy_mm,outlet',
      '2026-02-30,Truck 1,T-14,5,,,,,',
      '2026-03-01,Truck 9,T-99,5,,,,,',
      '2026-03-01,,T-14,5,,,,,',
      '2026-03-01,Truck 1,,,25/64,,,,',
      '2026-03-01,Truck 1,T-14,25,,,,,',
      '2026-03-01,Truck 1,T-14,,,,,,',
      '2026-03-01,Truck 1,T-14,,13/32,25/64,,,',
      '2026-03-01,Truck 1,T-14,,25/64,,10,0.1,',
      '2026-03-01,Truck 1,T-14,,,,10,,',
      '2026-03-01,Truck 1,T-14,5,,,,,7',
      '2026-03-01,Truck 1,T-14,5,,,,,',
    ].join('\n')
    const answer = await send(csv)
    expect(errorsOf(answer)).toEqual([
      '2: invalid date',
      '3: unknown-reference rig',
      '3: unknown-reference nozzle',
      '4: required rig',
      '5: required nozzle',
      '6: too-big hours',
      '7: required hours',
      '8: invalid refused_in',
      '9: one-of-two bore_mm',
      '10: required accuracy_mm',
      '11: too-big outlet',
    ])
    expect(answer.written).toBe(0)
    expect((await readWork()).shifts).toEqual([])
  })

  it('is on record with how much came of it', async () => {
    await send(log)
    const entries = server.database.queries
      .select()
      .from(auditEntries)
      .all()
      .filter(({ companyId, action }) => companyId === owner.company.id && action === 'history.imported')
    expect(entries.map(({ changes }) => changes)).toEqual([
      { shifts: { from: 0, to: 4 }, boreChecks: { from: 0, to: 2 }, mounted: { from: 0, to: 2 } },
    ])
  })

  it('means the nozzle that is in use where an archived one has its tag', async () => {
    const old = await idOf('T-14')
    await owner.ask('POST', `/api/v1/nozzles/${old}/archive`, { version: 1 })
    const { id } = await save<{ id: string }>(owner, 'nozzles', makeNozzleBody({ tag: 'T-14' }))
    await send(log)
    expect((await readWork()).boreChecks.map(({ nozzleId }) => nozzleId)).toEqual([id, id])
  })

  it('is the owner’s to import, with the company’s own things', async () => {
    const blaster = makePerson(server, owner.company, ['blaster'])
    const refused = await blaster.ask('POST', '/api/v1/history/import', { csv: log, isPreview: true })
    expect((await readProblem(refused)).code).toBe('forbidden')
    const stranger = makePerson(server, makeCompany(server), ['owner'])
    expect(errorsOf(await send(log, false, stranger))).toContain('2: unknown-reference rig')
  })
})
