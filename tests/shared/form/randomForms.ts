import fc from 'fast-check'
import { ABRASIVES } from '#shared/catalogue/media.ts'
import { BIT_SETS } from '#shared/catalogue/drillBits.ts'
import type { CheckForm, HoseForm, TypedText } from '#shared/form/checkForm.ts'

const system = fc.constantFrom('us' as const, 'metric' as const)

function typed(...texts: string[]): fc.Arbitrary<TypedText> {
  return fc.record({ text: fc.constantFrom(...texts), system })
}

/** What a person types; one text in a hundred is something else. */
function mostly(sense: fc.Arbitrary<TypedText>, other: fc.Arbitrary<string>): fc.Arbitrary<TypedText> {
  return fc.oneof(
    { weight: 99, arbitrary: sense },
    { weight: 1, arbitrary: fc.record({ text: other, system }) },
  )
}

const blank: TypedText = { text: '', system: 'us' }
const ownCurve = [
  ['4 bar', '10 m3/min'],
  ['100 psi', '300 cfm'],
  ['9 bar', '300 cfm'],
].map(([pressure = '', freeAir = '']) => ({
  pressure: { text: pressure, system: 'us' as const },
  freeAir: { text: freeAir, system: 'us' as const },
}))

/**
 * Forms as they may stand on the screen at any moment.
 *
 * Inputs   what else a field may hold: nonsense, or any text at all
 */
export function arbitraryForm(other: fc.Arbitrary<string>): fc.Arbitrary<CheckForm> {
  const pressure = mostly(typed('100 psi', '7 bar', '690 kPa', '8.5 bar'), other)
  const flow = mostly(typed('375 cfm', '185 cfm', '10.6 m3/min'), other)
  const bore = mostly(typed('1 1/4 in', '38 mm', '1/2 in', '1"', '200 mm'), other)
  const hose: fc.Arbitrary<HoseForm> = fc
    .record({
      isUsed: fc.boolean(),
      bore,
      length: mostly(typed('50 ft', '15 m', '0 m', '25'), other),
      couplings: fc.integer({ min: 0, max: 20 }),
      measured: fc.oneof(
        { weight: 4, arbitrary: fc.constant([blank, blank] as const) },
        { weight: 1, arbitrary: fc.tuple(typed('5 psi', '0.2 bar', '0 psi', '90 psi'), flow) },
        { weight: 1, arbitrary: fc.tuple(fc.constant(blank), flow) },
      ),
      roughness: mostly(typed('', '0.01 mm', '0.05 mm'), other),
    })
    .map(({ measured: [measuredDrop, measuredFlow], ...rest }) => ({
      ...rest,
      measuredDrop: { ...measuredDrop },
      measuredFlow: { ...measuredFlow },
    }))
  return fc.record({
    compressor: fc.record({
      freeAir: flow,
      setPressure: pressure,
      cooling: fc.constantFrom('aftercooled' as const, 'bare' as const),
      engine: fc.constantFrom('unknown' as const, 'natural' as const, 'turbo' as const),
      unload: mostly(typed('', '150 psi', '10 bar'), other),
      condition: mostly(typed('', '90 %', '120', '30'), other),
      curve: fc.oneof(
        { weight: 6, arbitrary: fc.constantFrom([], ownCurve).map((curve) => structuredClone(curve)) },
        { weight: 1, arbitrary: fc.array(fc.record({ pressure, freeAir: flow }), { maxLength: 20 }) },
      ),
    }),
    airLine: hose,
    pot: fc.record({
      isUsed: fc.boolean(),
      bore,
      lossK: mostly(typed('', '8', '1/2'), other),
      isShared: fc.boolean(),
    }),
    outlets: fc.array(
      fc.record({
        regulator: mostly(typed('', '90 psi', '6.2 bar'), other),
        hose,
        whip: hose,
        newBore: mostly(typed('No. 4', '#7', '3/8', '9.5 mm', '29/64 in', '0.41 in'), other),
        boreNow: mostly(typed('', '1/2 in', '12 mm'), other),
        loading: fc.constantFrom('clean', 'lean', 'normal', 'heavy-or-wet'),
        shape: fc.constantFrom('venturi', 'straight'),
        coefficient: mostly(typed('', '0.85', '1'), other),
      }),
      { minLength: 1, maxLength: 4 },
    ),
    hoods: fc.record({
      count: fc.integer({ min: 0, max: 6 }),
      flowEach: mostly(typed('15 cfm', '0.4 m3/min', '170 L/min'), other),
    }),
    tools: fc.record({ flow: mostly(typed('', '30 cfm'), other) }),
    site: fc.record({
      altitude: mostly(typed('1,000 ft', '1280', '1600 m', '-100 m', '0'), other),
      airTemperature: mostly(typed('80 °F', '30 C', '-10'), other),
      humidity: mostly(typed('', '50 %', '100'), other),
    }),
    target: pressure,
    bitSet: fc.constantFrom(...BIT_SETS),
    hour: fc.record({
      abrasive: fc.constantFrom(...ABRASIVES.map(({ id }) => id)),
      mediaRate: mostly(typed('', '800 lb/h'), other),
      bagMass: mostly(typed('', '25 kg'), other),
      fullLoadFuel: mostly(typed('', '4 gal/h'), other),
      isWet: fc.boolean(),
      waterRate: mostly(typed('', '2 L/min'), other),
      tank: mostly(typed('', '100 gal'), other),
    }),
  })
}

export const nonsense = fc.constantFrom(
  '',
  'abc',
  '1,250',
  '12 yd',
  '5 kg',
  '-',
  '1e999',
  '7',
  '1/0',
  'x'.repeat(50),
)

/** Any text an input lets through, of any script. */
export const anyText = fc.string({ unit: 'grapheme', maxLength: 10 })

/** Every typed text of a form, so that a test may go through them all. */
export function typedTextsOf(value: unknown): TypedText[] {
  if (value === null || typeof value !== 'object') return []
  if ('text' in value && 'system' in value) return [value as TypedText]
  return Object.values(value).flatMap(typedTextsOf)
}

export function freezeDeeply<T>(value: T): T {
  if (value !== null && typeof value === 'object') {
    Object.values(value).forEach(freezeDeeply)
    Object.freeze(value)
  }
  return value
}
