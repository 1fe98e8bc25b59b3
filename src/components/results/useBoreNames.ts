import { HOSE_SIZES } from '#shared/catalogue/hoses.ts'
import { nozzleNumberOf } from '#shared/catalogue/nozzleNumbers.ts'
import { useWords } from '../../composables/useWords.ts'

/** Bores and hoses as the trade says them. */
export function useBoreNames() {
  const { quantity, system } = useWords()

  /** `No. 6`, or the bore where it is no whole number of sixteenths. */
  function nozzleName(boreMm: number): string {
    const number = nozzleNumberOf(boreMm)
    return number === null ? quantity('bore', boreMm) : `No. ${number}`
  }

  /** `1 1/4 in`; a usual size in metric by its round name, `32 mm`. */
  function hoseName(insideDiameterMm: number): string {
    const size = HOSE_SIZES.find((usual) => Math.abs(usual.insideDiameterMm - insideDiameterMm) < 0.0005)
    return size && system.value === 'metric'
      ? `${size.metricName}\u00a0mm`
      : quantity('diameter', insideDiameterMm).replaceAll(' ', '\u00a0')
  }

  return { nozzleName, hoseName }
}
