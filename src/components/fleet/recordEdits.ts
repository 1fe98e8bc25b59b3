import type { CompressorProfile, CompressorRecord } from '#shared/contracts/compressors.ts'
import type { SiteProfile, SiteRecord } from '#shared/contracts/sites.ts'
import { createCheckForm } from '#shared/form/checkForm.ts'
import { putCompressor, putSite, readCompressorParts, readSiteParts } from '#shared/form/profiles.ts'
import { readForm } from '#shared/form/readForm.ts'
import type { FieldProblem } from '#shared/form/readForm.ts'
import type { UnitSystem } from '#shared/units/quantities.ts'
import { otherUnit } from '../../composables/otherUnits.ts'
import type { Edit } from '../../stores/drafts.ts'

/** What the fields of one part of the form have wrong; the rest of the form is not on the screen. */
export function problemsUnder(problems: Record<string, FieldProblem>, prefixes: readonly string[]) {
  const isUnder = (path: string) => prefixes.some((prefix) => path.startsWith(prefix))
  return Object.fromEntries(Object.entries(problems).filter(([path]) => isUnder(path)))
}

export const compressorPaths = ['compressor.', 'hour.fullLoadFuel']
export const sitePaths = ['site.']

function readPart(edit: Edit, paths: readonly string[]): Record<string, number> | null {
  const { values, problems } = readForm(edit.form, otherUnit.value)
  return Object.keys(problemsUnder(problems, paths)).length > 0 ? null : values
}

export function editOfCompressor(compressor: CompressorProfile, system: UnitSystem): Edit {
  const { name, ownership, rentedFrom, rentedUntil } = compressor
  return {
    form: putCompressor(createCheckForm(), compressor, system),
    fields: { name, ownership, rentedFrom, rentedUntil },
  }
}

export function compressorOfEdit(edit: Edit): CompressorProfile | null {
  const values = readPart(edit, compressorPaths)
  const name = (edit.fields.name ?? '').trim()
  if (values === null || name === '') return null
  const isRented = edit.fields.ownership === 'rented'
  return {
    name,
    ...readCompressorParts(edit.form, values),
    ownership: isRented ? 'rented' : 'owned',
    // dates of a rental say nothing of a machine that is owned
    rentedFrom: (isRented && edit.fields.rentedFrom) || null,
    rentedUntil: (isRented && edit.fields.rentedUntil) || null,
  }
}

export function editOfSite(site: SiteProfile, system: UnitSystem): Edit {
  const { name, timeZone } = site
  return { form: putSite(createCheckForm(), site, system), fields: { name, timeZone } }
}

export function siteOfEdit(edit: Edit): SiteProfile | null {
  const values = readPart(edit, sitePaths)
  const name = (edit.fields.name ?? '').trim()
  const { timeZone } = edit.fields
  return values === null || name === '' || !timeZone ? null : { name, ...readSiteParts(values), timeZone }
}

interface ServerFields {
  id: string
  version: number
  isArchived: boolean
  createdAt: string
  updatedAt: string
  updatedBy: string
}

/** A record's own fields, without what the server keeps beside them. */
export function withoutServerFields<Kept extends ServerFields>({
  id: _id,
  version: _version,
  isArchived: _isArchived,
  createdAt: _createdAt,
  updatedAt: _updatedAt,
  updatedBy: _updatedBy,
  ...profile
}: Kept): Omit<Kept, keyof ServerFields> {
  return profile
}

export const profileOfCompressor = (record: CompressorRecord): CompressorProfile =>
  withoutServerFields(record)
export const profileOfSite = (record: SiteRecord): SiteProfile => withoutServerFields(record)
