/** What a person wrote in front of the unit. Two values where a comma can be read two ways: grouped first. */
export interface NumberText {
  values: readonly [number] | readonly [number, number]
  isFraction: boolean
  /** what follows the number, trimmed */
  rest: string
}

const VULGAR_FRACTIONS: Record<string, string> = {
  '½': '1/2',
  '¼': '1/4',
  '¾': '3/4',
  '⅛': '1/8',
  '⅜': '3/8',
  '⅝': '5/8',
  '⅞': '7/8',
  '⅓': '1/3',
  '⅔': '2/3',
}

const FRACTION = /^([+-]?)\s*(?:(\d+)(?:\s+|-))?(\d+)\s*\/\s*(\d+)(.*)$/
const DECIMAL = /^([+-]?)\s*((?:\d[\d.,]*|[.,]\d+))(?:e([+-]?\d{1,3})(?![\d\p{L}]))?(.*)$/iu

/**
 * Reads the number at the start of a text: `5/16`, `1 1/4`, `1-1/4`, `1½`, `.31`, `7,5`, `1,234.5`, `1.234,5`.
 * A small grammar, never an expression: `1-5/16` is one and five sixteenths. Null when there is no number.
 */
export function readNumber(text: string): NumberText | null {
  const plain = text
    .replace(/[½¼¾⅛⅜⅝⅞⅓⅔]/g, (character) => ` ${VULGAR_FRACTIONS[character] ?? ''}`)
    .replace(/[⁄∕]/g, '/')
    .replace(/−/g, '-')
    .replace(/\s+/g, ' ')
    .replace(/^([+-]) /, '$1')
    .trim()
  return readFraction(plain) ?? readDecimal(plain)
}

function readFraction(text: string): NumberText | null {
  const match = FRACTION.exec(text)
  if (!match) return null
  const [, sign, whole, numeratorText, denominatorText, rest = ''] = match
  const numerator = Number(numeratorText)
  const denominator = Number(denominatorText)
  if (denominator === 0 || (whole !== undefined && numerator >= denominator)) return null
  const size = Number(whole ?? 0) + numerator / denominator
  return { values: [sign === '-' ? -size : size], isFraction: true, rest: rest.trim() }
}

function readDecimal(text: string): NumberText | null {
  const match = DECIMAL.exec(text)
  if (!match) return null
  const [, sign, digits = '', exponent, rest = ''] = match
  const readings = readDigits(digits)
  if (!readings) return null
  const scaled = readings.map((reading) => Number(`${sign ?? ''}${reading}e${exponent ?? '0'}`))
  if (!scaled.every(Number.isFinite)) return null
  const [first = NaN, second] = scaled
  return { values: second === undefined ? [first] : [first, second], isFraction: false, rest: rest.trim() }
}

/** Digits with commas and points as plain decimal texts: one reading, two for `1,250`, null for nonsense. */
function readDigits(digits: string): string[] | null {
  const lastComma = digits.lastIndexOf(',')
  const lastPoint = digits.lastIndexOf('.')
  if (lastComma >= 0 && lastPoint >= 0) {
    return lastPoint > lastComma ? readGrouped(digits, ',', '.') : readGrouped(digits, '.', ',')
  }
  const separator = lastComma >= 0 ? ',' : '.'
  const parts = digits.split(separator)
  if (parts.length > 2) return readGrouped(digits, separator, '')
  const [whole = '', decimals] = parts
  if (decimals === undefined) return [whole]
  const decimalReading = `${whole || '0'}.${decimals || '0'}`
  const mayBeGrouped = separator === ',' && /^[1-9]\d{0,2}$/.test(whole) && decimals.length === 3
  return mayBeGrouped ? [whole + decimals, decimalReading] : [decimalReading]
}

function readGrouped(digits: string, group: string, decimal: string): string[] | null {
  const [whole = '', decimals = '', ...more] = decimal ? digits.split(decimal) : [digits]
  const groups = whole.split(group)
  const isGrouped = groups.every((part, index) => (index === 0 ? /^\d{1,3}$/ : /^\d{3}$/).test(part))
  return isGrouped && more.length === 0 ? [`${groups.join('')}.${decimals || '0'}`] : null
}
