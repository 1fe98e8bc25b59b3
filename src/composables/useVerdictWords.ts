import { computed } from 'vue'
import { useWords } from './useWords.ts'
import type { AnsweredCheck } from './usePressureCheck.ts'

/** The hero's number and the sentence of the air margin. */
export function useVerdictWords(check: () => AnsweredCheck) {
  const { t, quantity, parts, system } = useWords()

  const lowestKpa = computed(() => {
    const outlets = check().answer.operatingPoint?.outlets
    return outlets ? Math.min(...outlets.map((outlet) => outlet.nozzlePressureKpa)) : null
  })

  /** Rounded as gauges are read; one digit more where rounding would hide which side of the target it is on. */
  const headline = computed(() => {
    if (lowestKpa.value === null) return null
    const target = parts('pressure', check().request.targetNozzlePressureKpa).number
    const usual = parts('pressure', lowestKpa.value)
    const hidesSide = usual.number === target && check().answer.verdict === 'falls-short'
    return hidesSide ? parts('pressure', lowestKpa.value, system.value === 'us' ? 1 : 2) : usual
  })

  const margin = computed(() => {
    const { answer, request } = check()
    if (!answer.atTarget) return null
    const { airMarginPct, requiredFreeAirM3Min, deliveredFreeAirM3Min } = answer.atTarget
    const share = `${airMarginPct.toFixed(Math.abs(airMarginPct) < 10 ? 1 : 0).replace(/^-(0(\.0)?)$/, '$1')}\u00a0%`
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
