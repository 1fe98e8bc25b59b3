import { may } from '#shared/contracts/permissions.ts'
import type { Role } from '#shared/contracts/permissions.ts'
import { csvLine } from '../csv.ts'
import { headingOf, valueAt } from './columns.ts'
import type { Column } from './columns.ts'

export interface ExportColumn<Row> {
  heading: string
  description: string
  /** left out for whoever may not see prices */
  isPrice?: boolean
  write(row: Row): string | number | null
}

export interface ExportFile {
  name: string
  text: string
}

/** One file of an export, with what the readme says about it. */
export interface ExportTable<Row> {
  name: string
  about: string
  columns: ExportColumn<Row>[]
  rows: Row[]
}

/** A column of an import, written as the import reads it. */
export function exported<Row>(column: Column): ExportColumn<Row> {
  return {
    heading: headingOf(column),
    description: column.cell.description,
    write: (row) => {
      const value = valueAt(row, column.path)
      return value === null ? null : column.cell.write(value)
    },
  }
}

function columnsFor<Row>({ columns }: ExportTable<Row>, roles: readonly Role[]): ExportColumn<Row>[] {
  return may(roles, 'see-prices') ? columns : columns.filter(({ isPrice }) => !isPrice)
}

export function writeTable<Row>(table: ExportTable<Row>, roles: readonly Role[]): ExportFile {
  const columns = columnsFor(table, roles)
  const lines = [
    columns.map(({ heading }) => heading),
    ...table.rows.map((row) => columns.map((column) => column.write(row))),
  ]
  // Spreadsheets read UTF-8 as UTF-8 only where it says so.
  return { name: table.name, text: `\ufeff${lines.map(csvLine).join('')}` }
}

export function describeTable<Row>(table: ExportTable<Row>, roles: readonly Role[]): string {
  const columns = columnsFor(table, roles).map(({ heading, description }) => `  ${heading}: ${description}`)
  return [table.name, `  ${table.about}`, '', ...columns, ''].join('\r\n')
}
