import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { importAnswerSchema } from '#shared/contracts/imports.ts'
import type { ImportAnswer } from '#shared/contracts/imports.ts'
import { recordLimits } from '#shared/contracts/limits.ts'
import type { Fleet } from '#shared/contracts/rigs.ts'
import { auditEntries } from '../../../server/db/schema/index.ts'
import {
  choiceCell,
  curveCell,
  dateCell,
  numberCell,
  quantityCell,
  textCell,
  yesNoCell,
} from '../../../server/tables/cells.ts'
import { makeCompressorBody, makeSiteBody } from '../../support/fleet.ts'
import { makeCompany, makePerson } from '../../support/people.ts'
import type { TestPerson } from '../../support/people.ts'
import { listErrors, readProblem } from '../../support/requests.ts'
import { startServer } from '../../support/server.ts'
import type { RunningServer } from '../../support/server.ts'

let server: RunningServer
let owner: TestPerson

beforeAll(async () => {
  server = await startServer()
})
beforeEach(() => {
  owner = makePerson(server, makeCompany(server), ['owner'], { name: 'Olive Owner' })
})
afterAll(() => server.stop())

async function send(kind: string, csv: string, isPreview: boolean): Promise<ImportAnswer> {
  const response = await owner.ask('POST', `/api/v1/${kind}/import`, { csv, isPreview })
  expect(response.status).toBe(200)
  return importAnswerSchema.parse(await response.json())
}

const readFleet = async () => (await (await owner.ask('GET', '/api/v1/fleet')).json()) as Fleet

function errorsOf({ rows }: ImportAnswer): string[] {
  return rows.flatMap(({ line, errors }) => errors.map(({ code, path }) => `${line}: ${code} ${path}`))
}

const actionsOf = () =>
  server.database.queries
    .select()
    .from(auditEntries)
    .all()
    .filter(({ companyId }) => companyId === owner.company.id)
    .map(({ action, subject }) => `${action} ${subject}`)

/** 1 ft³ = 0.3048³ m³ and 1 psi = 4.4482216152605 N / (0.0254 m)²: the definitions, worked by hand here. */
const m3PerFt3 = 0.3048 ** 3
const kpaPerPsi = 4.4482216152605 / 0.0254 ** 2 / 1000

describe('a file of compressors', () => {
  it('is read in the trade’s words, each cell in its own unit or in its heading’s', async () => {
    const csv = [
      'Name,Free air (cfm),set_pressure_psi,Cooling,full_load_fuel_l_h,ownership,rented_from,rented_until',
      'Big one,375,100,aftercooled,24,owned,,',
      '"Rental, spring",10.6 m3/min,7 bar,Bare,,rented,2026-05-01,2026-06-30',
    ].join('\n')
    const preview = await send('compressors', csv, true)
    expect(preview).toEqual({
      errors: [],
      rows: [
        { line: 2, name: 'Big one', errors: [] },
        { line: 3, name: 'Rental, spring', errors: [] },
      ],
      written: 0,
    })
    expect((await readFleet()).compressors).toEqual([])

    expect((await send('compressors', csv, false)).written).toBe(2)
    const [big, rental] = (await readFleet()).compressors
    expect(big).toMatchObject({ name: 'Big one', cooling: 'aftercooled', fullLoadFuelLPerH: 24, version: 1 })
    expect(big!.ratedFreeAirM3Min).toBeCloseTo(375 * m3PerFt3, 9)
    expect(big!.setPressureKpa).toBeCloseTo(100 * kpaPerPsi, 9)
    expect(rental).toMatchObject({
      ratedFreeAirM3Min: 10.6,
      setPressureKpa: 700,
      cooling: 'bare',
      ownership: 'rented',
      rentedFrom: '2026-05-01',
      rentedUntil: '2026-06-30',
      updatedBy: 'Olive Owner',
    })
    expect(actionsOf()).toEqual([
      'compressor.created Big one',
      'compressor.created Rental, spring',
      'fleet.imported compressors',
    ])
  })

  it.each([
    [
      'a semicolon between, as spreadsheets in Spanish write',
      'name;free_air_m3_min;set_pressure_bar\nUno;10,6;7\n',
    ],
    [
      'a byte order mark and Windows line ends',
      '\ufeffname,free_air_m3_min,set_pressure_bar\r\nUno,10.6,7\r\n',
    ],
    [
      'a tab between, as it is copied from a sheet',
      'name\tfree_air_m3_min\tset_pressure_bar\nUno\t10.6\t7\n',
    ],
    ['everything in quotation marks', '"name","free_air_m3_min","set_pressure_bar"\n"Uno","10.6","7"\n'],
    [
      'empty lines and columns after the last',
      'name,free_air_m3_min,set_pressure_bar,,\n\nUno,10.6,7,,\n,,,,\n',
    ],
  ])('may have %s', async (_what, csv) => {
    expect((await send('compressors', csv, false)).written).toBe(1)
    const [found] = (await readFleet()).compressors
    expect(found).toMatchObject({ name: 'Uno', ratedFreeAirM3Min: 10.6, setPressureKpa: 700 })
  })

  it('has a curve in one cell', async () => {
    const csv =
      'name,free_air_cfm,set_pressure_kpa,curve\nUno,375,860,690 kPa @ 10.6 m3/min | 860 kPa @ 10.2 m3/min\n'
    await send('compressors', csv, false)
    expect((await readFleet()).compressors[0]!.curve).toEqual([
      { pressureKpa: 690, freeAirM3Min: 10.6 },
      { pressureKpa: 860, freeAirM3Min: 10.2 },
    ])
  })

  it('is refused whole for any error, and every error of every row is told at its heading', async () => {
    const csv = [
      'Name,Free air,set_pressure_psi,unload_pressure_psi,cooling,ownership,rented_from,condition',
      'Good,375 cfm,100,120,bare,owned,,',
      ',375,ten,120,warm,perhaps,2026-05-01,',
      'Far,9999 cfm,100 cfm,100,bare,owned,2026-02-30,5',
      'Near,375 cfm,100,100.5,bare,owned,,90 %,surplus',
      'good,"1,250 cfm",100,,bare,owned,,',
    ].join('\n')
    const answer = await send('compressors', csv, false)
    expect(answer.written).toBe(0)
    const errors = errorsOf(answer)
    for (const expected of [
      '3: required Name',
      '3: not-a-number Free air',
      '3: not-a-number set_pressure_psi',
      '3: not-a-choice cooling',
      '3: not-a-choice ownership',
      '4: too-big Free air',
      '4: not-a-number set_pressure_psi',
      '4: invalid rented_from',
      '4: too-big condition',
      '5: unload-too-near-set unload_pressure_psi',
      '5: too-many ',
      '6: name-in-use Name',
    ]) {
      expect(errors).toContain(expected)
    }
    expect(errors.filter((error) => error.startsWith('2:'))).toEqual([])
    for (const { errors: told } of answer.rows) {
      for (const { message } of told) expect(message).toMatch(/^\S.*\.$/)
    }
    expect((await readFleet()).compressors).toEqual([])
    expect(actionsOf()).toEqual([])
  })

  it('reads a number two ways only where one of them is possible, and asks where both are', async () => {
    const csv = 'name,free_air_m3_min,set_pressure_kpa,full_load_fuel_l_h\nUno,"10,6","1,250","1,250"\n'
    const answer = await send('compressors', csv, false)
    expect(errorsOf(answer)).toEqual(['2: invalid full_load_fuel_l_h'])
    expect(answer.rows[0]!.errors[0]!.message).toMatch(/1250 .* or 1\.25 |1\.25 .* or 1250 /)
    await send('compressors', csv.replace('"1,250"\n', '12.5\n'), false)
    expect((await readFleet()).compressors[0]).toMatchObject({
      ratedFreeAirM3Min: 10.6,
      setPressureKpa: 1250,
    })
  })

  it('cannot double what is there: the same file twice is refused', async () => {
    const csv = 'name,free_air_cfm,set_pressure_psi\nUno,375,100\nDos,185,100\n'
    await send('compressors', csv, false)
    const again = await send('compressors', csv, false)
    expect(errorsOf(again)).toEqual(['2: name-in-use name', '3: name-in-use name'])
    expect((await readFleet()).compressors).toHaveLength(2)
  })

  it('names unknown, missing and double columns', async () => {
    const answer = await send(
      'compressors',
      'name,free_air_cfm,free_air_m3_min,colour\nUno,375,10.6,red\n',
      false,
    )
    expect(answer.errors.map(({ code, path }) => `${code} ${path}`)).toEqual([
      'invalid free_air_m3_min',
      'unknown-column colour',
      'required set_pressure_kpa',
    ])
    expect(answer.written).toBe(0)
  })

  it.each([
    ['nothing but a heading', 'name,free_air_cfm,set_pressure_psi\n', 'too-few'],
    ['nothing at all', ' \n', 'too-few'],
    [
      'a quotation mark that is never closed',
      'name,free_air_cfm,set_pressure_psi\n"Uno,375,100\n',
      'invalid',
    ],
    [
      'more rows than are read at once',
      `name,free_air_cfm,set_pressure_psi\n${'a,375,100\n'.repeat(recordLimits.importRows + 1)}`,
      'too-many',
    ],
    ['a thousand columns', `name${',x'.repeat(1000)}\n1\n`, 'too-many'],
    ['a cell as long as a file', `name,free_air_cfm,set_pressure_psi\n${'a'.repeat(2001)},1,1\n`, 'too-long'],
    ['such a heading', `name${'!'.repeat(2000)},free_air_cfm,set_pressure_psi\na,375,100\n`, 'too-long'],
  ])('is refused with %s', async (_what, csv, code) => {
    const answer = await send('compressors', csv, false)
    expect(answer.errors.map((error) => error.code)).toEqual([code])
    expect(answer).toMatchObject({ rows: [], written: 0 })
  })

  it('may have as many rows as it says, and no more than a company may have', async () => {
    const rows = (prefix: string) =>
      Array.from({ length: recordLimits.importRows }, (_, index) => `${prefix} ${index},375,100`).join('\n')
    const heading = 'name,free_air_cfm,set_pressure_psi\n'
    expect((await send('compressors', heading + rows('a'), false)).written).toBe(recordLimits.importRows)
    expect((await send('compressors', heading + rows('b'), false)).written).toBe(recordLimits.importRows)
    const over = await send('compressors', `${heading}one more,375,100\n`, false)
    expect(over.errors.map(({ code }) => code)).toEqual(['too-many'])
    expect((await readFleet()).compressors).toHaveLength(recordLimits.records)
  })

  it('repeats no more of a heading than it takes to know it', async () => {
    const heading = `Name${'!'.repeat(1000)}`
    const answer = await send('compressors', `${heading},free_air_cfm,set_pressure_psi\n,375,100\n`, true)
    expect(errorsOf(answer)).toEqual([`2: required ${heading.slice(0, 60)}`])
    expect(JSON.stringify(answer).length).toBeLessThan(500)
  })

  it('holds nobody up, whatever stands in its cells', () => {
    const cells = [numberCell, textCell, dateCell, yesNoCell, curveCell, choiceCell(['a'])]
    const bore = quantityCell('bore', { min: 1, max: 60 })
    for (const filling of [' ', '1', '1,', '1 ', '|', '@', "'", '_', '%', 'No.', '½']) {
      const text = `1${filling.repeat(40_000)}x`
      const start = performance.now()
      for (const cell of cells) cell.read(text, null)
      bore.read(text, 'in')
      expect(performance.now() - start, `40,000 times ${filling}`).toBeLessThan(1000)
    }
  })

  it('may say a percent with a space before its sign', async () => {
    const csv = 'name,free_air_cfm,set_pressure_psi,condition\nOld,375,100,88 %\nNew,375,100,97%\n'
    expect((await send('compressors', csv, false)).written).toBe(2)
    const { compressors } = await readFleet()
    expect(compressors.map(({ conditionFactor }) => conditionFactor)).toEqual([0.97, 0.88])
  })

  it('is a text of at most a million characters', async () => {
    const csv = 'x'.repeat(recordLimits.importBytes + 1)
    const response = await owner.ask('POST', '/api/v1/compressors/import', { csv, isPreview: true })
    expect(listErrors(await readProblem(response))).toEqual(['too-long /csv'])
  })
})

describe('a file of rigs', () => {
  async function makeYard() {
    await owner.ask('POST', '/api/v1/compressors', makeCompressorBody({ name: 'Yard 375' }))
    await owner.ask('POST', '/api/v1/sites', makeSiteBody({ name: 'Harbor' }))
  }

  it('names its compressor and its site, and says its parts as people have them', async () => {
    await makeYard()
    const csv = [
      'name,compressor,site,target_pressure_psi,nozzle,hose_bore,hose_length_ft,hose_couplings,pot_bore_in,hoods,abrasive',
      'Truck 1,yard 375,HARBOR,100,No. 6,1 1/4 in,50,2,1 1/4,1,garnet',
      'Truck 2,,,90,5/16,1-1/2 in,100 ft,,,,',
    ].join('\n')
    expect((await send('rigs', csv, false)).written).toBe(2)
    const { rigs, compressors, sites } = await readFleet()
    expect(rigs[0]).toMatchObject({
      name: 'Truck 1',
      compressorId: compressors[0]!.id,
      siteId: sites[0]!.id,
      airLine: null,
      pot: { insideDiameterMm: 31.75, lossK: null, isShared: true },
      hoods: { count: 1 },
      hour: { abrasive: 'garnet' },
    })
    expect(rigs[0]!.outlets[0]).toMatchObject({
      hose: { insideDiameterMm: 31.75, couplings: 2, measured: null },
      nozzle: { numberSixteenths: 6, newBoreMm: 9.525, boreNowMm: null, shape: 'venturi', loading: 'normal' },
    })
    expect(rigs[0]!.outlets[0]!.hose!.lengthM).toBeCloseTo(15.24, 9)
    expect(rigs[1]).toMatchObject({ name: 'Truck 2', compressorId: null, siteId: null, pot: null })
    expect(rigs[1]!.outlets[0]!.nozzle).toMatchObject({ numberSixteenths: 5, newBoreMm: 7.9375 })
  })

  it('has more outlets under numbered headings, and a loss that was measured', async () => {
    const csv = [
      'name,target_pressure_kpa,nozzle_number,outlet_2_nozzle_mm,outlet_2_hose_bore_mm,outlet_2_hose_measured_drop_psi,outlet_2_hose_measured_flow_cfm',
      'Twin,690,6,8,32,5,185',
    ].join('\n')
    expect(errorsOf(await send('rigs', csv, false))).toEqual([])
    const [rig] = (await readFleet()).rigs
    expect(rig!.outlets.map(({ nozzle }) => nozzle.newBoreMm)).toEqual([9.525, 8])
    expect(rig!.outlets[1]!.nozzle.numberSixteenths).toBeNull()
    const { measured } = rig!.outlets[1]!.hose!
    expect(measured!.dropKpa).toBeCloseTo(5 * kpaPerPsi, 9)
    expect(measured!.freeAirM3Min).toBeCloseTo(185 * m3PerFt3, 9)
  })

  it('is refused for what is not there or does not agree, at the heading', async () => {
    await makeYard()
    const csv = [
      'name,compressor,site,target_pressure_psi,nozzle,nozzle_now_in,hose_length_ft,outlet_3_nozzle,hoods',
      'Truck 1,Yard 999,Moon,100,No. 6,,,,',
      'Truck 2,,,100,No. 6,5/16,50,,1.5',
      'Truck 3,,,100,6,,,No. 4,',
    ].join('\n')
    const answer = await send('rigs', csv, false)
    expect(errorsOf(answer)).toEqual([
      '2: unknown-reference compressor',
      '2: unknown-reference site',
      '3: required hose_bore_mm',
      '3: bore-now-under-new nozzle_now_in',
      '3: wrong-type hoods',
      '4: invalid nozzle',
      '4: required outlet_2_nozzle_mm',
    ])
    expect((await readFleet()).rigs).toEqual([])
  })

  it('does not hitch a rig to a compressor that is archived', async () => {
    const body = makeCompressorBody({ name: 'Old one' })
    await owner.ask('POST', '/api/v1/compressors', body)
    await owner.ask('POST', `/api/v1/compressors/${body.id}/archive`, { version: 1 })
    const csv = 'name,compressor,target_pressure_psi,nozzle\nTruck 1,Old one,100,No. 6\n'
    expect(errorsOf(await send('rigs', csv, true))).toEqual(['2: unknown-reference compressor'])
  })

  it('knows only the company’s own', async () => {
    const stranger = makePerson(server, makeCompany(server))
    await stranger.ask('POST', '/api/v1/compressors', makeCompressorBody({ name: 'Theirs' }))
    const csv = 'name,compressor,target_pressure_psi,nozzle\nTruck 1,Theirs,100,No. 6\n'
    expect(errorsOf(await send('rigs', csv, true))).toEqual(['2: unknown-reference compressor'])
  })
})
