import { recordLimits } from '#shared/contracts/limits.ts'
import type { FieldError } from '#shared/contracts/problems.ts'
import { makeProblem } from '../problems.ts'
import type { RecordRow } from './recordQueries.ts'

/** Two names that differ only in capitals are one to a crew. */
export function foldName(name: string): string {
  return name.normalize('NFC').toLowerCase()
}

export function refuseFaults(faults: FieldError[]): void {
  if (faults.length === 0) return
  const count = faults.length === 1 ? 'One field is' : `${faults.length} fields are`
  throw makeProblem('invalid-fields', `${count} not as they should be.`, faults)
}

interface Naming {
  noun: string
  nameField?: string
  isNameFreedByArchiving?: boolean
}

export function findNameFault(
  { noun, nameField = 'name', isNameFreedByArchiving = false }: Naming,
  taken: Pick<RecordRow, 'id' | 'name' | 'archivedAt'>[],
  { id, name, archivedAt = null }: { id: string; name: string; archivedAt?: string | null },
): FieldError[] {
  const folded = foldName(name)
  if (isNameFreedByArchiving && archivedAt !== null) return []
  const other = taken.find(
    (one) =>
      one.id !== id && foldName(one.name) === folded && !(isNameFreedByArchiving && one.archivedAt !== null),
  )
  if (!other) return []
  const which = other.archivedAt === null ? 'Another' : 'An archived'
  return [
    { path: `/${nameField}`, code: 'name-in-use', message: `${which} ${noun} is called “${other.name}”.` },
  ]
}

export function refuseTooMany(
  { noun, plural = `${noun}s` }: { noun: string; plural?: string },
  count: number,
): void {
  if (count < recordLimits.records) return
  throw makeProblem('too-many-records', `A company has at most ${recordLimits.records} ${plural}.`)
}
