import { parse } from 'csv-parse/sync'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { csvCell, csvLine, readCsvText } from '../../server/csv.ts'

describe('a cell of a CSV file', () => {
  // The signs as OWASP's page on CSV injection lists them (from memory).
  it.each([
    ...['=1+1', '+cmd', '-2+3', '@SUM(A1)', '\tx', '\rx', '\nx', '-', '=', '-1;2', '+1 555 0100'],
    ...['＝1+1', '＋1+1', '－2+3', '＠SUM(A1)', "'=1+1", "''@x"],
  ])('that a spreadsheet would run as a formula is made a text: %j', (text) => {
    const [[cell] = []] = parse(csvLine([text])) as string[][]
    expect(cell).toBe(`'${text}`)
    expect(readCsvText(cell ?? '')).toBe(text)
  })

  it.each(["'", "''", "it's", "'quoted'", "'90s"])('keeps the apostrophes of a text: %j', (text) => {
    expect(csvCell(text)).toBe(text)
    expect(readCsvText(text)).toBe(text)
  })

  it.each([-2, 0, 3.5, -1e-7, '-2.5', '+3', '-.5', '-1e21'])('that is a number stays one: %j', (value) => {
    expect(csvCell(value)).toBe(String(value))
  })

  // RFC 4180, section 2, rules 5 to 7.
  it.each([
    ['a,b', '"a,b"'],
    ['say "hi"', '"say ""hi"""'],
    ['two\r\nlines', '"two\r\nlines"'],
    ['plain', 'plain'],
    ['', ''],
  ])('is quoted as RFC 4180 has it: %j', (text, cell) => {
    expect(csvCell(text)).toBe(cell)
  })

  it('is empty where there is nothing', () => {
    expect(csvLine([null, undefined, true])).toBe(',,true\r\n')
  })

  it('comes back from a reader of CSV as it was, whatever it holds', () => {
    const text = fc
      .string({ unit: 'grapheme' })
      .filter((value) => !/^[+-]?\.?\d/.test(value))
      .chain((value) => fc.constantFrom(value, `'${value}`, `=${value}`, `'=${value}`))
    fc.assert(
      fc.property(fc.array(text, { minLength: 2, maxLength: 5 }), (cells) => {
        const [read = []] = parse(csvLine(cells), { recordDelimiter: '\r\n' }) as string[][]
        expect(read.map(readCsvText)).toEqual(cells)
      }),
      { seed: 16, numRuns: 2000 },
    )
  })
})
