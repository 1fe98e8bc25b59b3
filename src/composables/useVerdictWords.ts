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

  /** Rounded as gauges are read; more digits where rounding would hide that it is under the target. */
  const headline = computed(() => {
    const pressureKpa = lowestKpa.value
    if (pressureKpa === null) return null
    const { answer, request } = check()
    let digits = system.value === 'us' ? 0 : 1
    const shown = (kpa: number) => parts('pressure', kpa, digits)
    const hidesSide = () => shown(pressureKpa).number === shown(request.targetNozzlePressureKpa).number
    if (answer.verdict === 'falls-short') for (; digits < 4 && hidesSide(); digits++);
    return shown(pressureKpa)
  })

  const margin = computed(() => {
    const { answer, request } = check()
    if (!answer.atTarget) return null
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

  return { headline, margin }
}
