import fc from 'fast-check'
import { unit as mathUnit } from 'mathjs'
import { describe, expect, it, test } from 'vitest'
import { parseQuantity, type ParseOptions, type ParseResult } from '#shared/units/parse.ts'
import { QUANTITY_KINDS, type QuantityKind, type UnitSystem } from '#shared/units/quantities.ts'

const boreRange = { min: 1, max: 60 }

function problemOf(result: ParseResult): string {
  return result.ok ? `read ${result.value} ${result.unit}` : result.problem
}

function readingsOf(result: ParseResult): string[] {
  if (result.ok) return []
  if (result.problem !== 'ambiguous-number' && result.problem !== 'ambiguous-bore') return []
  return result.detail.readings.map((reading) => reading.text)
}

describe('a bore, as the trade writes it', () => {
  // an inch is 25.4 mm and a nozzle number a sixteenth of it; the rest is arithmetic
  it.each<[string, UnitSystem, number]>([
    ['5/16', 'us', (5 * 25.4) / 16],
    ['5/16', 'metric', (5 * 25.4) / 16],
    ['5/16in', 'us', (5 * 25.4) / 16],
    ['5/16-in', 'us', (5 * 25.4) / 16],
    ['5⁄16', 'us', (5 * 25.4) / 16],
    ['25/64"', 'metric', (25 * 25.4) / 64],
    ['3/8 pulg.', 'us', (3 * 25.4) / 8],
    ['1 1/4', 'us', 31.75],
    ['1-1/4', 'us', 31.75],
    ['1 1/4 in', 'metric', 31.75],
    ['1 1/4"', 'us', 31.75],
    ['1 1/4″', 'us', 31.75],
    ["1 1/4''", 'us', 31.75],
    ['1½', 'us', 38.1],
    ['1 ½ in', 'us', 38.1],
    ['½', 'us', 12.7],
    ['⅜', 'metric', 9.525],
    ['⅝ in', 'us', 15.875],
    ['1-5/16 in', 'us', 25.4 + (5 * 25.4) / 16],
    ['No. 5', 'us', (5 * 25.4) / 16],
    ['No 5', 'metric', (5 * 25.4) / 16],
    ['no.5', 'us', (5 * 25.4) / 16],
    ['#5', 'us', (5 * 25.4) / 16],
    ['# 5', 'us', (5 * 25.4) / 16],
    ['n.º 5', 'us', (5 * 25.4) / 16],
    ['N.º 5', 'metric', (5 * 25.4) / 16],
    ['nº5', 'us', (5 * 25.4) / 16],
    ['n° 5', 'us', (5 * 25.4) / 16],
    ['núm. 5', 'us', (5 * 25.4) / 16],
    ['número 8', 'us', 12.7],
    ['nu\u0301m. 8', 'us', 12.7],
    ['8 mm', 'us', 8],
    ['8mm', 'metric', 8],
    ['9,5 mm', 'us', 9.5],
    ['8', 'metric', 8],
    ['9,5', 'metric', 9.5],
    ['0.31', 'us', 0.31 * 25.4],
    ['.31', 'us', 0.31 * 25.4],
    ['0,31', 'us', 0.31 * 25.4],
    ['312 thou', 'us', 0.312 * 25.4],
    ['0.8 cm', 'us', 8],
  ])('%s in %s', (text, system, expected) => {
    const result = parseQuantity('bore', text, { system, range: boreRange })
    expect(problemOf(result)).toMatch(/^read/)
    if (result.ok) expect(result.value).toBeCloseTo(expected, 10)
  })

  it('says which unit it understood', () => {
    expect(parseQuantity('bore', '#5', { system: 'us' })).toMatchObject({ unit: 'No.' })
    expect(parseQuantity('bore', '5/16', { system: 'metric' })).toMatchObject({ unit: 'in' })
    expect(parseQuantity('bore', '8', { system: 'metric' })).toMatchObject({ unit: 'mm' })
  })

  it('asks whether a bare 5 is a nozzle number or millimetres', () => {
    const result = parseQuantity('bore', '5', { system: 'us', range: boreRange })
    expect(problemOf(result)).toBe('ambiguous-bore')
    expect(readingsOf(result)).toEqual(['No. 5', '5 mm'])
  })

  it('takes a bare 9.5 as millimetres where 9.5 inches is out of range', () => {
    const result = parseQuantity('bore', '9.5', { system: 'us', range: boreRange })
    expect(result).toEqual({ ok: true, value: 9.5, unit: 'mm', note: 'ambiguous-settled-by-range' })
    expect(problemOf(parseQuantity('bore', '9.5', { system: 'us' }))).toBe('ambiguous-bore')
  })

  it('never takes a hose for a nozzle', () => {
    expect(parseQuantity('diameter', '2', { system: 'us' })).toMatchObject({ ok: true, value: 50.8 })
    expect(parseQuantity('diameter', 'No. 5', { system: 'us' })).toMatchObject({
      problem: 'wrong-kind',
      detail: { read: 'nozzleNumber' },
    })
  })
})

describe('other quantities', () => {
  it.each<[QuantityKind, string, UnitSystem, number]>([
    ['pressure', '100 psi', 'metric', 689.4757293168361],
    ['pressure', '100', 'us', 689.4757293168361],
    ['pressure', '100 PSIG', 'us', 689.4757293168361],
    ['pressure', '7 bar', 'us', 700],
    ['pressure', '7', 'metric', 700],
    ['pressure', '7,5 bar', 'us', 750],
    ['pressure', '7.5 BAR', 'us', 750],
    ['pressure', '0.7 MPa', 'us', 700],
    ['pressure', '690 kPa', 'us', 690],
    ['pressure', '7 kg/cm²', 'us', 686.4655],
    ['volumeFlow', '185 cfm', 'metric', 185 * 0.028316846592],
    ['volumeFlow', '185', 'us', 185 * 0.028316846592],
    ['volumeFlow', '185 pcm', 'us', 185 * 0.028316846592],
    ['volumeFlow', '185 ft3/min', 'us', 185 * 0.028316846592],
    ['volumeFlow', '5.2 m3/min', 'us', 5.2],
    ['volumeFlow', '5,2 m³/min', 'us', 5.2],
    ['volumeFlow', '5.2 m^3/min', 'us', 5.2],
    ['volumeFlow', '310 m3/h', 'us', 310 / 60],
    ['volumeFlow', '87 L/s', 'us', 5.22],
    ['temperature', '86 F', 'metric', 30],
    ['temperature', '86', 'us', 30],
    ['temperature', '30 °C', 'us', 30],
    ['temperature', '30 ºC', 'us', 30],
    ['temperature', '30℃', 'us', 30],
    ['temperature', '-5 C', 'us', -5],
    ['temperature', '−5 °C', 'us', -5],
    ['temperatureDifference', '18 °F', 'us', 10],
    ['altitude', '5,250 ft', 'us', 1600.2],
    ['altitude', '5250', 'us', 1600.2],
    ['altitude', '5250 pies', 'us', 1600.2],
    ['altitude', '1600 m', 'us', 1600],
    ['altitude', '1,234.5 m', 'us', 1234.5],
    ['altitude', '1.234,5 m', 'metric', 1234.5],
    ['length', "50'", 'metric', 15.24],
    ['length', '50 ft.', 'us', 15.24],
    ['mass', '50 lb', 'metric', 22.6796185],
    ['massFlow', '1,234,567 kg/h', 'us', 1234567],
    ['volume', '100 gal', 'metric', 378.5411784],
    ['barometer', '29.92 inHg', 'us', 101.3207],
    ['density', '95 lb/ft3', 'us', 1521.754],
    ['percent', '60 %', 'us', 60],
    ['percent', '60', 'us', 60],
    ['number', '8', 'us', 8],
    ['hours', '1 1/2', 'us', 1.5],
    ['hours', '90 min', 'us', 1.5],
  ])('%s: %s in %s', (kind, text, system, expected) => {
    const result = parseQuantity(kind, text, { system })
    expect(problemOf(result)).toMatch(/^read/)
    if (result.ok) expect(result.value).toBeCloseTo(expected, 3)
  })
})

describe('what cannot be read', () => {
  it.each<[QuantityKind, string, string]>([
    ['pressure', '', 'empty'],
    ['pressure', '   ', 'empty'],
    ['pressure', 'abc', 'not-a-number'],
    ['pressure', 'psi', 'not-a-number'],
    ['pressure', '-', 'not-a-number'],
    ['pressure', '.', 'not-a-number'],
    ['pressure', '5/0', 'not-a-number'],
    ['pressure', '1/2/3', 'not-a-number'],
    ['pressure', '1 20/16', 'not-a-number'],
    ['pressure', '100+20', 'not-a-number'],
    ['pressure', '100 psi + 20 psi', 'not-a-number'],
    ['pressure', '2*50', 'not-a-number'],
    ['pressure', '(100)', 'not-a-number'],
    ['pressure', '5²', 'not-a-number'],
    ['pressure', '1,23,456', 'not-a-number'],
    ['pressure', '1.2.3', 'not-a-number'],
    ['pressure', '1e999', 'not-a-number'],
    ['pressure', 'Infinity', 'not-a-number'],
    ['pressure', 'NaN', 'not-a-number'],
    ['pressure', '0x10', 'not-a-number'],
    ['pressure', '100 furlong', 'unknown-unit'],
    ['pressure', '9'.repeat(41), 'too-long'],
    ['length', '100 psi', 'wrong-kind'],
    ['bore', '5 psi', 'wrong-kind'],
    ['bore', '8 m', 'wrong-kind'],
    ['pressure', '14.7 psia', 'wrong-kind'],
    ['pressure', 'No. 5', 'wrong-kind'],
    ['number', '5 bar', 'wrong-kind'],
    ['pressure', '1,250', 'ambiguous-number'],
    ['altitude', '1,250', 'ambiguous-number'],
    ['altitude', '1,250 m', 'ambiguous-number'],
  ])('%s: "%s" is %s', (kind, text, problem) => {
    expect(problemOf(parseQuantity(kind, text, { system: 'us' }))).toBe(problem)
  })

  it('names what was read in the wrong field', () => {
    expect(parseQuantity('length', '100 psi', { system: 'us' })).toEqual({
      ok: false,
      problem: 'wrong-kind',
      detail: { read: 'pressure', unit: 'psi' },
    })
  })

  it('gives both readings of 1,250, and the range settles it where only one fits', () => {
    const asked = parseQuantity('altitude', '1,250', { system: 'metric' })
    expect(readingsOf(asked)).toEqual(['1250 m', '1.25 m'])
    const settled = (range: ParseOptions['range']) =>
      parseQuantity('pressure', '1,250', { system: 'us', range })
    expect(settled({ min: 10, max: 3500 })).toMatchObject({ problem: 'out-of-range' })
    expect(settled({ min: 0, max: 2000 })).toEqual({
      ok: true,
      value: 1.25 * 6.894757293168361,
      unit: 'psi',
      note: 'ambiguous-settled-by-range',
    })
    expect(settled({ min: 10, max: 9000 })).toMatchObject({ ok: true, unit: 'psi', value: 8618.446616460451 })
  })

  it('asks rather than take 6,000 m for six metres where 5,000 is the most', () => {
    const asked = parseQuantity('altitude', '6,000 m', { system: 'metric', range: { min: -430, max: 5000 } })
    expect(readingsOf(asked)).toEqual(['6000 m', '6 m'])
  })

  it('reads a grouped 5,250 ft as five thousand, since feet are written so', () => {
    expect(parseQuantity('altitude', '5,250 ft', { system: 'us' })).toMatchObject({
      ok: true,
      note: 'ambiguous-settled-by-unit',
    })
  })

  it('gives the limits of a range in the base unit, and what was read', () => {
    expect(parseQuantity('pressure', '-7 bar', { system: 'us', range: { min: 10, max: 3500 } })).toEqual({
      ok: false,
      problem: 'out-of-range',
      detail: { min: 10, max: 3500, value: -700 },
    })
    expect(parseQuantity('pressure', '35 bar', { system: 'us', range: { min: 10, max: 3500 } }).ok).toBe(true)
    expect(parseQuantity('pressure', '35.01 bar', { system: 'us', range: { min: 10, max: 3500 } }).ok).toBe(
      false,
    )
  })
})

describe('a unit of another table', () => {
  const otherUnit = (text: string) => ({
    value: mathUnit(text).toNumber('m'),
    unit: text.split(' ')[1] ?? '',
  })

  it('is read through the hook, in plain digits', () => {
    const result = parseQuantity('length', '1 1/2 yd', { system: 'us', otherUnit })
    expect(result.ok && result.value).toBeCloseTo(1.3716, 12)
    expect(result).toMatchObject({ unit: 'yd' })
  })

  it('is refused when the hook throws or does not know it', () => {
    expect(problemOf(parseQuantity('length', '5 zork', { system: 'us', otherUnit }))).toBe('unknown-unit')
    expect(problemOf(parseQuantity('length', '5 zork', { system: 'us', otherUnit: () => null }))).toBe(
      'unknown-unit',
    )
    const infinite = () => ({ value: Infinity, unit: 'zork' })
    expect(problemOf(parseQuantity('length', '5 zork', { system: 'us', otherUnit: infinite }))).toBe(
      'unknown-unit',
    )
  })
})

test('nonsense never throws and never reads as something that is not finite', () => {
  const pieces = fc.constantFrom(
    ...[
      '5',
      '1',
      '/',
      ' ',
      '-',
      ',',
      '.',
      '#',
      'No',
      '½',
      'in',
      '"',
      'psi',
      'e',
      '³',
      '%',
      '(',
      'º',
      '−',
      '𝟓',
    ],
  )
  const text = fc.oneof(
    fc.string({ unit: 'binary', maxLength: 60 }),
    fc.array(pieces, { maxLength: 14 }).map((parts) => parts.join('')),
  )
  const codes = new Set<string>()
  fc.assert(
    fc.property(
      fc.constantFrom(...QUANTITY_KINDS),
      fc.constantFrom<UnitSystem>('us', 'metric'),
      text,
      (kind, system, typed) => {
        const result = parseQuantity(kind, typed, { system })
        codes.add(result.ok ? 'ok' : result.problem)
        if (result.ok) expect(Number.isFinite(result.value)).toBe(true)
        for (const reading of readingsOf(result)) {
          expect(parseQuantity(kind, reading, { system }).ok).toBe(true)
        }
      },
    ),
    { numRuns: 5000 },
  )
  // the generator does reach both sides
  expect(codes).toContain('ok')
  expect(codes).toContain('not-a-number')
})

test('a mixed number is its whole plus its fraction, however it is joined', () => {
  fc.assert(
    fc.property(
      fc.integer({ min: 0, max: 3 }),
      fc.integer({ min: 1, max: 63 }),
      fc.constantFrom(' ', '-', '  '),
      fc.constantFrom('', ' in', '"', 'in'),
      (whole, numerator, joint, unit) => {
        const result = parseQuantity('bore', `${whole}${joint}${numerator}/64${unit}`, { system: 'us' })
        expect(result.ok && result.value).toBeCloseTo(whole * 25.4 + (numerator * 25.4) / 64, 10)
      },
    ),
  )
})
