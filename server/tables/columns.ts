import type { FieldError } from '#shared/contracts/problems.ts'
import type { Cell } from './cells.ts'

/** One column of a table that people fill or read: its heading, and where in the record its value stands. */
export interface Column {
  /** the heading without a unit, such as free_air */
  field: string
  path: readonly (string | number)[]
  cell: Cell
  isRequired?: boolean
}

/** A column of a file, under the heading as it is written there. */
export interface FoundColumn {
  column: Column
  /** what of it is shown with every error under it */
  heading: string
  unit: string | null
}

const longestShown = 60

/** `Free air (cfm)` and `free_air_cfm` are one heading. */
export function normaliseHeading(heading: string): string {
  return heading
    .normalize('NFKC')
    .toLowerCase()
    .replace(/[^\p{L}\d]+/gu, '_')
    .replace(/^_+|_+$/g, '')
}

/** The heading with the unit that values are kept in. */
export function headingOf({ field, cell }: Column): string {
  const [ending] = Object.keys(cell.units)
  return ending === undefined ? field : `${field}_${ending}`
}

export function findColumn(columns: readonly Column[], heading: string): FoundColumn | null {
  const name = normaliseHeading(heading)
  const shown = heading.slice(0, longestShown)
  for (const column of columns) {
    if (name === column.field) return { column, heading: shown, unit: null }
    for (const [ending, unit] of Object.entries(column.cell.units)) {
      if (name === `${column.field}_${ending}`) return { column, heading: shown, unit }
    }
  }
  return null
}

/** What stands in every export, and says nothing about a new record. */
const unreadFields = ['id', 'version', 'created_at', 'updated_at', 'updated_by']

/** The columns of a file by its heading row, each at its place; null for one that is not read. */
export function findColumns(
  columns: readonly Column[],
  headings: readonly string[],
): { found: (FoundColumn | null)[]; errors: FieldError[] } {
  const errors: FieldError[] = []
  const seen = new Map<Column, string>()
  const found = headings.map((heading): FoundColumn | null => {
    const match = findColumn(columns, heading)
    const shown = heading.slice(0, longestShown)
    if (match === null) {
      if (heading !== '' && !unreadFields.includes(normaliseHeading(heading))) {
        const message = `“${shown}” is not a column that can be read.`
        errors.push({ path: shown, code: 'unknown-column', message })
      }
      return null
    }
    const before = seen.get(match.column)
    if (before === undefined) seen.set(match.column, shown)
    else errors.push({ path: shown, code: 'invalid', message: `“${before}” and “${shown}” say the same.` })
    return match
  })
  for (const column of columns) {
    if (!column.isRequired || seen.has(column)) continue
    const path = headingOf(column)
    errors.push({ path, code: 'required', message: `The column “${path}” is missing.` })
  }
  return { found, errors }
}

type Tree = Record<string | number, unknown>

export function valueAt(record: unknown, path: Column['path']): unknown {
  return path.reduce<unknown>((value, step) => (value as Tree | null | undefined)?.[step] ?? null, record)
}

export function putAt(record: object, path: Column['path'], value: unknown): void {
  let place = record as Tree
  path.forEach((step, index) => {
    if (index === path.length - 1) place[step] = value
    else place = (place[step] ??= typeof path[index + 1] === 'number' ? [] : {}) as Tree
  })
}

export function pointerOf({ path }: Column): string {
  return path.map((step) => `/${step}`).join('')
}
