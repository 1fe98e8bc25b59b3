import type { z } from 'zod'
import type { FieldError } from '#shared/contracts/problems.ts'
import { parseBody } from '../parseBody.ts'
import { ProblemError } from '../problems.ts'
import { headingOf, pointerOf, putAt, valueAt } from './columns.ts'
import type { Column, FoundColumn } from './columns.ts'

/** What one kind of record is read from. */
export interface RowReader<Profile> {
  columns: readonly Column[]
  schema: z.ZodType<Profile>
  makeDraft(): object
  finishDraft?(draft: Record<string, unknown>): object
  /** columns that name another record, by where its id goes */
  references: Record<string, (name: string) => { id: string } | { message: string }>
}

export interface ReadRow<Profile> {
  name: string
  profile: Profile | null
  isArchived: boolean
  /** path: the column's heading */
  errors: FieldError[]
}

/** The heading that an error of the contract belongs to: the column that fills that place, or the part around it. */
export function headingAt(
  pointer: string,
  columns: readonly Column[],
  found: readonly (FoundColumn | null)[],
): string {
  const around = columns
    .filter((column) => pointer === pointerOf(column) || pointer.startsWith(`${pointerOf(column)}/`))
    .sort((one, other) => other.path.length - one.path.length)
  const [column = columns[0] as Column] = around
  return found.find((match) => match?.column === column)?.heading ?? headingOf(column)
}

function readSchema<Profile>(schema: z.ZodType<Profile>, draft: object): Profile | FieldError[] {
  try {
    return parseBody(schema, draft)
  } catch (error) {
    if (error instanceof ProblemError) return error.problem.errors ?? []
    throw error
  }
}

/** One row as the record it stands for, with everything that is wrong in it. */
export function readRow<Profile>(
  reader: RowReader<Profile>,
  found: readonly (FoundColumn | null)[],
  cells: readonly string[],
): ReadRow<Profile> {
  const draft = reader.makeDraft() as Record<string, unknown>
  const errors: FieldError[] = []
  const told = new Set<string>()
  const refuse = ({ column, heading }: FoundColumn, error: Pick<FieldError, 'code' | 'message'>) => {
    told.add(pointerOf(column))
    errors.push({ path: heading, ...error })
  }
  if (cells.slice(found.length).some((cell) => cell !== '')) {
    errors.push({ path: '', code: 'too-many', message: 'The row has more cells than there are headings.' })
  }
  found.forEach((match, index) => {
    const text = cells[index] ?? ''
    if (match === null) return
    const { column, heading, unit } = match
    if (text === '') {
      if (column.isRequired) refuse(match, { code: 'required', message: `“${heading}” is empty.` })
      return
    }
    const reading = column.cell.read(text, unit)
    if (!reading.ok) return refuse(match, { code: reading.code, message: reading.message })
    const find = reader.references[column.field]
    if (!find) return putAt(draft, column.path, reading.value)
    const named = find(String(reading.value))
    if ('id' in named) putAt(draft, column.path, named.id)
    else refuse(match, { code: 'unknown-reference', message: named.message })
  })
  const { isArchived = false, ...whole } = draft
  const read = readSchema(reader.schema, reader.finishDraft?.(whole) ?? whole)
  if (Array.isArray(read)) {
    for (const error of read) {
      if (told.has(error.path)) continue
      errors.push({ ...error, path: headingAt(error.path, reader.columns, found) })
    }
  }
  return {
    name: String(valueAt(draft, ['name']) ?? ''),
    profile: Array.isArray(read) ? null : read,
    isArchived: isArchived === true,
    errors,
  }
}
