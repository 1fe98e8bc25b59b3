import { HOOD_DEFAULT_FREE_AIR_M3_MIN } from '../catalogue/breathing.ts'
import type { CheckRequest } from '../contracts/check.ts'
import type { CompressorProfile } from '../contracts/compressors.ts'
import type { HoseProfile, NozzleProfile, OutletProfile, RigProfile } from '../contracts/rigs.ts'
import type { SiteProfile } from '../contracts/sites.ts'
import { toTypedText } from '../units/format.ts'
import { BORE_TOLERANCE_MM, baseUnit, MM_PER_INCH } from '../units/quantities.ts'
import type { UnitSystem } from '../units/quantities.ts'
import { createHose } from './checkForm.ts'
import type { CheckForm, CompressorForm, HoseForm, OutletForm, TypedText } from './checkForm.ts'
import { fieldKinds, readField, readForm } from './readForm.ts'
import type { FieldName, ReadCheck } from './readForm.ts'

/** What of a saved record the check's form says; names, owners and dates are beside it. */
export type RigParts = Omit<RigProfile, 'name' | 'compressorId' | 'siteId'>
export type CompressorParts = Omit<CompressorProfile, 'name' | 'ownership' | 'rentedFrom' | 'rentedUntil'>
export type SiteParts = Omit<SiteProfile, 'name' | 'timeZone'>

type Write = (field: FieldName, value: number | null) => TypedText

/** as many digits as anybody types */
const longestPlain = 12

/**
 * Texts a person reads, and a form reads back as the very same values. What was typed in the other system's units has
 * a short text only there: it is written there, and fields show it in these units.
 */
function writeFor(system: UnitSystem): Write {
  return (field, value) => {
    if (value === null) return { text: '', system }
    const [kind] = fieldKinds[field]
    const text = toTypedText(kind, value, system)
    if (text.length <= longestPlain) return { text, system }
    const other = system === 'us' ? 'metric' : 'us'
    const otherText = toTypedText(kind, value, other)
    return otherText.length < text.length ? { text: otherText, system: other } : { text, system }
  }
}

/** Texts for a reader that is in a hurry: a double in its base unit is read back as itself. */
const writePlain: Write = (field, value) => {
  const { symbol } = baseUnit(fieldKinds[field][0])
  return { text: value === null ? '' : `${value} ${symbol}`.trim(), system: 'metric' }
}

/** The percent that a hundredth of is this factor again, where a double allows it. */
function percentOf(factor: number): number {
  for (let digits = 1; digits <= 17; digits += 1) {
    const percent = Number((factor * 100).toPrecision(digits))
    if (percent / 100 === factor) return percent
  }
  return factor * 100
}

const numberOf = (newBoreMm: number): number | null => {
  const number = Math.round((newBoreMm / MM_PER_INCH) * 16)
  return Math.abs((number * MM_PER_INCH) / 16 - newBoreMm) <= BORE_TOLERANCE_MM ? number : null
}

function writeHose(write: Write, hose: HoseProfile | null, unused: HoseForm): HoseForm {
  if (hose === null) return { ...unused, isUsed: false }
  return {
    isUsed: true,
    bore: write('hoseBore', hose.insideDiameterMm),
    length: write('hoseLength', hose.lengthM),
    couplings: hose.couplings,
    measuredDrop: write('drop', hose.measured?.dropKpa ?? null),
    measuredFlow: write('dropFlow', hose.measured?.freeAirM3Min ?? null),
    roughness: write('roughness', hose.roughnessMm),
  }
}

function writeNewBore(write: Write, { numberSixteenths, newBoreMm }: NozzleProfile): TypedText {
  const written = write('bore', newBoreMm)
  return numberSixteenths === null ? written : { text: `No. ${numberSixteenths}`, system: written.system }
}

function writeOutlet(write: Write, { nozzle, ...outlet }: OutletProfile): OutletForm {
  return {
    regulator: write('regulator', outlet.regulatorKpa),
    hose: writeHose(write, outlet.hose, createHose('1 1/4 in', '50 ft', 2)),
    whip: writeHose(write, outlet.whip, createHose('1 in', '10 ft', 1)),
    newBore: writeNewBore(write, nozzle),
    boreNow: write('bore', nozzle.boreNowMm),
    loading: nozzle.loading,
    shape: nozzle.shape,
    coefficient: write('coefficient', nozzle.dischargeCoefficient),
  }
}

function writeCompressor(write: Write, compressor: CompressorParts | null): CompressorForm {
  const condition = compressor?.conditionFactor ?? null
  return {
    freeAir: write('freeAir', compressor?.ratedFreeAirM3Min ?? null),
    setPressure: write('setPressure', compressor?.setPressureKpa ?? null),
    cooling: compressor?.cooling ?? 'aftercooled',
    engine: compressor?.engine ?? 'unknown',
    unload: write('unload', compressor?.unloadPressureKpa ?? null),
    condition: write('condition', condition === null ? null : percentOf(condition)),
    curve: (compressor?.curve ?? []).map(({ pressureKpa, freeAirM3Min }) => ({
      pressure: write('curvePressure', pressureKpa),
      freeAir: write('freeAir', freeAirM3Min),
    })),
  }
}

function writeSite(write: Write, site: SiteParts | null): CheckForm['site'] {
  return {
    altitude: write('altitude', site?.altitudeM ?? null),
    airTemperature: write('airTemperature', site?.airTemperatureC ?? null),
    humidity: write('humidity', site?.relativeHumidityPct ?? null),
  }
}

function writeForm(
  write: Write,
  rig: RigParts,
  compressor: CompressorParts | null,
  site: SiteParts | null,
): CheckForm {
  const { hour, pot } = rig
  return {
    compressor: writeCompressor(write, compressor),
    airLine: writeHose(write, rig.airLine, createHose('1 1/2 in', '25 ft', 2)),
    pot: {
      isUsed: pot !== null,
      bore: pot ? write('hoseBore', pot.insideDiameterMm) : { text: '1 1/4 in', system: 'us' },
      lossK: write('lossK', pot?.lossK ?? null),
      isShared: pot?.isShared ?? true,
    },
    outlets: rig.outlets.map((outlet) => writeOutlet(write, outlet)),
    hoods: { count: rig.hoods.count, flowEach: write('airFirst', rig.hoods.freeAirEachM3Min) },
    tools: { flow: write('airFirst', rig.toolsFreeAirM3Min) },
    site: writeSite(write, site),
    target: write('target', rig.targetNozzlePressureKpa),
    bitSet: rig.bitSet,
    hour: {
      abrasive: hour.abrasive,
      mediaRate: write('mediaRate', hour.mediaRateKgPerH),
      bagMass: write('bagMass', hour.bagMassKg),
      fullLoadFuel: write('fuel', compressor?.fullLoadFuelLPerH ?? null),
      isWet: hour.isWet,
      waterRate: write('waterRate', hour.waterRateLPerMin),
      tank: write('tank', hour.tankL),
    },
  }
}

/**
 * A saved rig with a compressor and a site as the form they fill: read back, it asks the very same check.
 *
 * Inputs   the records' own units · null where none is chosen: its fields are blank then
 * Result   texts in the unit system; a whole nozzle number as `No. 6`
 * Errors   none        Checked  tests/shared/form/profiles.test.ts
 */
export function formOfRig(
  rig: RigParts,
  compressor: CompressorParts | null,
  site: SiteParts | null,
  system: UnitSystem,
): CheckForm {
  return writeForm(writeFor(system), rig, compressor, site)
}

/** The same form with another compressor's fields; its fuel goes with it. */
export function putCompressor(form: CheckForm, compressor: CompressorParts, system: UnitSystem): CheckForm {
  const write = writeFor(system)
  const fullLoadFuel = write('fuel', compressor.fullLoadFuelLPerH)
  return { ...form, compressor: writeCompressor(write, compressor), hour: { ...form.hour, fullLoadFuel } }
}

/** The same form at another site. */
export function putSite(form: CheckForm, site: SiteParts, system: UnitSystem): CheckForm {
  return { ...form, site: writeSite(writeFor(system), site) }
}

/** The check of a saved rig; null where no compressor or no site is chosen, or a record asks what cannot be. */
export function checkRequestOfRig(
  rig: RigParts,
  compressor: CompressorParts | null,
  site: SiteParts | null,
): CheckRequest | null {
  if (compressor === null || site === null) return null
  return readForm(writeForm(writePlain, rig, compressor, site)).request
}

/** What stands in a field that the check itself had no need to read. */
function readSpare(field: FieldName, typed: TypedText): number | null {
  const read = readField(field, typed)
  return read.ok ? read.value : null
}

function hoseProfile({ values }: ReadCheck, path: string, hose: HoseForm): HoseProfile | null {
  if (!hose.isUsed) return null
  const at = (field: string) => values[`${path}.${field}`]
  const dropKpa = at('measuredDrop')
  const freeAirM3Min = at('measuredFlow')
  const isMeasured = dropKpa !== undefined && freeAirM3Min !== undefined
  return {
    insideDiameterMm: at('bore')!,
    lengthM: at('length') ?? readSpare('hoseLength', hose.length),
    couplings: hose.couplings,
    measured: isMeasured ? { dropKpa, freeAirM3Min } : null,
    roughnessMm: at('roughness') ?? null,
  }
}

function outletProfile(read: ReadCheck, form: CheckForm, index: number): OutletProfile {
  const outlet = form.outlets[index]!
  const path = `outlets.${index}`
  const newBoreMm = read.values[`${path}.newBore`]!
  return {
    regulatorKpa: read.values[`${path}.regulator`] ?? null,
    hose: hoseProfile(read, `${path}.hose`, outlet.hose),
    whip: hoseProfile(read, `${path}.whip`, outlet.whip),
    nozzle: {
      numberSixteenths: numberOf(newBoreMm),
      newBoreMm,
      boreNowMm: read.values[`${path}.boreNow`] ?? null,
      shape: outlet.shape,
      loading: outlet.loading,
      dischargeCoefficient: read.values[`${path}.coefficient`] ?? null,
    },
  }
}

/** What a compressor's fields say; the values have been read without a problem. */
export function readCompressorParts(
  { compressor, hour }: Pick<CheckForm, 'compressor' | 'hour'>,
  values: Record<string, number>,
): CompressorParts {
  const curve = compressor.curve.map((_, i) => ({
    pressureKpa: values[`compressor.curve.${i}.pressure`]!,
    freeAirM3Min: values[`compressor.curve.${i}.freeAir`]!,
  }))
  const condition = values['compressor.condition']
  return {
    // beside a curve the plate is only a word on the list
    ratedFreeAirM3Min:
      values['compressor.freeAir'] ??
      readSpare('freeAir', compressor.freeAir) ??
      curve[0]?.freeAirM3Min ??
      NaN,
    curve,
    setPressureKpa: values['compressor.setPressure']!,
    unloadPressureKpa: values['compressor.unload'] ?? null,
    cooling: compressor.cooling,
    engine: compressor.engine === 'unknown' ? null : compressor.engine,
    conditionFactor: condition === undefined ? null : condition / 100,
    fullLoadFuelLPerH: values['hour.fullLoadFuel'] ?? readSpare('fuel', hour.fullLoadFuel),
  }
}

/** What a site's fields say. */
export function readSiteParts(values: Record<string, number>): SiteParts {
  return {
    altitudeM: values['site.altitude']!,
    airTemperatureC: values['site.airTemperature']!,
    relativeHumidityPct: values['site.humidity'] ?? null,
  }
}

/** What of the form is the rig's own; the values have been read without a problem. */
export function readRigParts(form: CheckForm, read: ReadCheck): RigParts {
  const { values } = read
  const { pot, hour } = form
  const flowEach = values['hoods.flowEach'] ?? readSpare('airFirst', form.hoods.flowEach)
  return {
    airLine: hoseProfile(read, 'airLine', form.airLine),
    pot: pot.isUsed
      ? {
          insideDiameterMm: values['pot.bore']!,
          lossK: values['pot.lossK'] ?? null,
          isShared: pot.isShared,
        }
      : null,
    outlets: form.outlets.map((_, index) => outletProfile(read, form, index)),
    hoods: { count: form.hoods.count, freeAirEachM3Min: flowEach ?? HOOD_DEFAULT_FREE_AIR_M3_MIN },
    toolsFreeAirM3Min: values['tools.flow'] ?? null,
    targetNozzlePressureKpa: values.target!,
    bitSet: form.bitSet,
    hour: {
      abrasive: hour.abrasive,
      mediaRateKgPerH: values['hour.mediaRate'] ?? null,
      bagMassKg: values['hour.bagMass'] ?? null,
      isWet: hour.isWet,
      waterRateLPerMin: values['hour.waterRate'] ?? null,
      tankL: values['hour.tank'] ?? null,
    },
  }
}

/**
 * The records that a form fills.
 *
 * Inputs   the form and what was read of it
 * Result   the three parts, null where a field is blank; null while any field has a problem
 * Errors   none        Checked  tests/shared/form/profiles.test.ts
 */
export function readRig(
  form: CheckForm,
  read: ReadCheck,
): { rig: RigParts; compressor: CompressorParts; site: SiteParts } | null {
  if (read.request === null || Object.keys(read.problems).length > 0) return null
  return {
    rig: readRigParts(form, read),
    compressor: readCompressorParts(form, read.values),
    site: readSiteParts(read.values),
  }
}
