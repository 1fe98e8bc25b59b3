import { computed } from 'vue'
import { listAirUseRows, tabulateAirUse } from '#shared/airflow/airUse.ts'
import type { AirUseCell } from '#shared/airflow/airUse.ts'
import { prepareRig } from '#shared/airflow/preparedRig.ts'
import type { Verdict } from '#shared/contracts/check.ts'
import { formatBoreFraction } from '#shared/units/format.ts'
import { KPA_PER_PSI } from '#shared/units/quantities.ts'
import type { UnitSystem } from '#shared/units/quantities.ts'
import type { AnsweredCheck } from '../../composables/usePressureCheck.ts'
import { useWords } from '../../composables/useWords.ts'
import { percentDigits } from './percentDigits.ts'

export interface ShownCell {
  key: string
  /** with its unit, as the head of its column says it */
  pressure: string
  verdict: Verdict
  number: string
  label: string
  cell: AirUseCell
}

export interface ShownRow {
  key: string
  name: string
  size: string
  isNow: boolean
  /** as a sentence calls it */
  nozzle: string
  cells: ShownCell[]
}

const outletIndex = 0
const perMinute = 60
const columns = {
  us: [60, 70, 80, 90, 100, 110, 120].map((psi) => psi * KPA_PER_PSI),
  metric: [4, 4.5, 5, 5.5, 6, 6.5, 7, 7.5, 8, 8.5].map((bar) => bar * 100),
}

/** a target as near as this to a usual pressure, of it, takes its place: both would be read as the same */
const nearShare = 0.02
const sameShare = 1e-6

/** The usual pressures, kPa gauge; a target that is none of them takes the place of one near it, else of the farthest. */
export function airUsePressures(system: UnitSystem, targetKpa: number): number[] {
  const usual = columns[system]
  const gaps = usual.map((kpa) => Math.abs(kpa - targetKpa))
  const least = Math.min(...gaps)
  if (least <= sameShare * targetKpa) return usual
  const left = gaps.indexOf(least <= nearShare * targetKpa ? least : Math.max(...gaps))
  return [...usual.filter((_, index) => index !== left), targetKpa].sort((a, b) => a - b)
}

/** The air use table of a check in the person's units, and the sentence of each cell. */
export function useAirUse(check: () => AnsweredCheck) {
  const { t, quantity, parts, system, reasonSentence } = useWords()

  const pressures = computed(() => {
    const target = check().request.targetNozzlePressureKpa
    return airUsePressures(system.value, target).map((kpa) => ({
      kpa,
      text: parts('pressure', kpa).number,
      withUnit: quantity('pressure', kpa),
      isTarget: Math.abs(kpa - target) <= sameShare * target,
    }))
  })
  const units = computed(() => ({ pressure: parts('pressure', 0).unit, air: parts('volumeFlow', 0).unit }))

  const rows = computed<ShownRow[]>(() => {
    const { question, request } = check()
    const prepared = prepareRig(question.rig, question.site)
    const boreNowMm = request.outlets[outletIndex]!.nozzle.boreMm
    const list = listAirUseRows(boreNowMm / 1000)
    const cells = tabulateAirUse(
      prepared,
      outletIndex,
      list.map(({ boreM }) => boreM),
      pressures.value.map(({ kpa }) => kpa * 1000),
    )
    return list.map((row, at) => {
      const size =
        (system.value === 'us' ? formatBoreFraction(row.boreM * 1000) : null) ??
        parts('bore', row.boreM * 1000).number
      const bore = quantity('bore', row.boreM * 1000)
      const nozzle = row.number === null ? t('results.airUse.nowNozzle', { bore }) : `No. ${row.number}`
      return {
        key: row.number === null ? 'now' : String(row.number),
        name: row.number === null ? t('results.airUse.now') : `No. ${row.number}`,
        size,
        isNow: row.isNow,
        nozzle,
        cells: cells[at]!.map((cell, column) =>
          showCell(nozzle, pressures.value[column]!.withUnit, `${row.number ?? 'now'}-${column}`, cell),
        ),
      }
    })
  })

  function showCell(nozzle: string, pressure: string, key: string, cell: AirUseCell): ShownCell {
    const { requiredFreeAirM3S } = cell
    const { verdict } = cell.check
    const hasFigure = requiredFreeAirM3S !== null
    const air = hasFigure ? quantity('volumeFlow', requiredFreeAirM3S * perMinute) : t('results.airUse.none')
    return {
      key,
      pressure,
      verdict,
      number: hasFigure ? parts('volumeFlow', requiredFreeAirM3S * perMinute).number : '–',
      label: t('results.airUse.cell', {
        nozzle,
        pressure,
        air,
        verdict: t(`verdicts.${verdict}`),
      }),
      cell,
    }
  }

  /** Why a cell holds or not, in one sentence. */
  function sentenceOf(nozzle: string, { cell, verdict, pressure }: ShownCell): string {
    const { question } = check()
    const { atTarget, reason } = cell.check
    if (verdict === 'cannot-run' || !atTarget) {
      const key = verdict === 'cannot-run' ? 'cannot' : 'other'
      return t(`results.airUse.${key}`, { nozzle, pressure, reason: reason ? reasonSentence(reason) : '' })
    }
    const gaugeText = (absolutePa: number) => quantity('pressure', (absolutePa - question.ambientPa) / 1000)
    const { dryAirDensity } = prepareRig(question.rig, question.site).ambient
    const airText = (massFlow: number) => quantity('volumeFlow', (massFlow / dryAirDensity) * perMinute)
    const figures = {
      nozzle,
      pressure,
      needed: airText(atTarget.requiredMassFlow),
      delivered: airText(atTarget.deliveredMassFlow),
      compressor: gaugeText(atTarget.requiredCompressorPressurePa),
      unload: gaugeText(question.rig.compressor.unloadPressurePa),
      margin: quantity('percent', atTarget.airMargin * 100, percentDigits(atTarget.airMargin * 100)),
    }
    if (verdict === 'holds') return t('results.airUse.holds', figures)
    if (verdict === 'barely-holds') return t('results.airUse.barely', figures)
    if (reason === 'above-unload') return t('results.airUse.unload', figures)
    return t('results.airUse.short', figures)
  }

  return { pressures, units, rows, sentenceOf }
}
