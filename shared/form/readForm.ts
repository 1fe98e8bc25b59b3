import { LINE_TEMPERATURE_RISE_K, defaultUnloadKpa } from '../catalogue/compressorClasses.ts'
import { HOSE_ROUGHNESS_MM, MEDIA_FACTOR_AFTER_POT, POT_DEFAULT, hoseElement } from '../catalogue/hoses.ts'
import { lossKFromMeasured } from '../catalogue/hoses.ts'
import { DISCHARGE_COEFFICIENTS, STRAIGHT_BORE_FACTOR } from '../catalogue/media.ts'
import type { CheckElement, CheckOutlet, CheckRequest } from '../contracts/check.ts'
import { checkLimits, minUnloadAboveSetKpa } from '../contracts/limits.ts'
import type { Range } from '../contracts/limits.ts'
import { resolveAmbient } from '../airflow/index.ts'
import { parseQuantity } from '../units/parse.ts'
import type { ParseOptions, ParseProblem, ParseResult } from '../units/parse.ts'
import { snapBoreMm } from '../units/quantities.ts'
import type { QuantityKind } from '../units/quantities.ts'
import type { CheckForm, HoseForm, OutletForm, TypedText } from './checkForm.ts'

/** What is wrong between fields; the reader's own problems are about one field's text. */
export type FieldProblem =
  | ParseProblem
  | {
      ok: false
      problem: 'unload-too-near-set' | 'bore-now-under-new' | 'curve-not-rising' | 'curve-air-rising'
    }
  | { ok: false; problem: 'loss-too-large' }
  | { ok: false; problem: 'drop-too-large'; detail: { largestKpa: number } }

export interface ReadCheck {
  /** null while a field is wrong or half typed */
  request: CheckRequest | null
  /** by the field's place in the form: `outlets.0.hose.bore` */
  problems: Record<string, FieldProblem>
  /** each field's value in its base unit, where it could be read */
  values: Record<string, number>
}

/** A reader of units outside our own table, by what is measured. */
export type OtherUnit = (kind: QuantityKind) => ParseOptions['otherUnit']

/** Every quantity of the form: what it measures and what it may be, in its base unit. */
export const fieldKinds = {
  freeAir: ['volumeFlow', checkLimits.freeAirM3Min],
  setPressure: ['pressure', checkLimits.setPressureKpa],
  unload: ['pressure', checkLimits.unloadPressureKpa],
  condition: ['percent', { min: 30, max: 120 }],
  curvePressure: ['pressure', checkLimits.curvePressureKpa],
  hoseBore: ['diameter', checkLimits.insideDiameterMm],
  hoseLength: ['length', checkLimits.lengthM],
  drop: ['pressure', { min: 0.1, max: 3500 }],
  dropFlow: ['volumeFlow', checkLimits.freeAirM3Min],
  roughness: ['diameter', checkLimits.roughnessMm],
  lossK: ['number', checkLimits.lossK],
  regulator: ['pressure', checkLimits.regulatorKpa],
  bore: ['bore', checkLimits.boreMm],
  coefficient: ['number', checkLimits.dischargeCoefficient],
  airFirst: ['volumeFlow', checkLimits.airTakenFirstM3Min],
  altitude: ['altitude', checkLimits.altitudeM],
  airTemperature: ['temperature', checkLimits.airTemperatureC],
  humidity: ['percent', checkLimits.relativeHumidityPct],
  target: ['pressure', checkLimits.targetNozzlePressureKpa],
  mediaRate: ['massFlow', { min: 1, max: 20000 }],
  bagMass: ['mass', { min: 1, max: 2000 }],
  fuel: ['fuelRate', { min: 0.1, max: 500 }],
  waterRate: ['waterRate', { min: 0.05, max: 200 }],
  tank: ['volume', { min: 1, max: 50000 }],
} as const satisfies Record<string, readonly [QuantityKind, Range]>

export type FieldName = keyof typeof fieldKinds

/** Reads one typed text. */
export function readField(name: FieldName, typed: TypedText, otherUnit?: OtherUnit) {
  const [kind, range] = fieldKinds[name]
  return parseQuantity(kind, typed.text, { system: typed.system, range, otherUnit: otherUnit?.(kind) })
}

interface Reading {
  name: FieldName
  text: string
  system: TypedText['system']
  otherUnit: OtherUnit | undefined
  read: ParseResult
}

/** What a field was last read as: while one bore is dragged, all the others are as they were. */
const lastReadings = new WeakMap<TypedText, Reading>()

function readFieldOnce(name: FieldName, typed: TypedText, otherUnit?: OtherUnit): ParseResult {
  const { text, system } = typed
  const last = lastReadings.get(typed)
  const isSame =
    last?.text === text && last.system === system && last.name === name && last.otherUnit === otherUnit
  if (last && isSame) return last.read
  const read = readField(name, typed, otherUnit)
  lastReadings.set(typed, { name, text, system, otherUnit, read })
  return read
}

/** The coefficient that loading and shape stand for. */
export function coefficientOf(outlet: Pick<OutletForm, 'loading' | 'shape'>): number {
  const loaded = DISCHARGE_COEFFICIENTS.find((row) => row.id === outlet.loading)?.value ?? 0.81
  return outlet.shape === 'straight' ? loaded * STRAIGHT_BORE_FACTOR.value : loaded
}

class FormReader {
  readonly problems: Record<string, FieldProblem> = {}
  readonly values: Record<string, number> = {}

  constructor(private readonly otherUnit: OtherUnit | undefined) {}

  /** NaN where the text is wrong, so that what depends on it is wrong too. */
  require(path: string, name: FieldName, typed: TypedText): number {
    const read = readFieldOnce(name, typed, this.otherUnit)
    if (!read.ok) {
      this.problems[path] = read
      return NaN
    }
    const value = name === 'bore' ? snapBoreMm(read.value) : read.value
    this.values[path] = value
    return value
  }

  /** A blank stands for its default. */
  optional(path: string, name: FieldName, typed: TypedText): number | undefined {
    return typed.text.trim() === '' ? undefined : this.require(path, name, typed)
  }

  fail(path: string, problem: FieldProblem) {
    this.problems[path] ??= problem
  }
}

interface LineConditions {
  inletKpaGauge: number
  ambientKpa: number
  temperatureK: number
  /** what a free m³ of the site is, dry and as warm as the line */
  volumeRatio: number
}

function readHose(
  reader: FormReader,
  path: string,
  name: string,
  hose: HoseForm,
  mediaFactor: number,
  conditions: LineConditions,
): CheckElement[] {
  if (!hose.isUsed) return []
  const insideDiameterMm = reader.require(`${path}.bore`, 'hoseBore', hose.bore)
  const dropKpa = reader.optional(`${path}.measuredDrop`, 'drop', hose.measuredDrop)
  const freeAirM3Min = reader.optional(`${path}.measuredFlow`, 'dropFlow', hose.measuredFlow)
  const roughnessMm = reader.optional(`${path}.roughness`, 'roughness', hose.roughness) ?? HOSE_ROUGHNESS_MM
  if (dropKpa !== undefined && freeAirM3Min === undefined) {
    reader.fail(`${path}.measuredFlow`, { ok: false, problem: 'empty' })
  }
  if (dropKpa !== undefined && freeAirM3Min !== undefined) {
    const { inletKpaGauge, ambientKpa, temperatureK, volumeRatio } = conditions
    const measured = lossKFromMeasured({
      dropKpa,
      freeAirM3Min: freeAirM3Min * volumeRatio,
      insideDiameterMm,
      inletKpaGauge,
      ambientKpa,
      temperatureK,
    })
    if (measured.ok) {
      if (measured.lossK <= checkLimits.lossK.max) return [{ name, insideDiameterMm, lossK: measured.lossK }]
      reader.fail(`${path}.measuredDrop`, { ok: false, problem: 'loss-too-large' })
    } else if (measured.problem === 'drop-too-large') {
      const detail = { largestKpa: measured.largestDropKpa }
      reader.fail(`${path}.measuredDrop`, { ok: false, problem: 'drop-too-large', detail })
    }
  }
  const lengthM = reader.require(`${path}.length`, 'hoseLength', hose.length)
  const element = hoseElement({ insideDiameterMm, lengthM, couplings: hose.couplings })
  return [{ name, ...element, roughnessMm, ...(mediaFactor === 1 ? {} : { mediaFactor }) }]
}

function readOutlet(
  reader: FormReader,
  form: CheckForm,
  index: number,
  conditions: LineConditions,
): CheckOutlet {
  const outlet = form.outlets[index]!
  const path = `outlets.${index}`
  const ending = form.outlets.length > 1 ? `-${index + 1}` : ''
  const carriesMedia = form.pot.isUsed && outlet.loading !== 'clean'
  const mediaFactor = carriesMedia ? MEDIA_FACTOR_AFTER_POT : 1
  const hasOwnPot = form.pot.isUsed && !(form.pot.isShared && form.outlets.length > 1)
  const line: CheckElement[] = [
    ...(hasOwnPot ? [readPot(reader, form, `pot${ending}`)] : []),
    ...readHose(reader, `${path}.hose`, `blast-hose${ending}`, outlet.hose, mediaFactor, conditions),
    ...readHose(reader, `${path}.whip`, `whip${ending}`, outlet.whip, mediaFactor, conditions),
  ]
  const newBoreMm = reader.require(`${path}.newBore`, 'bore', outlet.newBore)
  const boreMm = reader.optional(`${path}.boreNow`, 'bore', outlet.boreNow) ?? newBoreMm
  if (boreMm < newBoreMm - 0.0005) {
    reader.fail(`${path}.boreNow`, { ok: false, problem: 'bore-now-under-new' })
  }
  const regulatorKpa = reader.optional(`${path}.regulator`, 'regulator', outlet.regulator)
  const dischargeCoefficient =
    reader.optional(`${path}.coefficient`, 'coefficient', outlet.coefficient) ?? coefficientOf(outlet)
  return {
    line,
    ...(regulatorKpa === undefined ? {} : { regulatorKpa }),
    nozzle: { boreMm, newBoreMm, dischargeCoefficient },
  }
}

function readPot(reader: FormReader, form: CheckForm, name: string): CheckElement {
  return {
    name,
    insideDiameterMm: reader.require('pot.bore', 'hoseBore', form.pot.bore),
    lossK: reader.optional('pot.lossK', 'lossK', form.pot.lossK) ?? POT_DEFAULT.lossK,
  }
}

function readCompressor(reader: FormReader, form: CheckForm): CheckRequest['compressor'] {
  const { compressor } = form
  const setPressureKpa = reader.require('compressor.setPressure', 'setPressure', compressor.setPressure)
  const unloadPressureKpa =
    reader.optional('compressor.unload', 'unload', compressor.unload) ?? defaultUnloadKpa(setPressureKpa)
  if (unloadPressureKpa < setPressureKpa + minUnloadAboveSetKpa) {
    reader.fail('compressor.unload', { ok: false, problem: 'unload-too-near-set' })
  }
  const condition = reader.optional('compressor.condition', 'condition', compressor.condition)
  const curve = compressor.curve.map((point, i) => ({
    pressureKpa: reader.require(`compressor.curve.${i}.pressure`, 'curvePressure', point.pressure),
    freeAirM3Min: reader.require(`compressor.curve.${i}.freeAir`, 'freeAir', point.freeAir),
  }))
  curve.forEach((point, i) => {
    const before = curve[i - 1]
    if (!before) return
    if (point.pressureKpa <= before.pressureKpa) {
      reader.fail(`compressor.curve.${i}.pressure`, { ok: false, problem: 'curve-not-rising' })
    }
    if (point.freeAirM3Min > before.freeAirM3Min) {
      reader.fail(`compressor.curve.${i}.freeAir`, { ok: false, problem: 'curve-air-rising' })
    }
  })
  return {
    ...(curve.length > 0
      ? { curve }
      : { ratedFreeAirM3Min: reader.require('compressor.freeAir', 'freeAir', compressor.freeAir) }),
    setPressureKpa,
    unloadPressureKpa,
    ...(condition === undefined ? {} : { conditionFactor: condition / 100 }),
    lineTemperatureRiseK: LINE_TEMPERATURE_RISE_K[compressor.cooling],
    ...(compressor.engine === 'unknown' ? {} : { engine: compressor.engine }),
  }
}

/** Air taken first, in the order it is named: hoods, then tools. */
function readAirTakenFirst(reader: FormReader, form: CheckForm): CheckRequest['airTakenFirst'] {
  const draws: CheckRequest['airTakenFirst'] = []
  if (form.hoods.count > 0) {
    const each = reader.require('hoods.flowEach', 'airFirst', form.hoods.flowEach)
    for (let i = 0; i < form.hoods.count; i++) draws.push({ name: 'hood', freeAirM3Min: each })
  }
  const tools = reader.optional('tools.flow', 'airFirst', form.tools.flow)
  if (tools !== undefined) draws.push({ name: 'tools', freeAirM3Min: tools })
  return draws
}

/**
 * Reads a whole form into the request it asks.
 *
 * Inputs   the form as typed · a reader for units outside our own table, once it is loaded
 * Result   the request, or null with what is wrong beside each field; values of every field that could be read
 * Errors   none        Checked  tests/shared/form/readForm.test.ts
 */
export function readForm(form: CheckForm, otherUnit?: OtherUnit): ReadCheck {
  const reader = new FormReader(otherUnit)
  const altitudeM = reader.require('site.altitude', 'altitude', form.site.altitude)
  const airTemperatureC = reader.require('site.airTemperature', 'airTemperature', form.site.airTemperature)
  const relativeHumidityPct = reader.optional('site.humidity', 'humidity', form.site.humidity)
  const compressor = readCompressor(reader, form)
  const { pressurePa, temperatureK, vapourPressurePa } = resolveAmbient({
    altitudeM,
    airTemperatureK: airTemperatureC + 273.15,
    relativeHumidity: (relativeHumidityPct ?? 0) / 100,
  })
  const lineTemperatureK = temperatureK + (compressor.lineTemperatureRiseK ?? 0)
  const conditions: LineConditions = {
    inletKpaGauge: compressor.setPressureKpa,
    ambientKpa: pressurePa / 1000,
    temperatureK: lineTemperatureK,
    volumeRatio: ((1 - vapourPressurePa / pressurePa) * lineTemperatureK) / temperatureK,
  }
  const airLine = readHose(reader, 'airLine', 'air-line', form.airLine, 1, conditions)
  if (form.pot.isUsed && form.pot.isShared && form.outlets.length > 1)
    airLine.push(readPot(reader, form, 'pot'))
  const request: CheckRequest = {
    site: {
      altitudeM,
      airTemperatureC,
      ...(relativeHumidityPct === undefined ? {} : { relativeHumidityPct }),
    },
    compressor,
    airLine,
    outlets: form.outlets.map((_, index) => readOutlet(reader, form, index, conditions)),
    airTakenFirst: readAirTakenFirst(reader, form),
    targetNozzlePressureKpa: reader.require('target', 'target', form.target),
    bitSet: form.bitSet,
  }
  readHour(reader, form)
  const isComplete = Object.keys(reader.problems).every((path) => path.startsWith('hour.'))
  return { request: isComplete ? request : null, problems: reader.problems, values: reader.values }
}

function readHour(reader: FormReader, { hour }: CheckForm) {
  reader.optional('hour.mediaRate', 'mediaRate', hour.mediaRate)
  reader.optional('hour.bagMass', 'bagMass', hour.bagMass)
  reader.optional('hour.fullLoadFuel', 'fuel', hour.fullLoadFuel)
  reader.optional('hour.waterRate', 'waterRate', hour.waterRate)
  reader.optional('hour.tank', 'tank', hour.tank)
}
