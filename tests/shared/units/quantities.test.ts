import fc from 'fast-check'
import { unit as mathUnit } from 'mathjs'
import { describe, expect, it, test } from 'vitest'
import {
  displayUnit,
  findUnit,
  fromBase,
  QUANTITY_KINDS,
  snapBoreMm,
  toBase,
  unitsOf,
  type QuantityKind,
} from '#shared/units/quantities.ts'

/** mathjs knows neither cfm nor inHg nor kgf; `F` is its farad. Its psi is 5.9e-11 low, its horsepower nearly so. */
const MATHJS_NAMES: Record<string, string> = {
  psi: 'psi',
  kPa: 'kPa',
  bar: 'bar',
  MPa: 'MPa',
  hPa: 'hPa',
  m: 'm',
  ft: 'ft',
  in: 'in',
  cm: 'cm',
  mm: 'mm',
  thou: 'mil',
  'm³/min': 'm^3/min',
  cfm: 'ft^3/min',
  'm³/h': 'm^3/h',
  'L/s': 'L/s',
  'L/min': 'L/min',
  '°C': 'degC',
  '°F': 'degF',
  K: 'K',
  kg: 'kg',
  lb: 'lbm',
  ton: 'ton',
  t: 'tonne',
  'kg/h': 'kg/h',
  'lb/h': 'lbm/h',
  'lb/min': 'lbm/min',
  'kg/min': 'kg/min',
  L: 'L',
  gal: 'gallon',
  'm³': 'm^3',
  kW: 'kW',
  hp: 'hp',
  'L/h': 'L/h',
  'gal/h': 'gallon/h',
  'gal/min': 'gallon/min',
  'kg/m³': 'kg/m^3',
  'lb/ft³': 'lbm/ft^3',
  'kg/L': 'kg/L',
  h: 'h',
  min: 'min',
}
/** units that mathjs cannot be asked about */
const WITHOUT_ORACLE = new Set(['inHg', 'psia', 'kgf/cm²', '%', ''])

describe('conversions agree with mathjs', () => {
  for (const kind of QUANTITY_KINDS.filter((candidate) => candidate !== 'temperatureDifference')) {
    const [base] = unitsOf(kind)
    for (const unit of unitsOf(kind)) {
      if (WITHOUT_ORACLE.has(unit.symbol)) continue
      it(`${kind} in ${unit.symbol}`, () => {
        const name = MATHJS_NAMES[unit.symbol] as string
        const baseName = MATHJS_NAMES[base?.symbol ?? ''] as string
        for (const value of [0.31, 1, 7.5, 86, 185, 5250]) {
          const expected = mathUnit(value, name).toNumber(baseName)
          const actual = toBase(unit, value)
          const tolerance = name === 'psi' || name === 'hp' ? 6e-11 : 1e-13
          expect(Math.abs(actual - expected)).toBeLessThanOrEqual(tolerance * Math.abs(expected) + 1e-12)
        }
      })
    }
  }
})

test.each<[QuantityKind, string, number, number]>([
  // NIST SP 811, Appendix B.8: factors in bold are exact
  ['pressure', 'psi', 1, 6.894757293168361],
  ['pressure', 'bar', 1, 100],
  ['pressure', 'kgf/cm²', 1, 98.0665],
  ['length', 'ft', 1, 0.3048],
  ['bore', 'in', 1, 25.4],
  ['bore', 'thou', 1, 0.0254],
  ['volumeFlow', 'cfm', 1, 0.028316846592],
  ['volumeFlow', 'L/s', 1, 0.06],
  ['mass', 'lb', 1, 0.45359237],
  ['volume', 'gal', 1, 3.785411784],
  ['temperature', '°F', 212, 100],
  ['temperature', '°F', -40, -40],
  ['temperature', 'K', 273.15, 0],
  ['temperatureDifference', '°F', 18, 10],
])('%s: %s × %d is the defined value', (kind, symbol, value, expected) => {
  const unit = findUnit(kind, symbol)
  expect(unit).not.toBeNull()
  if (unit) expect(toBase(unit, value)).toBeCloseTo(expected, 12)
})

test('conventional inch of mercury is 3.386389 kPa (NIST SP 811, B.8, seven digits)', () => {
  const unit = findUnit('barometer', 'inHg')
  expect(unit && toBase(unit, 1)).toBeCloseTo(3.386389, 6)
})

test('each system shows the units its crews read', () => {
  const shown = (kind: QuantityKind) => [displayUnit(kind, 'us').symbol, displayUnit(kind, 'metric').symbol]
  expect(shown('pressure')).toEqual(['psi', 'bar'])
  expect(shown('bore')).toEqual(['in', 'mm'])
  expect(shown('length')).toEqual(['ft', 'm'])
  expect(shown('altitude')).toEqual(['ft', 'm'])
  expect(shown('volumeFlow')).toEqual(['cfm', 'm³/min'])
  expect(shown('temperature')).toEqual(['°F', '°C'])
  expect(shown('massFlow')).toEqual(['lb/h', 'kg/h'])
  expect(shown('fuelRate')).toEqual(['gal/h', 'L/h'])
  expect(shown('volume')).toEqual(['gal', 'L'])
})

test('no spelling names two units of one kind', () => {
  for (const kind of QUANTITY_KINDS) {
    const spellings = unitsOf(kind).flatMap((unit) => [...new Set(unit.spellings)])
    expect(new Set(spellings).size, kind).toBe(spellings.length)
  }
})

test('every unit converts there and back', () => {
  const units = QUANTITY_KINDS.flatMap((kind) => unitsOf(kind))
  fc.assert(
    fc.property(fc.constantFrom(...units), fc.double({ min: -1e6, max: 1e6, noNaN: true }), (unit, value) => {
      const back = fromBase(unit, toBase(unit, value))
      expect(Math.abs(back - value)).toBeLessThanOrEqual(
        1e-15 * (Math.abs(value) + Math.abs(unit.shift)) + 1e-300,
      )
    }),
  )
})

test('a bore within half a micrometre of a 64th becomes that 64th', () => {
  expect(snapBoreMm(9.9219)).toBe(9.921875)
  expect(snapBoreMm(9.9224)).toBe(9.9224)
  expect(snapBoreMm(10)).toBe(10)
})
