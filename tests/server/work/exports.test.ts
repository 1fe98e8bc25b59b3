import { parse } from 'csv-parse/sync'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Role } from '#shared/contracts/permissions.ts'
import { makeCompany, makePerson } from '../../support/people.ts'
import type { TestPerson } from '../../support/people.ts'
import { startServer } from '../../support/server.ts'
import type { RunningServer } from '../../support/server.ts'
import {
  makeBoreCheckBody,
  makeEventBody,
  makeGaugeReadingBody,
  makeNozzleBody,
  makeShiftBody,
  makeYard,
  save,
} from '../../support/work.ts'
import type { Yard } from '../../support/work.ts'
import { readZip } from '../fleet/readZip.ts'

let server: RunningServer
let owner: TestPerson
let yard: Yard
beforeAll(async () => {
  server = await startServer()
  owner = makePerson(server, makeCompany(server), ['owner', 'blaster'], { name: 'Olive Owner' })
  yard = await makeYard(owner)
  const { rigId, nozzleId, mediumId, compressorId, siteId } = yard
  await save(owner, 'nozzles', makeNozzleBody({ tag: '=1+1', priceMinor: 91_817, boxRigId: rigId }))
  const mounted = makeEventBody({ nozzleId, kind: 'mounted', rigId, outletIndex: 0 })
  await save(owner, 'nozzle-events', mounted)
  const shift = makeShiftBody({ rigId, mediumId, areaM2: 42.5 })
  await save(owner, 'shifts', shift)
  await save(owner, 'shifts', makeShiftBody({ rigId, blastHours: 4, supersedesId: shift.id }))
  await save(owner, 'bore-checks', makeBoreCheckBody({ nozzleId, rigId }))
  await save(owner, 'gauge-readings', makeGaugeReadingBody({ rigId, compressorId, siteId }))
})
afterAll(() => server.stop())

async function exportFor(roles: Role[]) {
  const person = makePerson(server, owner.company, roles)
  const response = await person.ask('GET', '/api/v1/export.zip')
  expect(response.status).toBe(200)
  return readZip(Buffer.from(await response.arrayBuffer()))
}
const rowsOf = (text: string | undefined) =>
  parse(text ?? '', { bom: true, columns: true }) as unknown as Record<string, string>[]

describe('the exported work', () => {
  it('names rigs, nozzles and media as people do, and what corrects what', async () => {
    const files = await exportFor(['owner'])
    const { rigName: rig, tag: nozzle, mediumName: medium } = yard
    expect(rowsOf(files.get('nozzle_events.csv'))).toMatchObject([
      { nozzle, event: 'mounted', rig, outlet: '1', at: '2026-05-03T07:10:00-06:00', by: 'Olive Owner' },
    ])
    const shifts = rowsOf(files.get('shifts.csv'))
    expect(shifts).toHaveLength(2)
    const [first, second] = shifts.toSorted(
      (one, other) => one['supersedes_id']!.length - other['supersedes_id']!.length,
    )
    expect(first).toMatchObject({
      date: '2026-05-03',
      rig,
      hours: '5.5',
      medium,
      is_wet: 'no',
      area_m2: '42.5',
    })
    expect(second).toMatchObject({ hours: '4', supersedes_id: first!['id'] })
    expect(rowsOf(files.get('bore_checks.csv'))).toMatchObject([
      { nozzle, rig, method: 'bits', passed_mm: '9.921875', refused_mm: '10.31875', is_cracked: 'no' },
    ])
    expect(rowsOf(files.get('gauge_readings.csv'))).toMatchObject([
      { rig, outlet: '1', compressor_pressure_kpa: '690', nozzle_pressure_kpa: '620', set_aside_by: '' },
    ])
    expect(rowsOf(files.get('media.csv')).map(({ name }) => name)).toEqual([medium])
  })

  it('has prices for who may see them, and neither column nor price for an admin', async () => {
    const forOwner = await exportFor(['owner'])
    const marked = rowsOf(forOwner.get('nozzles.csv')).find(({ tag }) => tag === "'=1+1")
    expect(marked).toMatchObject({ price_minor: '91817', box: yard.rigName, number: '6' })
    const forAdmin = await exportFor(['admin'])
    expect(rowsOf(forAdmin.get('nozzles.csv'))).toHaveLength(2)
    for (const text of forAdmin.values()) expect(text).not.toMatch(/price|91817/)
  })
})
