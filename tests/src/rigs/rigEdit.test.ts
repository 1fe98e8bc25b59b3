import { describe, expect, test } from 'vitest'
import { createCheckForm } from '#shared/form/checkForm.ts'
import {
  compressorOfEdit,
  editOfRig,
  findSame,
  freeName,
  newChoice,
  profileOfRig,
  rigOfEdit,
  siteOfEdit,
  wholeForm,
} from '../../../src/components/rigs/rigEdit.ts'
import { profileOfCompressor, profileOfSite } from '../../../src/components/fleet/recordEdits.ts'
import { makeCompressor, makeFleet, makeRig, makeSite } from './records.ts'

const fleet = makeFleet()
const us = (text: string) => ({ text, system: 'us' as const })

describe('a rig in its editor', () => {
  test.each(['us', 'metric'] as const)('is the very same when nothing was typed, in %s', (system) => {
    const rig = profileOfRig(makeRig())
    expect(rigOfEdit(editOfRig(rig, fleet, system), fleet, system)).toEqual(rig)
  })

  test('can be saved before it has a compressor and a site', () => {
    const rig = profileOfRig(makeRig({ compressorId: null, siteId: null }))
    expect(rigOfEdit(editOfRig(rig, fleet, 'us'), fleet, 'us')).toEqual(rig)
  })

  test('cannot be saved while a field is wrong or a name is missing', () => {
    const edit = () => editOfRig(profileOfRig(makeRig()), fleet, 'us')
    const wrong = edit()
    wrong.form.target = us('abc')
    expect(rigOfEdit(wrong, fleet, 'us')).toBeNull()
    const nameless = edit()
    nameless.fields.name = '  '
    expect(rigOfEdit(nameless, fleet, 'us')).toBeNull()
    const newSite = edit()
    newSite.fields.siteId = newChoice
    expect(rigOfEdit(newSite, fleet, 'us')).toBeNull()
    newSite.fields.siteName = 'Dock'
    expect(rigOfEdit(newSite, fleet, 'us')).not.toBeNull()
  })

  test('shows the chosen compressor, not what was typed for another', () => {
    const edit = editOfRig(profileOfRig(makeRig()), fleet, 'us')
    edit.form.compressor.freeAir = us('90 cfm')
    expect(wholeForm(edit, fleet, 'us').compressor.freeAir.text).toBe('375 cfm')
    edit.fields.compressorId = newChoice
    expect(wholeForm(edit, fleet, 'us').compressor.freeAir.text).toBe('90 cfm')
  })

  test('makes records of the compressor and the site that were typed with it', () => {
    const edit = { form: createCheckForm(), fields: {} as Record<string, string | null> }
    Object.assign(edit.fields, { name: 'Rig', compressorId: newChoice, siteId: newChoice })
    Object.assign(edit.fields, { compressorName: ' Big ', siteName: 'Yard' })
    expect(compressorOfEdit(edit, fleet, 'us')).toEqual(profileOfCompressor(makeCompressor()))
    expect(siteOfEdit(edit, fleet, 'us', 'America/Denver')).toEqual(profileOfSite(makeSite()))
  })
})

describe('what is in the fleet already', () => {
  test('is found by what it says, and an archived one is not', () => {
    const { name: _name, ...parts } = profileOfSite(makeSite())
    expect(findSame([makeSite({ id: 'b' })], parts)?.id).toBe('b')
    expect(findSame([makeSite({ altitudeM: 1 })], parts)).toBeNull()
    expect(findSame([makeSite({ isArchived: true })], parts)).toBeNull()
  })

  test('leaves the next free name, whatever its capitals', () => {
    expect(freeName('Rig', [])).toBe('Rig')
    expect(freeName('Rig', [{ name: 'RIG' }, { name: 'rig 2' }])).toBe('Rig 3')
  })
})
