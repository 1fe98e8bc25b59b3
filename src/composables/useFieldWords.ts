import { fieldKinds } from '#shared/form/readForm.ts'
import type { FieldName, FieldProblem } from '#shared/form/readForm.ts'
import { formatBoreFraction } from '#shared/units/format.ts'
import type { QuantityReading } from '#shared/units/parse.ts'
import { displayUnit } from '#shared/units/quantities.ts'
import type { QuantityKind, UnitSystem } from '#shared/units/quantities.ts'
import { useWords } from './useWords.ts'

/** What a person might type in a field, by what it measures. */
const examples: Record<FieldName, Record<UnitSystem, string>> = {
  freeAir: { us: '375 cfm', metric: '10.5 m³/min' },
  setPressure: { us: '100 psi', metric: '7 bar' },
  unload: { us: '120 psi', metric: '8.3 bar' },
  condition: { us: '90 %', metric: '90 %' },
  curvePressure: { us: '100 psi', metric: '7 bar' },
  hoseBore: { us: '1 1/4 in', metric: '32 mm' },
  hoseLength: { us: '50 ft', metric: '15 m' },
  drop: { us: '5 psi', metric: '0.3 bar' },
  dropFlow: { us: '185 cfm', metric: '5.2 m³/min' },
  roughness: { us: '0.01 mm', metric: '0.01 mm' },
  lossK: { us: '8', metric: '8' },
  regulator: { us: '90 psi', metric: '6 bar' },
  bore: { us: 'No. 6 or 3/8', metric: '9.5 mm' },
  coefficient: { us: '0.81', metric: '0.81' },
  airFirst: { us: '15 cfm', metric: '0.4 m³/min' },
  altitude: { us: '5,200 ft', metric: '1600 m' },
  airTemperature: { us: '86 °F', metric: '30 °C' },
  humidity: { us: '50 %', metric: '50 %' },
  target: { us: '100 psi', metric: '7 bar' },
  mediaRate: { us: '800 lb/h', metric: '360 kg/h' },
  bagMass: { us: '50 lb', metric: '25 kg' },
  fuel: { us: '4 gal/h', metric: '15 L/h' },
  waterRate: { us: '0.5 gal/min', metric: '2 L/min' },
  tank: { us: '100 gal', metric: '400 L' },
}

/** Decimals of a limit, so that none of them is printed as another value. */
const limitDigits: Partial<Record<QuantityKind, Record<UnitSystem, number>>> = {
  pressure: { us: 1, metric: 2 },
  volumeFlow: { us: 1, metric: 2 },
  fuelRate: { us: 2, metric: 1 },
  bore: { us: 2, metric: 0 },
  diameter: { us: 2, metric: 0 },
}

export function useFieldWords() {
  const { t, system, quantity, parts } = useWords()

  /** A value put into a field on a change of units: rounded to be read, since what was typed is kept beside it. */
  function typedValue(kind: QuantityKind, value: number): string {
    const fraction = system.value === 'us' && (kind === 'bore' || kind === 'diameter')
    if (fraction && formatBoreFraction(value) !== null) return `${formatBoreFraction(value)} in`
    const digits = system.value === 'us' ? (fraction ? 3 : kind === 'pressure' ? 1 : undefined) : undefined
    const { number, unit } = parts(kind, value, kind === 'pressure' && system.value === 'metric' ? 2 : digits)
    const trimmed = number.includes('.') ? number.replace(/0+$/, '').replace(/\.$/, '') : number
    return unit === '' ? trimmed : `${trimmed} ${unit}`
  }

  function like(field: FieldName): string {
    return t('fields.like', { example: examples[field][system.value] })
  }

  function readingText(reading: QuantityReading): string {
    return reading.text
  }

  function problemSentence(field: FieldName, problem: FieldProblem): string {
    const [kind] = fieldKinds[field]
    const key = `fields.problems.${problem.problem}`
    /** As many digits as keep a limit from being printed as nothing. */
    const limit = (value: number) => {
      const digits = limitDigits[kind]?.[system.value]
      const isSmall = value > 0 && digits !== undefined && value < 1
      return quantity(kind, value, isSmall ? digits + 2 : digits)
    }
    switch (problem.problem) {
      case 'out-of-range':
        return t(key, { min: limit(problem.detail.min), max: limit(problem.detail.max) })
      case 'unknown-unit':
      case 'wrong-kind':
        return t(key, { unit: problem.detail.unit, like: like(field) })
      case 'drop-too-large':
        return t(key, { largest: quantity('pressure', problem.detail.largestKpa, 1) })
      case 'unload-too-near-set':
        return t(key, { gap: quantity('pressure', 10, system.value === 'us' ? 1 : 2) })
      default:
        return t(key, { like: like(field) })
    }
  }

  /** The name of the unit that a bare number is taken in. */
  function unitSymbol(kind: QuantityKind): string {
    return displayUnit(kind, system.value).symbol
  }

  return { typedValue, readingText, problemSentence, unitSymbol }
}
