import type { Session } from '#shared/contracts/accounts.ts'
import type { CheckForm } from '#shared/form/checkForm.ts'
import { readFragment, writeFragment } from '#shared/form/fragment.ts'

/** What stands in an editor: the check's own form, and the texts beside it. */
export interface Edit {
  form: CheckForm
  fields: Record<string, string | null>
}

/** An editor's unsaved state, kept on this device until it is saved or thrown away. */
export interface Draft {
  edit: Edit
  /** the record as it was when the editing began; null for one that is new */
  base: { id: string; version: number } | null
  savedAt: string
}

export type DraftKind = 'rig' | 'compressor' | 'site'

/** A later shape of the drafts takes the next number. */
const prefix = 'sixteenth.draft.1'

/** Where one person's draft in one company is kept: nobody else on this device is shown it. */
export function draftPlace(session: Session | null, kind: DraftKind, id: string | null): string | null {
  if (!session?.company) return null
  return [prefix, session.account.id, session.company.id, kind, id ?? 'new'].join('.')
}

const isText = (value: unknown): value is string | null => value === null || typeof value === 'string'

function isFields(value: unknown): value is Edit['fields'] {
  return typeof value === 'object' && value !== null && Object.values(value).every(isText)
}

export function readDraft(place: string | null): Draft | null {
  if (place === null) return null
  try {
    const kept = JSON.parse(localStorage.getItem(place) ?? 'null') as Record<string, unknown> | null
    if (!kept || typeof kept.fragment !== 'string' || typeof kept.savedAt !== 'string') return null
    const { form, isBroken } = readFragment(kept.fragment)
    if (isBroken || !isFields(kept.fields)) return null
    return { edit: { form, fields: kept.fields }, base: kept.base as Draft['base'], savedAt: kept.savedAt }
  } catch {
    return null
  }
}

/** Whether it could be kept: a browser may be full, or keep nothing. */
export function writeDraft(place: string | null, { edit, base, savedAt }: Draft): boolean {
  if (place === null) return false
  try {
    const kept = { fragment: writeFragment(edit.form), fields: edit.fields, base, savedAt }
    localStorage.setItem(place, JSON.stringify(kept))
    return true
  } catch {
    return false
  }
}

export function dropDraft(place: string | null): void {
  if (place === null) return
  try {
    localStorage.removeItem(place)
  } catch {
    // What was never kept need not be thrown away.
  }
}
