import {
  baseUnit,
  displayUnit,
  findUnit,
  QUANTITY_KINDS,
  toBase,
  type QuantityKind,
  type Unit,
  type UnitSystem,
} from './quantities.ts'
import { readNumber, type NumberText } from './numberText.ts'

export const MAX_QUANTITY_TEXT = 40

/** Limits in the kind's base unit, both inside the range. */
export interface QuantityRange {
  min: number
  max: number
}

/** One way to read the text; `text` typed instead is read that way only. */
export interface QuantityReading {
  text: string
  value: number
  unit: string
}

export interface ParseOptions {
  system: UnitSystem
  range?: QuantityRange | undefined
  /**
   * Reads a unit that is not in our own table. It is given the number in plain digits and the unit as typed
   * (`1.5 yd`), and answers in the kind's base unit or null.
   */
  otherUnit?: ((text: string) => { value: number; unit: string } | null) | undefined
}

export type ParsedQuantity = {
  ok: true
  /** in the kind's base unit */
  value: number
  /** the symbol of the unit it was understood in; `No.` for a nozzle number */
  unit: string
  /** it could have been read another way, and what settled it */
  note?: 'ambiguous-settled-by-range' | 'ambiguous-settled-by-unit'
}

export type ParseProblem = { ok: false } & (
  | { problem: 'empty' | 'not-a-number'; detail?: undefined }
  | { problem: 'too-long'; detail: { limit: number } }
  | { problem: 'unknown-unit'; detail: { unit: string } }
  | { problem: 'wrong-kind'; detail: { read: QuantityKind | 'nozzleNumber'; unit: string } }
  | { problem: 'ambiguous-number' | 'ambiguous-bore'; detail: { readings: readonly QuantityReading[] } }
  | { problem: 'out-of-range'; detail: QuantityRange & { value: number } }
)

export type ParseResult = ParsedQuantity | ParseProblem

const NOZZLE_NUMBER =
  /^(?:#|(?:no|num|núm|numero|número|number|nro)\b\.?|n\s?\.?\s?[º°o]\.?)\s*(?=[\d½¼¾⅛⅜⅝⅞⅓⅔.,])/iu
/** one nozzle number is a sixteenth of an inch of bore */
const NOZZLE_NUMBER_UNIT: Unit = {
  symbol: 'No.',
  system: 'us',
  times: 127,
  over: 5 * 16,
  shift: 0,
  spellings: [],
}

/**
 * Reads what a person typed into a quantity field. The answer is in the kind's base unit; a text that cannot be
 * read, or can be read two ways, is answered with a problem code and never with a guess or an exception.
 */
export function parseQuantity(kind: QuantityKind, text: string, options: ParseOptions): ParseResult {
  const trimmed = text.trim()
  if (trimmed === '') return { ok: false, problem: 'empty' }
  if (trimmed.length > MAX_QUANTITY_TEXT) {
    return { ok: false, problem: 'too-long', detail: { limit: MAX_QUANTITY_TEXT } }
  }
  const typed = trimmed.normalize('NFC')
  const prefix = NOZZLE_NUMBER.exec(typed)
  const number = readNumber(prefix ? typed.slice(prefix[0].length) : typed)
  if (!number) return { ok: false, problem: 'not-a-number' }
  if (prefix) return readNozzleNumber(kind, number, options)
  if (number.rest === '') return readBareNumber(kind, number, options)
  return readWithUnit(kind, number, options)
}

function readNozzleNumber(kind: QuantityKind, number: NumberText, options: ParseOptions): ParseResult {
  if (number.rest !== '') return { ok: false, problem: 'not-a-number' }
  if (kind !== 'bore') {
    return {
      ok: false,
      problem: 'wrong-kind',
      detail: { read: 'nozzleNumber', unit: NOZZLE_NUMBER_UNIT.symbol },
    }
  }
  return settle(readingsIn(number, NOZZLE_NUMBER_UNIT), options.range, 'ambiguous-number')
}

function readBareNumber(kind: QuantityKind, number: NumberText, options: ParseOptions): ParseResult {
  const isAcross = kind === 'bore' || kind === 'diameter'
  if (isAcross && number.isFraction) {
    return settle(readingsIn(number, displayUnit(kind, 'us')), options.range, 'ambiguous-number')
  }
  const [value] = number.values
  if (kind === 'bore' && options.system === 'us' && number.values.length === 1 && value >= 2) {
    // nobody's nozzle is two inches: it is a nozzle number, or millimetres
    const asMetric = readingsIn(number, baseUnit(kind))
    const other = Number.isInteger(value) ? NOZZLE_NUMBER_UNIT : displayUnit(kind, 'us')
    return settle([...readingsIn(number, other), ...asMetric], options.range, 'ambiguous-bore')
  }
  return settle(readingsIn(number, displayUnit(kind, options.system)), options.range, 'ambiguous-number')
}

function readWithUnit(kind: QuantityKind, number: NumberText, options: ParseOptions): ParseResult {
  const unitText = number.rest.replace(/^-\s*(?=\p{L})/u, '')
  const unit = findUnit(kind, unitText)
  if (unit) {
    const isUsualGrouping =
      unit.system === 'us' && kind !== 'bore' && kind !== 'diameter' && unit.symbol !== 'in'
    return settle(readingsIn(number, unit), options.range, 'ambiguous-number', isUsualGrouping)
  }
  const otherKind = QUANTITY_KINDS.find((candidate) => findUnit(candidate, unitText))
  if (otherKind) {
    return { ok: false, problem: 'wrong-kind', detail: { read: otherKind, unit: unitText } }
  }
  const others = number.values.map((value) => readOtherUnit(value, unitText, options.otherUnit))
  const readings = others.filter((reading) => reading !== null)
  if (readings.length > 0) return settle(readings, options.range, 'ambiguous-number')
  if (looksLikeUnit(unitText)) return { ok: false, problem: 'unknown-unit', detail: { unit: unitText } }
  return { ok: false, problem: 'not-a-number' }
}

function readOtherUnit(
  value: number,
  unitText: string,
  otherUnit: ParseOptions['otherUnit'],
): QuantityReading | null {
  if (!otherUnit) return null
  const text = `${value} ${unitText}`
  try {
    const read = otherUnit(text)
    return read && Number.isFinite(read.value) ? { text, value: read.value, unit: read.unit } : null
  } catch {
    // a library that throws at nonsense has not read it
    return null
  }
}

/** A word, perhaps with a power or a quotient in it; not the rest of an expression. */
function looksLikeUnit(text: string): boolean {
  return /^[\p{L}°%"'][\p{L}°%"'/·.()²³\s]*$/u.test(text.replace(/(\p{L})\^?[23]/gu, '$1'))
}

function readingsIn(number: NumberText, unit: Unit): QuantityReading[] {
  return number.values
    .map((value) => ({ text: textIn(value, unit), value: toBase(unit, value), unit: unit.symbol }))
    .filter((reading) => Number.isFinite(reading.value))
}

function textIn(value: number, unit: Unit): string {
  if (unit === NOZZLE_NUMBER_UNIT) return `No. ${value}`
  return unit.symbol === '' ? String(value) : `${value} ${unit.symbol}`
}

/** Out of the range, but by so little that it may well be what was meant: `6,000 m` where 5,000 is the most. */
function isNear(value: number, range: QuantityRange | undefined): boolean {
  return range !== undefined && value > range.max && value <= 3 * range.max
}

/** One reading is the answer; of several, the one that is inside the range, or else the person is asked. */
function settle(
  readings: readonly QuantityReading[],
  range: QuantityRange | undefined,
  question: 'ambiguous-number' | 'ambiguous-bore',
  isUsualGrouping = false,
): ParseResult {
  const [first] = readings
  if (!first) return { ok: false, problem: 'not-a-number' }
  const possible = range
    ? readings.filter((reading) => reading.value >= range.min && reading.value <= range.max)
    : readings
  const [chosen, ...others] = possible
  if (!chosen) {
    const { min, max } = range as QuantityRange
    return { ok: false, problem: 'out-of-range', detail: { min, max, value: first.value } }
  }
  const answer: ParsedQuantity = { ok: true, value: chosen.value, unit: chosen.unit }
  if (readings.length === 1) return answer
  const isNearMiss = readings.some((reading) => !possible.includes(reading) && isNear(reading.value, range))
  if (isNearMiss && !isUsualGrouping) return { ok: false, problem: question, detail: { readings } }
  if (others.length === 0) return { ...answer, note: 'ambiguous-settled-by-range' }
  // with feet, psi, cfm the trade writes 5,250 for five thousand and some
  if (isUsualGrouping) return { ...answer, note: 'ambiguous-settled-by-unit' }
  return { ok: false, problem: question, detail: { readings: possible } }
}
