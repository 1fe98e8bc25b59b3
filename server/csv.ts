type CsvValue = string | number | boolean | null | undefined

/** The full-width signs are typed in East Asia, where spreadsheets run them too. */
const startsLikeFormula = /^'*[=+\-@\t\r\n＝＋－＠]/
const isPlainNumber = /^[+-]?(\d+(\.\d*)?|\.\d+)(e[+-]?\d+)?$/i

/**
 * One cell of a CSV file: quoted where RFC 4180 asks for it, and a text that a spreadsheet would run as a formula
 * begins with an apostrophe (one more, if it has some already). A number is never one, also a negative number.
 */
export function csvCell(value: CsvValue): string {
  const text = value === null || value === undefined ? '' : String(value)
  const isRun = startsLikeFormula.test(text) && !isPlainNumber.test(text)
  const safe = isRun ? `'${text}` : text
  return /[",\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe
}

/** The text of a cell as it was before csvCell put its apostrophe there. */
export function readCsvText(cell: string): string {
  return cell.startsWith("'") && startsLikeFormula.test(cell) ? cell.slice(1) : cell
}

/** One record, ended as RFC 4180 ends it. */
export function csvLine(values: readonly CsvValue[]): string {
  return `${values.map(csvCell).join(',')}\r\n`
}
