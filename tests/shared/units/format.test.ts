import fc from 'fast-check'
import { describe, expect, it, test } from 'vitest'
import { formatBoreFraction, formatQuantity, toTypedText } from '#shared/units/format.ts'
import { parseQuantity } from '#shared/units/parse.ts'
import {
  displayUnit,
  QUANTITY_KINDS,
  toBase,
  type QuantityKind,
  type UnitSystem,
} from '#shared/units/quantities.ts'

const kinds = fc.constantFrom(...QUANTITY_KINDS)
const systems = fc.constantFrom<UnitSystem>('us', 'metric')

describe('a value is written as the trade reads it', () => {
  it.each<[QuantityKind, number, UnitSystem, string, string]>([
    ['pressure', 689.4757293168361, 'us', '100', 'psi'],
    ['pressure', 700, 'metric', '7.0', 'bar'],
    ['volumeFlow', 185 * 0.028316846592, 'us', '185', 'cfm'],
    ['volumeFlow', 5.2386, 'metric', '5.24', 'm³/min'],
    ['volumeFlow', 45.307, 'metric', '45.3', 'm³/min'],
    ['bore', 7.9375, 'us', '5/16', 'in'],
    ['bore', 9.9219, 'us', '25/64', 'in'],
    ['bore', 8, 'us', '0.315', 'in'],
    ['bore', 7.9375, 'metric', '7.94', 'mm'],
    ['bore', 9.5, 'metric', '9.5', 'mm'],
    ['diameter', 31.75, 'us', '1 1/4', 'in'],
    ['diameter', 50.8, 'us', '2', 'in'],
    ['altitude', 1600.2, 'us', '5,250', 'ft'],
    ['altitude', 1600.2, 'metric', '1,600', 'm'],
    ['altitude', -430, 'us', '-1,411', 'ft'],
    ['temperature', 30, 'us', '86', '°F'],
    ['temperature', -0.2, 'metric', '0', '°C'],
    ['massFlow', 1234567.4, 'metric', '1,234,567', 'kg/h'],
    ['volume', 378.5411784, 'us', '100', 'gal'],
    ['number', 0.5, 'us', '0.5', ''],
    ['number', 1234.5, 'us', '1,234.5', ''],
    ['percent', 12.25, 'metric', '12.3', '%'],
  ])('%s %d in %s is %s %s', (kind, value, system, number, unit) => {
    for (const locale of ['en', 'es'] as const) {
      expect(formatQuantity(kind, value, { system, locale })).toEqual({ number, unit })
    }
  })

  it('takes the decimals asked for', () => {
    const options = { system: 'metric', locale: 'es', digits: 2 } as const
    expect(formatQuantity('pressure', 689.4757, options)).toEqual({ number: '6.89', unit: 'bar' })
    expect(formatQuantity('bore', 7.9375, { system: 'us', locale: 'en', digits: 4 }).number).toBe('0.3125')
  })

  it('writes a dash for what is not a number', () => {
    for (const value of [NaN, Infinity, -Infinity]) {
      for (const kind of QUANTITY_KINDS) {
        for (const system of ['us', 'metric'] as const) {
          expect(formatQuantity(kind, value, { system, locale: 'en' }).number).toBe('–')
        }
      }
      expect(formatBoreFraction(value)).toBeNull()
      expect(toTypedText('bore', value, 'us')).toBe('')
    }
  })
})

test.each([
  [9.921875, '25/64'],
  [31.75, '1 1/4'],
  [25.4, '1'],
  [12.7, '1/2'],
  [7.9375 + 0.0004, '5/16'],
  [7.9375 + 0.0006, null],
  [0, null],
  [-7.9375, null],
])('%d mm has the fraction %s', (mm, name) => {
  expect(formatBoreFraction(mm)).toBe(name)
})

test('no value at all prints a minus zero, NaN, Infinity or an exponent', () => {
  const anything = fc.oneof(fc.double(), fc.constantFrom(-0, -1e-9, -0.04, 1e21, -1e300, Number.MAX_VALUE))
  fc.assert(
    fc.property(kinds, systems, anything, (kind, system, value) => {
      const { number } = formatQuantity(kind, value, { system, locale: 'en' })
      expect(number).toMatch(/^(–|-?\d{1,3}(,\d{3})*(\.\d+)?|\d+ \d+\/\d+|\d+\/\d+)$/)
      expect(number).not.toMatch(/^-[0,.]*$/)
    }),
    { numRuns: 3000 },
  )
})

test('what is printed reads back within what is printed', () => {
  fc.assert(
    fc.property(kinds, systems, fc.double({ min: 0.01, max: 50000, noNaN: true }), (kind, system, base) => {
      const { number, unit } = formatQuantity(kind, base, { system, locale: 'es' })
      const result = parseQuantity(kind, `${number} ${unit}`, { system })
      const readings = result.ok
        ? [result.value]
        : result.problem === 'ambiguous-number'
          ? result.detail.readings.map((reading) => reading.value)
          : []
      const decimals = number.includes('/') ? 4 : (number.split('.')[1]?.length ?? 0)
      const shown = displayUnit(kind, system)
      // trailing zeros may be dropped, so a shorter print is of the same or better precision
      const most = { percent: 1, number: 3, hours: 1, volume: 1, length: 1 }[kind as string] ?? decimals
      const half = (toBase(shown, 1) - toBase(shown, 0)) * 0.5 * 10 ** -Math.min(decimals, most)
      const slack = number.includes('/') ? 0.0005 : half
      const best = Math.min(...readings.map((value) => Math.abs(value - base)))
      expect(best).toBeLessThanOrEqual(slack * (1 + 1e-9) + base * 1e-12)
    }),
    { numRuns: 3000 },
  )
})

describe('the typed text of a value', () => {
  it.each<[QuantityKind, number, UnitSystem, string]>([
    ['bore', 7.9375, 'us', '5/16 in'],
    ['bore', 8, 'metric', '8 mm'],
    ['pressure', 689.4757293168361, 'us', '100 psi'],
    ['pressure', 700, 'metric', '7 bar'],
    ['altitude', 1600.2, 'us', '5250 ft'],
    ['temperature', 30, 'us', '86 °F'],
    ['number', 8, 'us', '8'],
    ['diameter', 31.75, 'us', '1 1/4 in'],
  ])('%s %d in %s is "%s"', (kind, value, system, text) => {
    expect(toTypedText(kind, value, system)).toBe(text)
  })

  it('reads back as exactly that value, in either system, without drift', () => {
    const values = fc.oneof(
      fc.double({ min: -1e5, max: 1e5, noNaN: true }),
      fc.double({ noNaN: true, noDefaultInfinity: true }),
      fc.integer({ min: 1, max: 300 }).map((count) => (count / 64) * 25.4),
    )
    fc.assert(
      fc.property(kinds, systems, systems, values, (kind, written, read, value) => {
        const text = toTypedText(kind, value, written)
        // a unit is written, so the reader's own system does not matter
        const result = parseQuantity(kind, text, { system: read })
        expect(result.ok && result.value === value, `${kind} ${value} as "${text}"`).toBe(true)
      }),
      { numRuns: 5000 },
    )
  })
})
