import { deratingFromM } from '#shared/airflow/cautions.ts'
import { computed } from 'vue'
import { HOOD_AIR, HOOD_DEFAULT_FREE_AIR_M3_MIN } from '#shared/catalogue/breathing.ts'
import {
  COMPRESSOR_CLASSES,
  COMPRESSOR_CLASS_SOURCE,
  FULL_LOAD_FUEL_SOURCE,
  LINE_TEMPERATURE_RISE_K,
  LINE_TEMPERATURE_RISE_SOURCE,
  SET_PRESSURES,
  UNLOAD_SOURCE,
  defaultUnloadKpa,
  fullLoadFuelLPerH,
} from '#shared/catalogue/compressorClasses.ts'
import { BIT_SET_SOURCES } from '#shared/catalogue/drillBits.ts'
import {
  HOSE_ROUGHNESS_MM,
  LINE_SOURCE,
  LOSS_K_PER_COUPLING,
  MEDIA_FACTOR_AFTER_POT,
  POT_DEFAULT,
} from '#shared/catalogue/hoses.ts'
import {
  ABRASIVES,
  ABRASIVE_SOURCE,
  BAG_MASS_KG,
  DISCHARGE_COEFFICIENTS,
  SAND_FLOW_SOURCE,
  STRAIGHT_BORE_FACTOR,
  WET_BLAST,
  mediaFlowKgPerH,
} from '#shared/catalogue/media.ts'
import { NOZZLE_NUMBER_SOURCE, boreMmOfNumber } from '#shared/catalogue/nozzleNumbers.ts'
import type { SourceStatus } from '#shared/catalogue/source.ts'
import type { MediaLoading } from '#shared/form/checkForm.ts'
import { fuelAtLoad } from '#shared/economics/hourUse.ts'
import { KPA_PER_PSI } from '#shared/units/quantities.ts'
import { useWords } from '../../composables/useWords.ts'
import { useSourceStatus } from './useSourceStatus.ts'

interface DefaultRow {
  key: string
  what: string
  value: string
  status: SourceStatus
  /** what it was taken from, where there is more to say than the status */
  basis?: string
}

const exampleFreeAirM3Min = COMPRESSOR_CLASSES.find(({ ratedCfm }) => ratedCfm === 375)!.ratedFreeAirM3Min
const exampleKpa = 100 * KPA_PER_PSI
const crushedGlass = ABRASIVES.find(({ id }) => id === 'crushed-glass')!.bulkDensityKgM3
const silicaSand = ABRASIVES.find(({ id }) => id === 'silica-sand')!.bulkDensityKgM3
const deratingM = { step: 100, ...deratingFromM }

const coolingKeys = {
  aftercooled: 'pages.sources.defaults.rows.aftercooled',
  bare: 'pages.sources.defaults.rows.bare',
} as const
const loadingKeys = {
  clean: 'fields.nozzle.loadings.clean',
  lean: 'fields.nozzle.loadings.lean',
  normal: 'fields.nozzle.loadings.normal',
  'heavy-or-wet': 'fields.nozzle.loadings.heavy-or-wet',
} as const satisfies Record<MediaLoading, string>

const basisKeys = {
  clean: 'pages.sources.defaults.basis.clean',
  lean: 'pages.sources.defaults.basis.coefficient',
  normal: 'pages.sources.defaults.basis.normal',
  'heavy-or-wet': 'pages.sources.defaults.basis.coefficient',
} as const satisfies Record<MediaLoading, string>

/** Every default of the screens with its value in the person's units and where it comes from. */
export function useDefaultRows() {
  const { t, quantity, system } = useWords()
  const statusWord = useSourceStatus()

  function airRows(): DefaultRow[] {
    const flows = COMPRESSOR_CLASSES.map(({ ratedFreeAirM3Min }) => ratedFreeAirM3Min)
    const [low = '', middle = '', high = ''] = SET_PRESSURES.map(({ kpa }) => quantity('pressure', kpa))
    const hood = HOOD_AIR[0]!
    const { step, natural, turbo } = deratingM
    return [
      {
        key: 'classes',
        what: t('pages.sources.defaults.rows.classes'),
        value: t('pages.sources.defaults.values.classes', {
          least: quantity('volumeFlow', Math.min(...flows)),
          most: quantity('volumeFlow', Math.max(...flows)),
          low,
          middle,
          high,
        }),
        status: COMPRESSOR_CLASS_SOURCE.status,
      },
      {
        key: 'unload',
        what: t('pages.sources.defaults.rows.unload'),
        value: quantity('pressure', defaultUnloadKpa(0)),
        status: UNLOAD_SOURCE.status,
      },
      ...(['aftercooled', 'bare'] as const).map((cooling) => ({
        key: cooling,
        what: t(coolingKeys[cooling]),
        value: quantity('temperatureDifference', LINE_TEMPERATURE_RISE_K[cooling]),
        status: LINE_TEMPERATURE_RISE_SOURCE.status,
      })),
      {
        key: 'engine',
        what: t('pages.sources.defaults.rows.engine'),
        value: t('pages.sources.defaults.values.engine', {
          step: quantity('altitude', step),
          natural: quantity('altitude', natural),
          turbo: quantity('altitude', turbo),
        }),
        status: 'published',
        basis: t('pages.sources.defaults.basis.engine'),
      },
      {
        key: 'hood',
        what: t('pages.sources.defaults.rows.hood'),
        value: t('pages.sources.defaults.values.hood', {
          least: quantity('volumeFlow', hood.leastFreeAirM3Min),
          most: quantity('volumeFlow', HOOD_DEFAULT_FREE_AIR_M3_MIN),
        }),
        status: hood.status,
        basis: '42 CFR 84 Subpart J, Table 8',
      },
    ]
  }

  function lineRows(): DefaultRow[] {
    const { status } = LINE_SOURCE
    const roughness = quantity('diameter', HOSE_ROUGHNESS_MM, system.value === 'us' ? 4 : 2)
    const piping = quantity('diameter', POT_DEFAULT.insideDiameterMm)
    return [
      {
        key: 'coupling',
        what: t('pages.sources.defaults.rows.coupling'),
        value: `K ${LOSS_K_PER_COUPLING}`,
        status,
      },
      {
        key: 'pot',
        what: t('pages.sources.defaults.rows.pot', { bore: piping }),
        value: `K ${POT_DEFAULT.lossK}`,
        status,
      },
      {
        key: 'mediaFactor',
        what: t('pages.sources.defaults.rows.mediaFactor'),
        value: `× ${MEDIA_FACTOR_AFTER_POT}`,
        status,
      },
      { key: 'roughness', what: t('pages.sources.defaults.rows.roughness'), value: roughness, status },
    ]
  }

  function nozzleRows(): DefaultRow[] {
    return [
      {
        key: 'nozzleNumber',
        what: t('pages.sources.defaults.rows.nozzleNumber'),
        value: `No. 6 = ${quantity('bore', boreMmOfNumber(6))}`,
        status: NOZZLE_NUMBER_SOURCE.status,
      },
      ...DISCHARGE_COEFFICIENTS.map((row) => ({
        key: row.id,
        what: t('pages.sources.defaults.rows.coefficient', { loading: t(loadingKeys[row.id]) }),
        value: row.value.toFixed(2),
        status: row.status,
        basis: t(basisKeys[row.id]),
      })),
      {
        key: 'straight',
        what: t('pages.sources.defaults.rows.straight'),
        value: `× ${STRAIGHT_BORE_FACTOR.value}`,
        status: STRAIGHT_BORE_FACTOR.status,
        basis: t('pages.sources.defaults.basis.straight'),
      },
      {
        key: 'bits',
        what: t('pages.sources.defaults.rows.bits'),
        value: '#12–Z',
        status: BIT_SET_SOURCES['number-letter'].status,
        basis: t('pages.sources.defaults.basis.bits'),
      },
    ]
  }

  function hourRows(): DefaultRow[] {
    const sand = {
      boreMm: boreMmOfNumber(6),
      nozzleKpaGauge: exampleKpa,
      bulkDensityKgM3: silicaSand.middle,
    }
    const pressure = quantity('pressure', exampleKpa)
    return [
      {
        key: 'fuel',
        what: t('pages.sources.defaults.rows.fuel', {
          air: quantity('volumeFlow', exampleFreeAirM3Min),
          pressure,
        }),
        value: quantity('fuelRate', fullLoadFuelLPerH(exampleFreeAirM3Min, exampleKpa)),
        status: FULL_LOAD_FUEL_SOURCE.status,
        basis: t('pages.sources.defaults.basis.fuel'),
      },
      {
        key: 'idle',
        what: t('pages.sources.defaults.rows.idle'),
        value: quantity('percent', fuelAtLoad(100, 0)),
        status: 'common practice, no source',
      },
      {
        key: 'media',
        what: t('pages.sources.defaults.rows.media', { pressure }),
        value: quantity('massFlow', mediaFlowKgPerH(sand)),
        status: SAND_FLOW_SOURCE.status,
        basis: t('pages.sources.defaults.basis.media'),
      },
      {
        key: 'density',
        what: t('pages.sources.defaults.rows.density'),
        value: t('pages.sources.defaults.values.range', {
          least: quantity('density', crushedGlass.low),
          most: quantity('density', crushedGlass.high),
        }),
        status: ABRASIVE_SOURCE.status,
        basis: t('pages.sources.defaults.basis.density'),
      },
      {
        key: 'bag',
        what: t('pages.sources.defaults.rows.bag'),
        value: quantity('mass', BAG_MASS_KG[system.value]),
        status: 'common practice, no source',
      },
      {
        key: 'water',
        what: t('pages.sources.defaults.rows.water'),
        value: quantity('waterRate', WET_BLAST.waterLPerMin),
        status: WET_BLAST.status,
      },
      {
        key: 'tank',
        what: t('pages.sources.defaults.rows.tank'),
        value: quantity('volume', WET_BLAST.tankL),
        status: WET_BLAST.status,
      },
    ]
  }

  return computed(() =>
    [...airRows(), ...lineRows(), ...nozzleRows(), ...hourRows()].map((row) => ({
      key: row.key,
      cells: [
        row.what,
        row.value,
        row.basis === undefined ? statusWord(row.status) : `${statusWord(row.status)}: ${row.basis}`,
      ],
    })),
  )
}
