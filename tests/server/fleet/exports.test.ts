import { parse } from 'csv-parse/sync'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { importAnswerSchema } from '#shared/contracts/imports.ts'
import type { Role } from '#shared/contracts/permissions.ts'
import type { Fleet, NewRig } from '#shared/contracts/rigs.ts'
import { auditEntries } from '../../../server/db/schema/index.ts'
import { describeTable, writeTable } from '../../../server/tables/exportTable.ts'
import { makeCompressorBody, makeRigBody, makeSiteBody } from '../../support/fleet.ts'
import { makeCompany, makePerson } from '../../support/people.ts'
import type { TestPerson } from '../../support/people.ts'
import { readProblem } from '../../support/requests.ts'
import { startServer } from '../../support/server.ts'
import type { RunningServer } from '../../support/server.ts'
import { readZip } from './readZip.ts'

let server: RunningServer

beforeAll(async () => {
  server = await startServer({}, () => new Date('2026-05-03T12:00:00Z'))
})
afterAll(() => server.stop())

const makeOwner = (name = 'Olive Owner') => makePerson(server, makeCompany(server), ['owner'], { name })

async function exportOf(person: TestPerson): Promise<Map<string, string>> {
  const response = await person.ask('GET', '/api/v1/export.zip')
  expect(response.status).toBe(200)
  expect(response.headers.get('content-type')).toBe('application/zip')
  expect(response.headers.get('content-disposition')).toBe(
    'attachment; filename=sixteenth-data-2026-05-03.zip',
  )
  return readZip(Buffer.from(await response.arrayBuffer()))
}

const rowsOf = (text: string | undefined) =>
  parse(text ?? '', { bom: true, columns: true }) as unknown as Record<string, string>[]

async function save(person: TestPerson, kind: string, body: { id: string }): Promise<void> {
  expect((await person.ask('POST', `/api/v1/${kind}`, body)).status).toBe(201)
}

const readFleet = async (person: TestPerson) =>
  (await (await person.ask('GET', '/api/v1/fleet')).json()) as Fleet

/** A fleet with everything in it that a table may carry. */
async function fillFleet(person: TestPerson) {
  const compressor = makeCompressorBody({
    name: 'Yard, "the big one"',
    ratedFreeAirM3Min: 10.618817472,
    curve: [
      { pressureKpa: 689.4757293168361, freeAirM3Min: 10.618817472 },
      { pressureKpa: 861.8446616460451, freeAirM3Min: 1.125 },
    ],
    setPressureKpa: 689.4757293168361,
    unloadPressureKpa: 1250,
    conditionFactor: 0.88,
    fullLoadFuelLPerH: 1.125,
    ownership: 'rented',
    rentedFrom: '2026-05-01',
    rentedUntil: null,
  })
  const archived = makeCompressorBody({ name: '=HYPERLINK("x")', unloadPressureKpa: null, engine: null })
  const site = makeSiteBody({ name: 'Quarry; north', altitudeM: -12.5, relativeHumidityPct: null })
  await save(person, 'compressors', compressor)
  await save(person, 'compressors', archived)
  await save(person, 'sites', site)
  const [outlet] = makeRigBody().outlets
  const rig: NewRig = makeRigBody({
    name: 'Ñandú 1',
    compressorId: compressor.id,
    siteId: site.id,
    pot: { insideDiameterMm: 31.75, lossK: 8.5, isShared: false },
    outlets: [
      outlet!,
      {
        regulatorKpa: 620,
        hose: {
          insideDiameterMm: 31.75,
          lengthM: null,
          couplings: 0,
          measured: { dropKpa: 34.473786465841805, freeAirM3Min: 5.238616619520001 },
          roughnessMm: 0.02,
        },
        whip: null,
        nozzle: {
          ...outlet!.nozzle,
          numberSixteenths: null,
          newBoreMm: 8.2,
          boreNowMm: 9.1,
          shape: 'straight',
        },
      },
    ],
    toolsFreeAirM3Min: 0.125,
    hour: {
      ...makeRigBody().hour,
      mediaRateKgPerH: 1250,
      bagMassKg: 25,
      isWet: true,
      waterRateLPerMin: 2,
      tankL: 1125,
    },
  })
  await save(person, 'rigs', rig)
  await save(
    person,
    'rigs',
    makeRigBody({ name: 'Plain', airLine: null, pot: null, compressorId: archived.id }),
  )
  const plain = (await readFleet(person)).rigs.find(({ name }) => name === 'Plain')!
  await person.ask('POST', `/api/v1/rigs/${plain.id}/archive`, { version: 1 })
  await person.ask('POST', `/api/v1/compressors/${archived.id}/archive`, { version: 1 })
  const deleted = makeRigBody({ name: 'Gone' })
  await save(person, 'rigs', deleted)
  await person.ask('DELETE', `/api/v1/rigs/${deleted.id}?version=1`)
  const today = { localDate: '2026-05-03', compressorId: compressor.id, siteId: null }
  expect((await person.ask('PUT', `/api/v1/rigs/${rig.id}/today`, today)).status).toBe(200)
  return { site }
}

describe('the company’s data', () => {
  it('is a table of each kind with a readme that names every column', async () => {
    const owner = makeOwner()
    await fillFleet(owner)
    const files = await exportOf(owner)
    const tables = [
      ...['company', 'people', 'compressors', 'sites', 'rigs', 'rig_outlets', 'todays_picks'],
      ...['nozzles', 'nozzle_events', 'media', 'shifts', 'bore_checks', 'gauge_readings'],
    ]
    expect([...files.keys()].sort()).toEqual([...tables.map((name) => `${name}.csv`), 'readme.txt'].sort())
    const readme = files.get('readme.txt')!
    for (const name of tables) {
      const text = files.get(`${name}.csv`)!
      expect(readme).toContain(`${name}.csv`)
      const headings = text.replace('\ufeff', '').split('\r\n')[0]!.split(',')
      for (const heading of headings.filter((one) => !/outlet_\d/.test(one))) {
        expect(readme).toContain(`  ${heading}: `)
      }
    }
    expect(rowsOf(files.get('company.csv'))).toEqual([
      { name: 'Ridge Line Blasting', currency: 'USD', language: 'en', time_zone: 'America/Denver' },
    ])
    expect(rowsOf(files.get('people.csv'))).toEqual([
      { name: 'Olive Owner', roles: 'owner', state: 'active' },
    ])
    expect(rowsOf(files.get('sites.csv'))).toMatchObject([{ name: 'Quarry; north', altitude_m: '-12.5' }])
    expect(rowsOf(files.get('rigs.csv')).map(({ name }) => name)).toEqual(['Plain', 'Ñandú 1'])
    expect(rowsOf(files.get('rig_outlets.csv')).map(({ rig, outlet }) => `${rig} ${outlet}`)).toEqual([
      'Plain 1',
      'Ñandú 1 1',
      'Ñandú 1 2',
    ])
    expect(rowsOf(files.get('todays_picks.csv'))).toEqual([
      {
        local_date: '2026-05-03',
        rig: 'Ñandú 1',
        compressor: 'Yard, "the big one"',
        site: '',
        picked_by: 'Olive Owner',
        picked_at: '2026-05-03T12:00:00.000Z',
      },
    ])
  })

  it('runs nothing in a spreadsheet', async () => {
    const owner = makeOwner('=cmd|calc')
    for (const name of ['=1+1', '+1+1', '-2+3', '@SUM(A1)'])
      await save(owner, 'sites', makeSiteBody({ name }))
    for (const [name, text] of await exportOf(owner)) {
      if (!name.endsWith('.csv')) continue
      const cells = (parse(text, { bom: true }) as string[][]).flat()
      for (const cell of cells) expect(cell).not.toMatch(/^(?!-?[\d.]+$)[=+\-@\t\r]/)
    }
  })

  it('has names for the owner, and who did what for the admin only', async () => {
    const owner = makeOwner()
    await save(owner, 'sites', makeSiteBody({ name: 'Harbor' }))
    const admin = makePerson(server, owner.company, ['admin'], { name: 'Ida Admin' })
    const files = await exportOf(admin)
    expect(rowsOf(files.get('people.csv')).map(({ name }) => name)).toEqual(['Ida Admin', 'Olive Owner'])
    expect(rowsOf(files.get('audit.csv'))).toMatchObject([{ action: 'site.created', subject: 'Harbor' }])
    expect((await exportOf(owner)).has('audit.csv')).toBe(false)
    const withoutLog = [...files].filter(([name]) => name !== 'audit.csv').map(([, text]) => text)
    const ofOwner = [...(await exportOf(owner)).values()]
    expect([...withoutLog, ...ofOwner].join('')).not.toContain('@example.test')
  })

  it('holds nobody up for as long as the log is long', async () => {
    const admin = makePerson(server, makeCompany(server), ['admin'])
    const entry = server.database.connection.prepare(
      `insert into audit_entries (company_id, at, actor_name, action, subject, changes)
        values (?, '2026-05-03T11:00:00.000Z', 'Ida Admin', 'rig.changed', ?, '{}')`,
    )
    const count = 20_000
    server.database.connection.transaction(() => {
      for (let number = 0; number < count; number += 1) entry.run(admin.company.id, `Rig ${number}`)
    })()
    const start = performance.now()
    let last = start
    let longestMs = 0
    const look = setInterval(() => {
      longestMs = Math.max(longestMs, performance.now() - last)
      last = performance.now()
    }, 2)
    const response = await admin.ask('GET', '/api/v1/export.zip')
    clearInterval(look)
    longestMs = Math.max(longestMs, performance.now() - last)
    expect(longestMs).toBeLessThan((performance.now() - start) / 2)
    const files = readZip(Buffer.from(await response.arrayBuffer()))
    const subjects = rowsOf(files.get('audit.csv')).map(({ subject }) => subject)
    expect(subjects).toEqual(Array.from({ length: count }, (_, index) => `Rig ${count - 1 - index}`))
  })

  it('is on record as exported, by whom', async () => {
    const owner = makeOwner()
    await exportOf(owner)
    const entries = server.database.queries
      .select()
      .from(auditEntries)
      .all()
      .filter(({ companyId }) => companyId === owner.company.id)
    expect(entries.map(({ action, actorName }) => `${actorName} ${action}`)).toEqual([
      'Olive Owner data.exported',
    ])
  })

  it('is not for a blaster or an estimator, and never another company’s', async () => {
    const owner = makeOwner()
    await save(owner, 'sites', makeSiteBody({ name: 'Our secret quarry' }))
    for (const role of ['blaster', 'estimator'] satisfies Role[]) {
      const response = await makePerson(server, owner.company, [role]).ask('GET', '/api/v1/export.zip')
      expect((await readProblem(response)).code).toBe('forbidden')
    }
    const theirs = await exportOf(makeOwner())
    expect([...theirs.values()].join('')).not.toContain('Our secret quarry')
  })

  it('leaves prices out for whoever may not see them', () => {
    const table = {
      name: 'media.csv',
      about: 'Media.',
      rows: [{ name: 'Garnet', price: 1250 }],
      columns: [
        { heading: 'name', description: 'text', write: ({ name }: { name: string }) => name },
        {
          heading: 'price_cents',
          description: 'a bag',
          isPrice: true,
          write: ({ price }: { price: number }) => price,
        },
      ],
    }
    type Row = { name: string; price: number }
    expect(writeTable<Row>(table, ['admin']).text).toBe('\ufeffname\r\nGarnet\r\n')
    expect(describeTable<Row>(table, ['admin'])).not.toContain('price')
    expect(writeTable<Row>(table, ['owner', 'admin']).text).toBe('\ufeffname,price_cents\r\nGarnet,1250\r\n')
    expect(describeTable<Row>(table, ['owner'])).toContain('price_cents')
  })

  it('is imported again as it was, to the last digit', async () => {
    const owner = makeOwner()
    const { site } = await fillFleet(owner)
    const files = await exportOf(owner)
    const other = makeOwner('Other Owner')
    await save(other, 'sites', site)
    for (const kind of ['compressors', 'rigs']) {
      const response = await other.ask('POST', `/api/v1/${kind}/import`, {
        csv: files.get(`${kind}.csv`),
        isPreview: false,
      })
      const answer = importAnswerSchema.parse(await response.json())
      expect(answer.errors).toEqual([])
      expect(answer.rows.flatMap(({ errors }) => errors)).toEqual([])
      expect(answer.written).toBe(2)
    }
    const before = await readFleet(owner)
    const after = await readFleet(other)
    const nameOf = (fleet: Fleet, id: string | null) => fleet.compressors.find((one) => one.id === id)?.name
    const same = { id: '', version: 0, createdAt: '', updatedAt: '', updatedBy: '' }
    expect(after.compressors.map((one) => ({ ...one, ...same }))).toEqual(
      before.compressors.map((one) => ({ ...one, ...same })),
    )
    const plain = (fleet: Fleet) =>
      fleet.rigs.map((rig) => ({ ...rig, ...same, compressorId: nameOf(fleet, rig.compressorId) }))
    expect(plain(after)).toEqual(plain(before))
  })
})
