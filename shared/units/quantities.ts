/**
 * The quantities people type and read, and their units. Every value is kept in its kind's base unit; factors are
 * the definitions themselves (international yard and pound 1959, US gallon 231 in³, standard gravity 9.80665 m/s²),
 * so a conversion adds nothing but the rounding of a double.
 */

export type UnitSystem = 'us' | 'metric'

export const MM_PER_INCH = 25.4
export const M_PER_FOOT = 0.3048
export const M3_PER_CUBIC_FOOT = 0.028316846592
export const KG_PER_POUND = 0.45359237
export const L_PER_US_GALLON = 3.785411784
/** pound-force per square inch, to the digits of a double */
export const KPA_PER_PSI = 6.894757293168361
/** conventional inch of mercury, 25.4 × 133.322387415 Pa */
const KPA_PER_INCH_OF_MERCURY = 3.386388640341
/** mechanical horsepower, 550 ft·lbf/s */
const KW_PER_HORSEPOWER = 0.7456998715822702

/** base = (value + shift) · times / over; an inch is 127/5 mm, so that 3/16 in is the double nearest to 4.7625 mm */
export interface Unit {
  symbol: string
  system: UnitSystem
  times: number
  over: number
  shift: number
  /** as typed, after `normaliseUnit`; the symbol itself is always understood */
  spellings: readonly string[]
}

function unit(
  symbol: string,
  system: UnitSystem,
  times: number,
  spellings: string,
  { over = 1, shift = 0 }: { over?: number; shift?: number } = {},
): Unit {
  const words = spellings === '' ? [] : spellings.split(' ')
  return { symbol, system, times, over, shift, spellings: [normaliseUnit(symbol), ...words] }
}

/** One spelling for what is typed in many: case, accents, spaces, superscripts and a closing full stop do not matter. */
export function normaliseUnit(text: string): string {
  return text
    .replace(/º/g, '°')
    .normalize('NFKC')
    .normalize('NFD')
    .replace(/\p{M}/gu, '')
    .toLowerCase()
    .replace(/[\s^]/g, '')
    .replace(/[′’‘´]/g, "'")
    .replace(/[”“]|''/g, '"')
    .replace(/\.$/, '')
}

const inch = unit('in', 'us', 127, '" inch inches pulg pulgada pulgadas', { over: 5 })
const millimetre = unit(
  'mm',
  'metric',
  1,
  'millimeter millimeters millimetre millimetres milimetro milimetros',
)
const boreUnits = [
  millimetre,
  inch,
  unit('thou', 'us', 127, 'mils', { over: 5000 }),
  unit('cm', 'metric', 10, ''),
]
const lengthUnits = [
  unit('m', 'metric', 1, 'meter meters metre metres metro metros'),
  unit('ft', 'us', 381, "' foot feet pie pies", { over: 1250 }),
  unit('in', 'us', 127, '" inch inches pulg pulgada pulgadas', { over: 5000 }),
  unit('cm', 'metric', 1, '', { over: 100 }),
  unit('mm', 'metric', 1, '', { over: 1000 }),
]

/** Every kind with its units; the first unit is the base unit. Pressures are gauge, the barometer is absolute. */
const UNITS = {
  pressure: [
    unit('kPa', 'metric', 1, 'kpag kpa(g)'),
    unit('psi', 'us', KPA_PER_PSI, 'psig psi(g) lb lbs libras lb/in2 lbs/in2 lb/pulg2 lbf/in2'),
    unit('bar', 'metric', 100, 'bars barg bar(g) bares'),
    unit('MPa', 'metric', 1000, ''),
    unit('kgf/cm²', 'metric', 98.0665, 'kg/cm2'),
  ],
  barometer: [
    unit('kPa', 'metric', 1, 'kpaa kpa(a)'),
    unit('inHg', 'us', KPA_PER_INCH_OF_MERCURY, '"hg'),
    unit('hPa', 'metric', 1, 'mbar mb', { over: 10 }),
    unit('psia', 'us', KPA_PER_PSI, 'psi(a)'),
  ],
  length: lengthUnits,
  altitude: lengthUnits,
  bore: boreUnits,
  diameter: boreUnits,
  volumeFlow: [
    unit('m³/min', 'metric', 1, 'm3/m'),
    unit('cfm', 'us', M3_PER_CUBIC_FOOT, 'acfm pcm pies3/min pie3/min ft3/min ft3/m cuft/min'),
    unit('m³/h', 'metric', 1, 'm3/hr', { over: 60 }),
    unit('L/s', 'metric', 60, '', { over: 1000 }),
    unit('L/min', 'metric', 1, 'lpm', { over: 1000 }),
  ],
  temperature: [
    unit('°C', 'metric', 1, 'c degc degreesc celsius gradosc grados'),
    unit('°F', 'us', 5, 'f degf degreesf fahrenheit gradosf', { over: 9, shift: -32 }),
    unit('K', 'metric', 1, 'kelvin', { shift: -273.15 }),
  ],
  temperatureDifference: [
    unit('K', 'metric', 1, 'kelvin °c c degc'),
    unit('°F', 'us', 5, 'f degf', { over: 9 }),
  ],
  mass: [
    unit('kg', 'metric', 1, 'kgs kilo kilos'),
    unit('lb', 'us', KG_PER_POUND, 'lbs pound pounds libra libras'),
    unit('ton', 'us', 2000 * KG_PER_POUND, 'tons'),
    unit('t', 'metric', 1000, 'tonne tonnes'),
  ],
  massFlow: [
    unit('kg/h', 'metric', 1, 'kg/hr'),
    unit('lb/h', 'us', KG_PER_POUND, 'lb/hr lbs/h lbs/hr'),
    unit('lb/min', 'us', 60 * KG_PER_POUND, 'lbs/min'),
    unit('kg/min', 'metric', 60, ''),
  ],
  volume: [
    unit('L', 'metric', 1, 'liter liters litre litres litro litros'),
    unit('gal', 'us', L_PER_US_GALLON, 'gallon gallons galon galones usgal'),
    unit('m³', 'metric', 1000, ''),
  ],
  power: [unit('kW', 'metric', 1, ''), unit('hp', 'us', KW_PER_HORSEPOWER, 'bhp')],
  fuelRate: [unit('L/h', 'metric', 1, 'l/hr lph'), unit('gal/h', 'us', L_PER_US_GALLON, 'gal/hr gph')],
  waterRate: [
    unit('L/min', 'metric', 1, 'lpm'),
    unit('gal/min', 'us', L_PER_US_GALLON, 'gpm'),
    unit('L/h', 'metric', 1, 'l/hr lph', { over: 60 }),
    unit('gal/h', 'us', L_PER_US_GALLON, 'gal/hr gph', { over: 60 }),
  ],
  density: [
    unit('kg/m³', 'metric', 1, ''),
    unit('lb/ft³', 'us', KG_PER_POUND, 'lbs/ft3 lb/pie3 pcf', { over: M3_PER_CUBIC_FOOT }),
    unit('kg/L', 'metric', 1000, 'g/cm3'),
  ],
  percent: [unit('%', 'metric', 1, 'percent pct porciento')],
  number: [unit('', 'metric', 1, '')],
  hours: [
    unit('h', 'metric', 1, 'hr hrs hour hours hora horas'),
    unit('min', 'metric', 1, 'mins', { over: 60 }),
  ],
} satisfies Record<string, readonly Unit[]>

export type QuantityKind = keyof typeof UNITS

export const QUANTITY_KINDS = Object.keys(UNITS) as QuantityKind[]

const DISPLAY_SYMBOLS: Record<QuantityKind, Record<UnitSystem, string>> = {
  pressure: { us: 'psi', metric: 'bar' },
  barometer: { us: 'inHg', metric: 'kPa' },
  length: { us: 'ft', metric: 'm' },
  altitude: { us: 'ft', metric: 'm' },
  bore: { us: 'in', metric: 'mm' },
  diameter: { us: 'in', metric: 'mm' },
  volumeFlow: { us: 'cfm', metric: 'm³/min' },
  temperature: { us: '°F', metric: '°C' },
  temperatureDifference: { us: '°F', metric: 'K' },
  mass: { us: 'lb', metric: 'kg' },
  massFlow: { us: 'lb/h', metric: 'kg/h' },
  volume: { us: 'gal', metric: 'L' },
  power: { us: 'hp', metric: 'kW' },
  fuelRate: { us: 'gal/h', metric: 'L/h' },
  waterRate: { us: 'gal/min', metric: 'L/min' },
  density: { us: 'lb/ft³', metric: 'kg/m³' },
  percent: { us: '%', metric: '%' },
  number: { us: '', metric: '' },
  hours: { us: 'h', metric: 'h' },
}

export function unitsOf(kind: QuantityKind): readonly Unit[] {
  return UNITS[kind]
}

export function baseUnit(kind: QuantityKind): Unit {
  return UNITS[kind][0] as Unit
}

const displayUnits = Object.fromEntries(
  QUANTITY_KINDS.map((kind) => {
    const find = (system: UnitSystem) =>
      unitsOf(kind).find((candidate) => candidate.symbol === DISPLAY_SYMBOLS[kind][system]) ?? baseUnit(kind)
    return [kind, { us: find('us'), metric: find('metric') }]
  }),
) as Record<QuantityKind, Record<UnitSystem, Unit>>

/** The unit a bare number is read in and a value is shown in. */
export function displayUnit(kind: QuantityKind, system: UnitSystem): Unit {
  return displayUnits[kind][system]
}

/** The unit of this kind that the text names, or null. */
export function findUnit(kind: QuantityKind, text: string): Unit | null {
  const spelling = normaliseUnit(text)
  return unitsOf(kind).find((candidate) => candidate.spellings.includes(spelling)) ?? null
}

export function toBase(from: Unit, value: number): number {
  return ((value + from.shift) * from.times) / from.over
}

export function fromBase(to: Unit, base: number): number {
  return (base * to.over) / to.times - to.shift
}

/** The double nearest to so many inches in mm, for any binary fraction of an inch. */
export function mmOfInches(inches: number): number {
  return toBase(inch, inches)
}

/** Bores within this of a 64th of an inch, or of each other, are the same bore; with what binary numbers add to it. */
export const BORE_TOLERANCE_MM = 0.0005 + 1e-9

const LARGEST_FRACTION_MM = 1000

/** How many 64ths of an inch this is, where it is a whole number of them within the bore tolerance; else null. */
export function sixtyFourthsOf(mm: number): number | null {
  if (mm > LARGEST_FRACTION_MM) return null
  const count = Math.round((mm / MM_PER_INCH) * 64)
  return count > 0 && Math.abs(mmOfInches(count / 64) - mm) <= BORE_TOLERANCE_MM ? count : null
}

/** A bore within 0.0005 mm of a 64th of an inch becomes exactly that 64th; any other is left as it is. */
export function snapBoreMm(mm: number): number {
  const count = sixtyFourthsOf(mm)
  return count === null ? mm : mmOfInches(count / 64)
}
