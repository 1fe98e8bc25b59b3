import { describe, expect, test } from 'vitest'
import { answerCheck } from '#shared/check/answerCheck.ts'
import { createCheckForm } from '#shared/form/checkForm.ts'
import { readForm } from '#shared/form/readForm.ts'
import {
  checkOfRig,
  hitchOf,
  isFound,
  linesOfFleet,
  localDateOf,
  orderLines,
} from '../../../src/composables/rigVerdicts.ts'
import { makeCompressor, makeFleet, makeRig, makeSite } from './records.ts'

const day = '2026-05-03'
const us = (text: string) => ({ text, system: 'us' as const })
const pick = (over: object) => ({
  rigId: 'rig-1',
  localDate: day,
  compressorId: null,
  siteId: null,
  pickedBy: 'Lu Vega',
  pickedAt: '2026-05-03T12:00:00.000Z',
  ...over,
})

describe('what a rig is hitched to', () => {
  const rented = makeCompressor({ id: 'rented', name: 'Rented' })
  const compressors = [makeCompressor(), rented]

  test('is the usual compressor at the usual site, unless today’s was picked', () => {
    const [rig] = makeFleet().rigs
    const usual = hitchOf(rig!, makeFleet({ compressors }), day)
    expect([usual.compressor?.id, usual.site?.id, usual.pick]).toEqual(['big', 'yard', null])
    const today = [pick({ compressorId: 'rented' })]
    const picked = hitchOf(rig!, makeFleet({ compressors, today }), day)
    expect([picked.compressor?.id, picked.site?.id, picked.pick?.pickedBy]).toEqual([
      'rented',
      'yard',
      'Lu Vega',
    ])
  })

  test('is the usual one again on another day, for another rig, and once it was put back', () => {
    const [rig] = makeFleet().rigs
    for (const other of [
      { compressorId: 'rented', localDate: '2026-05-02' },
      { compressorId: 'rented', rigId: 'rig-2' },
      {},
    ]) {
      const hitch = hitchOf(rig!, makeFleet({ compressors, today: [pick(other)] }), day)
      expect([hitch.compressor?.id, hitch.pick]).toEqual(['big', null])
    }
  })

  test('is the usual one where the picked one has gone', () => {
    const [rig] = makeFleet().rigs
    expect(hitchOf(rig!, makeFleet({ today: [pick({ compressorId: 'gone' })] }), day).compressor?.id).toBe(
      'big',
    )
  })
})

describe('the verdict of a saved rig', () => {
  test('is the one of its check', () => {
    const [line] = linesOfFleet(makeFleet(), day)
    expect(line!.check!.answer).toEqual(answerCheck(readForm(createCheckForm()).request!))
  })

  test('is missing without a compressor or a site', () => {
    for (const over of [{ compressorId: null }, { siteId: null }, { siteId: 'gone' }]) {
      const [line] = linesOfFleet(makeFleet({ rigs: [makeRig(over)] }), day)
      expect(line!.check).toBeNull()
    }
  })

  test('changes with a new version of any of the three', () => {
    const hitch = { compressor: makeCompressor(), site: makeSite(), pick: null }
    const before = checkOfRig(makeRig(), hitch)!
    const higher = { ...hitch, site: makeSite({ version: 2, altitudeM: 3000 }) }
    const after = checkOfRig(makeRig(), higher)!
    expect(after.answer.atTarget!.airMarginPct).toBeLessThan(before.answer.atTarget!.airMarginPct)
    const wanting = checkOfRig(makeRig({ version: 2, targetNozzlePressureKpa: 500 }), hitch)!
    expect(wanting.request.targetNozzlePressureKpa).toBe(500)
  })
})

describe('the list of rigs', () => {
  const worn = (bore: string) => makeRig({}, (form) => (form.outlets[0]!.boreNow = us(bore)))
  const rigs = [
    { ...worn('7/16'), id: 'a', name: 'Rig 10' },
    { ...worn('9/16'), id: 'b', name: 'Rig 2' },
    { ...worn('5/8'), id: 'c', name: 'Rig 1' },
    { ...worn('7/16'), id: 'd', name: 'Spare', compressorId: null },
    { ...makeRig({}, (form) => (form.tools.flow = us('500 cfm'))), id: 'e', name: 'Tools' },
  ]
  const lines = linesOfFleet(makeFleet({ rigs }), day)
  const namesIn = (order: 'worst' | 'name') => orderLines(lines, order).map(({ rig }) => rig.name)

  test('shows the worst first, and those without a verdict last', () => {
    const verdicts = Object.fromEntries(lines.map(({ rig, check }) => [rig.name, check?.answer.verdict]))
    expect(verdicts).toEqual({
      'Rig 10': 'holds',
      'Rig 2': 'falls-short',
      'Rig 1': 'falls-short',
      Spare: undefined,
      Tools: 'cannot-run',
    })
    expect(namesIn('worst')).toEqual(['Tools', 'Rig 1', 'Rig 2', 'Rig 10', 'Spare'])
  })

  test('sorts names as people do', () => {
    expect(namesIn('name')).toEqual(['Rig 1', 'Rig 2', 'Rig 10', 'Spare', 'Tools'])
  })

  test('finds every word, whatever its accents and capitals', () => {
    expect(isFound('camion yar', ['Camión 3', 'Big red', 'Yard'])).toBe(true)
    expect(isFound('camion dock', ['Camión 3', 'Big red', 'Yard'])).toBe(false)
    expect(isFound('  ', ['Rig'])).toBe(true)
  })
})

test('today is the day on this device', () => {
  expect(localDateOf(new Date(2026, 0, 9, 23, 59))).toBe('2026-01-09')
})
