import {
  baseUnit,
  displayUnit,
  fromBase,
  sixtyFourthsOf,
  type QuantityKind,
  type Unit,
  type UnitSystem,
} from './quantities.ts'
import { parseQuantity } from './parse.ts'

export interface FormatOptions {
  system: UnitSystem
  /** both languages write 1,234.5, as US crews do */
  locale: 'en' | 'es'
  /** exactly so many decimals; absent, what the unit is usually read to */
  digits?: number | undefined
}

export interface FormattedQuantity {
  number: string
  unit: string
}

export const NO_VALUE = '–'

/** Fewest and most decimals. */
type Decimals = readonly [number, number]

const DECIMALS: Record<QuantityKind, Record<UnitSystem, Decimals>> = {
  pressure: { us: [0, 0], metric: [1, 1] },
  barometer: { us: [2, 2], metric: [1, 1] },
  length: { us: [0, 0], metric: [0, 1] },
  altitude: { us: [0, 0], metric: [0, 0] },
  bore: { us: [3, 3], metric: [1, 2] },
  diameter: { us: [3, 3], metric: [1, 2] },
  volumeFlow: { us: [0, 0], metric: [1, 1] },
  temperature: { us: [0, 0], metric: [0, 0] },
  temperatureDifference: { us: [0, 0], metric: [0, 0] },
  mass: { us: [0, 0], metric: [0, 0] },
  massFlow: { us: [0, 0], metric: [0, 0] },
  volume: { us: [0, 1], metric: [0, 0] },
  power: { us: [0, 0], metric: [0, 0] },
  fuelRate: { us: [1, 1], metric: [1, 1] },
  waterRate: { us: [2, 2], metric: [1, 1] },
  density: { us: [0, 0], metric: [0, 0] },
  percent: { us: [0, 1], metric: [0, 1] },
  number: { us: [0, 3], metric: [0, 3] },
  hours: { us: [0, 1], metric: [0, 1] },
}

/** A value in its base unit, in the words of a unit system. A bore that is a 64th of an inch is named by it. */
export function formatQuantity(
  kind: QuantityKind,
  valueInBase: number,
  { system, digits }: FormatOptions,
): FormattedQuantity {
  const unit = displayUnit(kind, system)
  if (unit.symbol === 'in' && digits === undefined) {
    const fraction = formatBoreFraction(valueInBase)
    if (fraction !== null) return { number: fraction, unit: unit.symbol }
  }
  const value = fromBase(unit, valueInBase)
  const decimals: Decimals = digits === undefined ? decimalsFor(kind, system, value) : [digits, digits]
  return { number: formatNumber(value, decimals), unit: unit.symbol }
}

function decimalsFor(kind: QuantityKind, system: UnitSystem, value: number): Decimals {
  if (kind === 'volumeFlow' && system === 'metric' && Math.abs(value) < 10) return [2, 2]
  return DECIMALS[kind][system]
}

/** `1,234.5`; a value that is not finite is a dash, and nothing is ever minus zero. */
export function formatNumber(value: number, [fewest, most]: readonly [number, number]): string {
  if (!Number.isFinite(value)) return NO_VALUE
  const size = Math.abs(value)
  const fixed = size < 1e21 ? size.toFixed(most) : BigInt(size).toString()
  const [whole = '0', decimals = ''] = fixed.split('.')
  const spare = new RegExp(`0{0,${Math.max(0, most - fewest)}}$`)
  const kept = decimals.replace(spare, '')
  const grouped = whole.replace(/\B(?=(?:\d{3})+$)/g, ',')
  const sign = value < 0 && /[1-9]/.test(fixed) ? '-' : ''
  return `${sign}${grouped}${kept === '' ? '' : `.${kept}`}`
}

/** `25/64`, `1 1/4`: the 64th of an inch within 0.0005 mm of this bore, in lowest terms, or null. */
export function formatBoreFraction(mm: number): string | null {
  const count = sixtyFourthsOf(mm)
  if (count === null) return null
  const whole = Math.floor(count / 64)
  let numerator = count % 64
  if (numerator === 0) return String(whole)
  let denominator = 64
  while (numerator % 2 === 0) {
    numerator /= 2
    denominator /= 2
  }
  return whole === 0 ? `${numerator}/${denominator}` : `${whole} ${numerator}/${denominator}`
}

/**
 * The shortest text that `parseQuantity` reads as exactly this value: in the system's unit where a double allows
 * it, else in the base unit. Empty for a value that is not finite.
 */
export function toTypedText(kind: QuantityKind, valueInBase: number, system: UnitSystem): string {
  if (!Number.isFinite(valueInBase)) return ''
  const unit = displayUnit(kind, system)
  const readsBack = (text: string) => {
    const read = parseQuantity(kind, text, { system })
    return read.ok && read.value === valueInBase
  }
  if (unit.symbol === 'in') {
    const fraction = formatBoreFraction(valueInBase)
    if (fraction !== null && readsBack(`${fraction} in`)) return `${fraction} in`
  }
  const value = fromBase(unit, valueInBase)
  for (let digits = 1; digits <= 17; digits += 1) {
    const text = withUnit(value.toPrecision(digits), unit)
    if (readsBack(text)) return text
  }
  return withUnit(valueInBase.toPrecision(17), baseUnit(kind))
}

function withUnit(digits: string, unit: Unit): string {
  // through a number and back: no trailing zeros, and no exponent where there need be none
  const plain = String(Number(digits))
  return unit.symbol === '' ? plain : `${plain} ${unit.symbol}`
}
