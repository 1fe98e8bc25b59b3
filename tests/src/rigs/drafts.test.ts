import { afterEach, describe, expect, test } from 'vitest'
import type { Session } from '#shared/contracts/accounts.ts'
import { createCheckForm } from '#shared/form/checkForm.ts'
import { draftPlace, dropDraft, readDraft, writeDraft } from '../../../src/stores/drafts.ts'
import type { Draft } from '../../../src/stores/drafts.ts'
import { dropHeldCheck, holdCheck, readHeldCheck } from '../../../src/stores/heldCheck.ts'

afterEach(() => localStorage.clear())

const sessionOf = (accountId: string, companyId: string) =>
  ({ account: { id: accountId }, company: { id: companyId } }) as Session

function makeDraft(): Draft {
  const form = createCheckForm()
  form.target = { text: '95 psi', system: 'us' }
  form.outlets[0]!.boreNow = { text: 'half ty', system: 'metric' }
  return {
    edit: { form, fields: { name: 'Rig 1', compressorId: null } },
    base: { id: 'rig-1', version: 4 },
    savedAt: '2026-05-03T15:00:00.000Z',
  }
}

describe('what was typed and not saved', () => {
  test('comes back as it stood, half typed fields too', () => {
    const place = draftPlace(sessionOf('ana', 'co'), 'rig', 'rig-1')
    expect(writeDraft(place, makeDraft())).toBe(true)
    expect(readDraft(place)).toEqual(makeDraft())
    dropDraft(place)
    expect(readDraft(place)).toBeNull()
  })

  test('is shown to nobody else, in no other company, and in no other editor', () => {
    writeDraft(draftPlace(sessionOf('ana', 'co'), 'rig', 'rig-1'), makeDraft())
    expect(readDraft(draftPlace(sessionOf('luz', 'co'), 'rig', 'rig-1'))).toBeNull()
    expect(readDraft(draftPlace(sessionOf('ana', 'other'), 'rig', 'rig-1'))).toBeNull()
    expect(readDraft(draftPlace(sessionOf('ana', 'co'), 'rig', 'rig-2'))).toBeNull()
    expect(readDraft(draftPlace(sessionOf('ana', 'co'), 'site', 'rig-1'))).toBeNull()
    expect(draftPlace(null, 'rig', 'rig-1')).toBeNull()
  })

  test('is nothing where what is kept is not a draft', () => {
    const place = draftPlace(sessionOf('ana', 'co'), 'rig', null)!
    for (const kept of [
      '',
      'null',
      '7',
      '{"fragment":"x","fields":{},"savedAt":""}',
      '{"fragment":"","savedAt":""}',
    ]) {
      localStorage.setItem(place, kept)
      expect(readDraft(place)).toBeNull()
    }
  })
})

describe('a check that waits to be saved', () => {
  test('waits until it is saved, the one a visitor finds too', () => {
    expect(readHeldCheck()).toBeNull()
    holdCheck('')
    expect(readHeldCheck()).toBe('')
    holdCheck('1.abc')
    expect(readHeldCheck()).toBe('1.abc')
    dropHeldCheck()
    expect(readHeldCheck()).toBeNull()
  })
})
