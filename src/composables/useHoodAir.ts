import { computed } from 'vue'
import { HOOD_AIR } from '#shared/catalogue/breathing.ts'
import { useWords } from './useWords.ts'

/** What the rule lets a loose-fitting hood pass, in the person's units. */
export function useHoodAir() {
  const { quantity } = useWords()
  const loose = HOOD_AIR.find((hood) => hood.id === 'loose-fitting')
  return computed(() => ({
    least: quantity('volumeFlow', loose?.leastFreeAirM3Min ?? NaN),
    most: quantity('volumeFlow', loose?.mostFreeAirM3Min ?? NaN),
  }))
}
