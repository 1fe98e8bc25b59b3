import { CsvError, parse } from 'csv-parse/sync'
import type { FieldError } from '#shared/contracts/problems.ts'

/** a curve of as many points as there may be takes half of it */
const longestCell = 2000

export interface TableRow {
  /** of the file, counted from 1 */
  line: number
  cells: string[]
}

/** A comma, a semicolon or a tab: whichever the heading row has most of. */
function findDelimiter(text: string): string {
  const [heading = ''] = text.split(/\r\n|\r|\n/, 1)
  const count = (delimiter: string) => heading.split(delimiter).length
  return [',', ';', '\t'].reduce((best, next) => (count(next) > count(best) ? next : best))
}

/** The rows of a CSV text up to so many, the heading row first, or why it is none. */
export function readTable(text: string, mostRows: number): { rows: TableRow[]; error: FieldError | null } {
  const csv = text.replace(/^\ufeff/, '')
  try {
    const records = parse(csv, {
      delimiter: findDelimiter(csv),
      relax_column_count: true,
      skip_empty_lines: true,
      trim: true,
      to: mostRows,
      info: true,
    }) as unknown as { record: string[]; info: { lines: number } }[]
    const rows = records
      .map(({ record, info }) => ({ line: info.lines, cells: record }))
      .filter(({ cells }) => cells.some((cell) => cell !== ''))
    const tooLong = rows.find(({ cells }) => cells.some((cell) => cell.length > longestCell))
    if (!tooLong) return { rows, error: null }
    const message = `Line ${tooLong.line} has a cell of more than ${longestCell} characters.`
    return { rows: [], error: { path: '', code: 'too-long', message } }
  } catch (error) {
    if (!(error instanceof CsvError)) throw error
    const line = typeof error['lines'] === 'number' ? ` near line ${error['lines']}` : ''
    const message = `This cannot be read as CSV${line}: a quotation mark is out of place.`
    return { rows: [], error: { path: '', code: 'invalid', message } }
  }
}
