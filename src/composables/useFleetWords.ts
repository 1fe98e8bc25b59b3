import type { CompressorProfile } from '#shared/contracts/compressors.ts'
import type { Fleet, HoseProfile, NozzleProfile, PotProfile } from '#shared/contracts/rigs.ts'
import type { SiteProfile } from '#shared/contracts/sites.ts'
import type { BitSetName } from '#shared/contracts/check.ts'
import type { QuantityKind } from '#shared/units/quantities.ts'
import { useFieldWords } from './useFieldWords.ts'
import { useWords } from './useWords.ts'
import { usePreferencesStore } from '../stores/preferences.ts'

/** What each measured field of a record is, by its name there. */
const kinds: Record<string, QuantityKind> = {
  ratedFreeAirM3Min: 'volumeFlow',
  setPressureKpa: 'pressure',
  unloadPressureKpa: 'pressure',
  fullLoadFuelLPerH: 'fuelRate',
  altitudeM: 'altitude',
  airTemperatureC: 'temperature',
  relativeHumidityPct: 'percent',
  regulatorKpa: 'pressure',
  boreNowMm: 'bore',
  newBoreMm: 'bore',
  dischargeCoefficient: 'number',
  toolsFreeAirM3Min: 'volumeFlow',
  targetNozzlePressureKpa: 'pressure',
  mediaRateKgPerH: 'massFlow',
  bagMassKg: 'mass',
  waterRateLPerMin: 'waterRate',
  tankL: 'volume',
}

/** Parts of a record in the trade's words, and the names of its fields. */
export function useFleetWords() {
  const { t, quantity } = useWords()
  const { typedValue } = useFieldWords()
  const preferences = usePreferencesStore()

  function hoseText(hose: HoseProfile | null): string {
    if (hose === null) return t('fields.hose.none')
    const bore = typedValue('diameter', hose.insideDiameterMm)
    if (hose.measured) {
      const drop = typedValue('pressure', hose.measured.dropKpa)
      const flow = typedValue('volumeFlow', hose.measured.freeAirM3Min)
      return t('fields.hose.summaryMeasured', { bore, drop, flow })
    }
    const length = typedValue('length', hose.lengthM ?? NaN)
    return t('fields.hose.summary', { bore, length, count: hose.couplings }, hose.couplings)
  }

  const potText = (pot: PotProfile | null) =>
    pot
      ? t('fields.pot.summary', { bore: typedValue('diameter', pot.insideDiameterMm) })
      : t('fields.pot.none')

  const newBoreText = ({ numberSixteenths, newBoreMm }: NozzleProfile) =>
    numberSixteenths === null ? typedValue('bore', newBoreMm) : `No. ${numberSixteenths}`

  function nozzleText(nozzle: NozzleProfile): string {
    const bore = newBoreText(nozzle)
    return nozzle.boreNowMm === null
      ? t('kit.rigs.nozzleNew', { bore })
      : t('kit.rigs.nozzleWorn', { bore, now: typedValue('bore', nozzle.boreNowMm) })
  }

  const coolingText = (value: CompressorProfile['cooling']) => t(`fields.compressor.coolings.${value}`)

  function compressorText(compressor: CompressorProfile): string {
    const cooling = coolingText(compressor.cooling)
    const pressure = typedValue('pressure', compressor.setPressureKpa)
    if (compressor.curve.length > 0) return t('fields.compressor.summaryCurve', { pressure, cooling })
    const air = typedValue('volumeFlow', compressor.ratedFreeAirM3Min)
    return t('fields.compressor.summary', { air, pressure, cooling })
  }

  function siteText(site: Omit<SiteProfile, 'name' | 'timeZone'>): string {
    const figures = [quantity('altitude', site.altitudeM), quantity('temperature', site.airTemperatureC)]
    if (site.relativeHumidityPct !== null) figures.push(quantity('percent', site.relativeHumidityPct))
    return figures.join(', ')
  }

  const hoodsText = ({ count, freeAirEachM3Min }: { count: number; freeAirEachM3Min: number }) =>
    count === 0
      ? t('fields.air.none')
      : t('fields.air.summary', { count, each: typedValue('volumeFlow', freeAirEachM3Min) })

  const bitSetText = (set: BitSetName) => t(`bits.sets.${set.replace('.', '_')}`)

  function timeText(at: string): string {
    const date = new Date(at)
    const isToday = date.toDateString() === new Date().toDateString()
    const style = isToday
      ? ({ timeStyle: 'short' } as const)
      : ({ dateStyle: 'medium', timeStyle: 'short' } as const)
    return new Intl.DateTimeFormat(preferences.language, style).format(date)
  }

  /** The day itself, whatever the time zone of the device. */
  const dateText = (localDate: string) =>
    new Intl.DateTimeFormat(preferences.language, { dateStyle: 'medium', timeZone: 'UTC' }).format(
      new Date(`${localDate}T00:00:00Z`),
    )

  function nozzleNumberOf(path: string): string {
    const index = /^outlets\.(\d+)/.exec(path)?.[1]
    return index === undefined ? '' : String(Number(index) + 1)
  }

  const labels: Record<string, () => string> = {
    name: () => t('kit.name'),
    compressorId: () => t('kit.rigs.usualCompressor'),
    siteId: () => t('kit.rigs.usualSite'),
    airLine: () => t('fields.hose.airLine'),
    pot: () => t('fields.pot.title'),
    outlets: () => t('kit.rigs.nozzles'),
    hose: () => t('fields.hose.blastHose'),
    whip: () => t('fields.hose.whip'),
    newBoreMm: () => t('fields.nozzle.newBore'),
    boreNowMm: () => t('fields.nozzle.boreNow'),
    shape: () => t('fields.nozzle.shape'),
    loading: () => t('fields.nozzle.loading'),
    dischargeCoefficient: () => t('fields.nozzle.coefficient'),
    regulatorKpa: () => t('fields.nozzle.regulator'),
    hoods: () => t('fields.air.hoods'),
    toolsFreeAirM3Min: () => t('fields.air.tools'),
    targetNozzlePressureKpa: () => t('fields.target'),
    bitSet: () => t('bits.set'),
    abrasive: () => t('results.hour.abrasive'),
    mediaRateKgPerH: () => t('results.hour.mediaRate'),
    bagMassKg: () => t('results.hour.bagMass'),
    isWet: () => t('results.hour.wet'),
    waterRateLPerMin: () => t('results.hour.waterRate'),
    tankL: () => t('results.hour.tank'),
    ratedFreeAirM3Min: () => t('fields.compressor.freeAir'),
    curve: () => t('fields.compressor.curve'),
    setPressureKpa: () => t('fields.compressor.setPressure'),
    unloadPressureKpa: () => t('fields.compressor.unload'),
    cooling: () => t('fields.compressor.cooling'),
    engine: () => t('fields.compressor.engine'),
    conditionFactor: () => t('fields.compressor.condition'),
    fullLoadFuelLPerH: () => t('results.hour.fullLoadFuel'),
    ownership: () => t('kit.compressors.ownership'),
    rentedFrom: () => t('kit.compressors.rentedFrom'),
    rentedUntil: () => t('kit.compressors.rentedUntil'),
    altitudeM: () => t('fields.site.altitude'),
    airTemperatureC: () => t('fields.site.airTemperature'),
    relativeHumidityPct: () => t('fields.site.humidity'),
    timeZone: () => t('kit.sites.timeZone'),
  }

  /** The name of a field by its place: of two nozzles `outlets.1.nozzle.boreNowMm` is "Bore now 2". */
  function fieldLabel(path: string, outletCount = 1): string {
    const keys = path.split('.')
    const known = keys.findLast((key) => key in labels)
    const number = nozzleNumberOf(path)
    return [known ? labels[known]!() : path, known === 'outlets' || outletCount < 2 ? '' : number]
      .join(' ')
      .trim()
  }

  const choices: Record<string, (value: never) => string> = {
    airLine: hoseText,
    hose: hoseText,
    whip: hoseText,
    pot: potText,
    hoods: hoodsText,
    bitSet: bitSetText,
    outlets: (outlets: { nozzle: NozzleProfile }[]) =>
      outlets.map(({ nozzle }) => nozzleText(nozzle)).join('; '),
    shape: (value: NozzleProfile['shape']) => t(`fields.nozzle.shapes.${value}`),
    loading: (value: NozzleProfile['loading']) => t(`fields.nozzle.loadings.${value}`),
    cooling: coolingText,
    engine: (engine: CompressorProfile['engine']) => {
      const value = engine ?? 'unknown'
      return t(`fields.compressor.engines.${value}`)
    },
    abrasive: (id: string) => {
      const abrasive = { id }
      return t(`results.hour.abrasives.${abrasive.id}`)
    },
    isWet: (value: boolean) => t(value ? 'kit.yes' : 'kit.no'),
    ownership: (value: CompressorProfile['ownership']) =>
      t(value === 'rented' ? 'kit.compressors.rented' : 'kit.compressors.owned'),
    conditionFactor: (value: number | null) =>
      value === null ? t('fields.compressor.conditionDefault') : quantity('percent', value * 100),
    curve: (curve: CompressorProfile['curve']) =>
      curve.length === 0
        ? t('kit.none')
        : curve
            .map(
              ({ pressureKpa, freeAirM3Min }) =>
                `${typedValue('volumeFlow', freeAirM3Min)} · ${typedValue('pressure', pressureKpa)}`,
            )
            .join('; '),
    rentedFrom: (value: string | null) => (value === null ? t('kit.none') : dateText(value)),
    rentedUntil: (value: string | null) => (value === null ? t('kit.none') : dateText(value)),
    boreNowMm: (value: number | null) =>
      value === null ? t('fields.nozzle.asNew') : typedValue('bore', value),
  }

  /** A field's value in words. */
  function valueText(path: string, value: unknown, fleet?: Fleet): string {
    const key = path.split('.').at(-1) ?? ''
    if (key === 'compressorId' || key === 'siteId') {
      const records = key === 'siteId' ? fleet?.sites : fleet?.compressors
      return records?.find(({ id }) => id === value)?.name ?? t('kit.none')
    }
    const choice = choices[key]
    if (choice) return choice(value as never)
    if (value === null) return t('kit.none')
    const kind = kinds[key]
    return kind && typeof value === 'number' ? typedValue(kind, value) : String(value)
  }

  return {
    hoseText,
    potText,
    nozzleText,
    newBoreText,
    compressorText,
    siteText,
    hoodsText,
    bitSetText,
    timeText,
    dateText,
    fieldLabel,
    valueText,
  }
}
