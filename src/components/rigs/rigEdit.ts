import type { CompressorProfile, CompressorRecord } from '#shared/contracts/compressors.ts'
import type { Fleet, RigProfile, RigRecord } from '#shared/contracts/rigs.ts'
import type { SiteProfile, SiteRecord } from '#shared/contracts/sites.ts'
import { createCheckForm } from '#shared/form/checkForm.ts'
import type { CheckForm } from '#shared/form/checkForm.ts'
import {
  formOfRig,
  putCompressor,
  putSite,
  readCompressorParts,
  readRigParts,
  readSiteParts,
} from '#shared/form/profiles.ts'
import { readForm } from '#shared/form/readForm.ts'
import type { UnitSystem } from '#shared/units/quantities.ts'
import { otherUnit } from '../../composables/otherUnits.ts'
import type { Edit } from '../../stores/drafts.ts'
import { withoutServerFields } from '../fleet/recordEdits.ts'

/** What stands in the choice of a compressor or a site that is not saved yet. */
export const newChoice = 'new'

/** A rig without a compressor or a site is read as if it had the ones a visitor finds: its own fields are none the worse. */
const standIn = createCheckForm()

type Found = Pick<Fleet, 'compressors' | 'sites'>

const findById = <Kept extends { id: string }>(records: readonly Kept[], id: string | null | undefined) =>
  records.find((record) => record.id === id) ?? null

/** The whole form of a rig in its editor: what is typed, with the chosen records in their places. */
export function wholeForm({ form, fields }: Edit, fleet: Found, system: UnitSystem): CheckForm {
  let whole = form
  if (fields.compressorId !== newChoice) {
    const compressor = findById(fleet.compressors, fields.compressorId)
    whole = compressor
      ? putCompressor(whole, compressor, system)
      : { ...whole, compressor: standIn.compressor }
  }
  if (fields.siteId !== newChoice) {
    const site = findById(fleet.sites, fields.siteId)
    whole = site ? putSite(whole, site, system) : { ...whole, site: standIn.site }
  }
  return whole
}

export const readEdit = (edit: Edit, fleet: Found, system: UnitSystem) => {
  const form = wholeForm(edit, fleet, system)
  return { form, read: readForm(form, otherUnit.value) }
}

const nameOf = (text: string | null | undefined) => (text ?? '').trim()

/** The rig that the editor says; null while a field cannot be read or a name is missing. */
export function rigOfEdit(edit: Edit, fleet: Found, system: UnitSystem): RigProfile | null {
  const { fields } = edit
  const { form, read } = readEdit(edit, fleet, system)
  if (read.request === null || Object.keys(read.problems).length > 0) return null
  const names = [
    fields.name,
    ...(fields.compressorId === newChoice ? [fields.compressorName] : []),
    ...(fields.siteId === newChoice ? [fields.siteName] : []),
  ]
  if (names.some((name) => nameOf(name) === '')) return null
  return {
    name: nameOf(fields.name),
    compressorId: fields.compressorId ?? null,
    siteId: fields.siteId ?? null,
    ...readRigParts(form, read),
  }
}

export function compressorOfEdit(edit: Edit, fleet: Found, system: UnitSystem): CompressorProfile {
  const { form, read } = readEdit(edit, fleet, system)
  return {
    name: nameOf(edit.fields.compressorName),
    ownership: 'owned',
    rentedFrom: null,
    rentedUntil: null,
    ...readCompressorParts(form, read.values),
  }
}

export function siteOfEdit(edit: Edit, fleet: Found, system: UnitSystem, timeZone: string): SiteProfile {
  const { read } = readEdit(edit, fleet, system)
  return { name: nameOf(edit.fields.siteName), timeZone, ...readSiteParts(read.values) }
}

export function editOfRig(rig: RigProfile, fleet: Found, system: UnitSystem): Edit {
  const compressor = findById(fleet.compressors, rig.compressorId)
  const site = findById(fleet.sites, rig.siteId)
  const { name, compressorId, siteId } = rig
  return {
    form: formOfRig(rig, compressor, site, system),
    fields: { name, compressorId, siteId, compressorName: null, siteName: null },
  }
}

export const profileOfRig = (record: RigRecord): RigProfile => withoutServerFields(record)

/** A saved one that says just what was typed: it need not be saved again. */
export function findSame<Kept extends CompressorRecord | SiteRecord>(
  records: readonly Kept[],
  parts: object,
): Kept | null {
  const says = (record: Kept) =>
    Object.entries(parts).every(
      ([key, value]) => JSON.stringify(record[key as keyof Kept]) === JSON.stringify(value),
    )
  return records.find((record) => !record.isArchived && says(record)) ?? null
}

/** A name that nobody has yet: with a number behind it where need be. */
export function freeName(name: string, taken: readonly { name: string }[]): string {
  const fold = (text: string) => text.normalize('NFC').toLowerCase()
  const names = new Set(taken.map((record) => fold(record.name)))
  let free = name
  for (let number = 2; names.has(fold(free)); number++) free = `${name} ${number}`
  return free
}
