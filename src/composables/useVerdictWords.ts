import { computed } from 'vue'
import { useWords } from './useWords.ts'
import type { AnsweredCheck } from './usePressureCheck.ts'

/** Whole percents, tenths below 10; never minus zero. */
function formatPercent(percent: number): string {
  const digits = Math.abs(percent) < 9.95 ? 1 : 0
  const text = Math.abs(percent).toFixed(digits)
  return `${percent < 0 && Number(text) !== 0 ? '−' : ''}${text}\u00a0%`
}

/** The hero's number and the sentence of the air margin. */
export function useVerdictWords(check: () => AnsweredCheck) {
  const { t, quantity, parts, system } = useWords()

  const lowestKpa = computed(() => {
    const outlets = check().answer.operatingPoint?.outlets
    return outlets ? Math.min(...outlets.map((outlet) => outlet.nozzlePressureKpa)) : null
  })

  /** Rounded as gauges are read; more digits where rounding would hide on which side of the target it is. */
  const digits = computed(() => {
    const usual = system.value === 'us' ? 0 : 1
    const pressureKpa = lowestKpa.value
    const { answer, request } = check()
    if (pressureKpa === null || answer.verdict !== 'falls-short') return usual
    const number = (kpa: number, count: number) =>
      Number(parts('pressure', kpa, count).number.replace(/,/g, ''))
    const hidesSide = (count: number) =>
      number(pressureKpa, count) >= number(request.targetNozzlePressureKpa, count)
    let count = usual
    while (count < 4 && hidesSide(count)) count++
    return count
  })
  const headline = computed(() =>
    lowestKpa.value === null ? null : parts('pressure', lowestKpa.value, digits.value),
  )
  const target = computed(() => quantity('pressure', check().request.targetNozzlePressureKpa, digits.value))

  const margin = computed(() => {
    const { answer, request } = check()
    // over unload nothing is delivered: a share of nothing says less than the reason does
    if (!answer.atTarget || answer.reason === 'above-unload') return null
    const { airMarginPct, requiredFreeAirM3Min, deliveredFreeAirM3Min } = answer.atTarget
    const share = formatPercent(airMarginPct)
    const key = request.airTakenFirst.length > 0 ? 'check.needsFirst' : 'check.needs'
    return {
      share: t('check.margin', { margin: share }),
      needs: t(key, {
        needed: quantity('volumeFlow', requiredFreeAirM3Min),
        delivered: quantity('volumeFlow', deliveredFreeAirM3Min),
        pressure: quantity('pressure', answer.atTarget.requiredCompressorPressureKpa),
      }),
    }
  })

  return { headline, target, margin }
}
