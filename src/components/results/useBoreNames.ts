import { nozzleNumberOf } from '#shared/catalogue/nozzleNumbers.ts'
import { useFieldWords } from '../../composables/useFieldWords.ts'
import { useWords } from '../../composables/useWords.ts'

/** Bores and hoses as the trade says them. */
export function useBoreNames() {
  const { quantity } = useWords()
  const { typedValue } = useFieldWords()

  /** `No. 6`, or the bore where it is no whole number of sixteenths. */
  function nozzleName(boreMm: number): string {
    const number = nozzleNumberOf(boreMm)
    return number === null ? quantity('bore', boreMm) : `No. ${number}`
  }

  /** `1 1/4 in`, `31.75 mm`: as the form shows it. */
  function hoseName(insideDiameterMm: number): string {
    return typedValue('diameter', insideDiameterMm).replaceAll(' ', '\u00a0')
  }

  return { nozzleName, hoseName }
}
