import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { findDifferences, mergeRecords } from '../../../src/composables/recordDifferences.ts'
import type { Side } from '../../../src/composables/recordDifferences.ts'
import { profileOfRig } from '../../../src/components/rigs/rigEdit.ts'
import { makeRig } from './records.ts'

const us = (text: string) => ({ text, system: 'us' as const })
const rigWith = (...[over, change]: Parameters<typeof makeRig>) => profileOfRig(makeRig(over, change))
const base = rigWith()

describe('what two people made of one rig', () => {
  test('is nothing where they made the same', () => {
    expect(findDifferences(base, rigWith({ name: 'Two' }), rigWith({ name: 'Two' }))).toEqual([])
  })

  test('says whose each change is, in the fields that people see', () => {
    const mine = rigWith({ name: 'Mine' }, (form) => (form.outlets[0]!.boreNow = us('1/2')))
    const theirs = rigWith({ name: 'Theirs' }, (form) => (form.airLine.length = us('50 ft')))
    const found = findDifferences(base, mine, theirs)
    expect(Object.fromEntries(found.map(({ path, changedBy }) => [path, changedBy]))).toEqual({
      name: 'both',
      'outlets.0.nozzle.boreNowMm': 'mine',
      airLine: 'theirs',
    })
    expect(found.find(({ path }) => path === 'name')).toMatchObject({ mine: 'Mine', theirs: 'Theirs' })
  })

  test('takes the nozzles as one where one of them has another number of them', () => {
    const two = rigWith({}, (form) => form.outlets.push(structuredClone(form.outlets[0]!)))
    expect(findDifferences(base, two, base).map(({ path }) => path)).toEqual(['outlets'])
  })

  test('does not mind in which order fields were written', () => {
    const turned = Object.fromEntries(Object.entries(base).reverse())
    expect(findDifferences(base, turned, base)).toEqual([])
  })
})

describe('what they choose', () => {
  const mine = rigWith({ name: 'Mine' }, (form) => {
    form.outlets[0]!.newBore = us('No. 6')
    form.outlets[0]!.boreNow = us('1/2')
  })
  const theirs = rigWith({ name: 'Theirs', siteId: null }, (form) => {
    form.outlets[0]!.newBore = us('9.7 mm')
    form.outlets[0]!.whip.isUsed = false
    form.target = us('90 psi')
  })
  const paths = findDifferences(base, mine, theirs).map(({ path }) => path)
  const all = (side: Side) => Object.fromEntries(paths.map((path) => [path, side]))

  test('is all of mine or all of theirs', () => {
    expect(mergeRecords(mine, theirs, all('mine'))).toEqual(mine)
    expect(mergeRecords(mine, theirs, all('theirs'))).toEqual(theirs)
  })

  test('is for each field what was chosen for it, and a nozzle’s number goes with its bore', () => {
    const merged = mergeRecords(mine, theirs, { ...all('theirs'), 'outlets.0.nozzle.newBoreMm': 'mine' })
    expect(merged).toMatchObject({ name: 'Theirs', siteId: null })
    expect(merged.outlets[0]!.nozzle).toMatchObject({ numberSixteenths: 6, newBoreMm: 9.525 })
    expect(theirs.outlets[0]!.nozzle.numberSixteenths).toBeNull()
  })

  test('is never anything else, whatever is chosen', () => {
    const sides = fc.constantFrom<Side>('mine', 'theirs')
    fc.assert(
      fc.property(fc.tuple(...paths.map(() => sides)), (chosen) => {
        const choices = Object.fromEntries(paths.map((path, index) => [path, chosen[index]!]))
        const merged = mergeRecords(mine, theirs, choices)
        const fromMine = findDifferences(base, merged, mine).map(({ path }) => path)
        const fromTheirs = findDifferences(base, merged, theirs).map(({ path }) => path)
        expect(fromMine).toEqual(paths.filter((path) => choices[path] === 'theirs'))
        expect(fromTheirs).toEqual(paths.filter((path) => choices[path] === 'mine'))
      }),
      { seed: 16 },
    )
  })
})
