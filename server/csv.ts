type CsvValue = string | number | boolean | null | undefined

const startsLikeFormula = /^[=+\-@\t\r]/
const isPlainNumber = /^[+-]?(\d+(\.\d*)?|\.\d+)(e[+-]?\d+)?$/i

/**
 * One cell of a CSV file: quoted where RFC 4180 asks for it, and a text that a spreadsheet would run as a formula
 * begins with an apostrophe. A number is never one, also a negative number.
 */
export function csvCell(value: CsvValue): string {
  const text = value === null || value === undefined ? '' : String(value)
  const isRun = startsLikeFormula.test(text) && !isPlainNumber.test(text)
  const safe = isRun ? `'${text}` : text
  return /[",\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe
}

/** One record, ended as RFC 4180 ends it. */
export function csvLine(values: readonly CsvValue[]): string {
  return `${values.map(csvCell).join(',')}\r\n`
}
