import { computed } from 'vue'
import { findLargestNozzles } from '#shared/airflow/index.ts'
import type { LargestNozzles } from '#shared/airflow/fit.ts'
import { NOZZLE_NUMBERS } from '#shared/catalogue/nozzleNumbers.ts'
import type { AnsweredCheck } from '../../composables/usePressureCheck.ts'
import { useWords } from '../../composables/useWords.ts'

const outletIndex = 0
const smallest = `No. ${NOZZLE_NUMBERS[0]}`

/** The largest nozzle that a checked rig holds, and the sentences about it. */
export function useLargestNozzle(check: () => AnsweredCheck) {
  const { t, quantity, system, reasonSentence } = useWords()
  const target = () => quantity('pressure', check().request.targetNozzlePressureKpa)

  /** More digits where rounding would hide that it is under the target. */
  function underText(kpa: number): string {
    let digits = system.value === 'us' ? 0 : 1
    const shown = (pressure: number) => quantity('pressure', pressure, digits)
    const hidesSide = () => shown(kpa) === shown(check().request.targetNozzlePressureKpa)
    for (; digits < 4 && hidesSide(); digits++);
    return shown(kpa)
  }

  /** What keeps even the smallest nozzle from the target: the compressor only where it is the compressor. */
  function noneSentence(obstacle: LargestNozzles['obstacle']): string {
    const words = { nozzle: smallest, target: target() }
    const { outlets } = check().request
    if (obstacle === 'wider-than-line') return t('results.fit.noneWider', words)
    if (obstacle === null || obstacle === 'short-of-air') {
      return t(outlets.length > 1 ? 'results.fit.noneBeside' : 'results.fit.noneFits', words)
    }
    const [code, number] = obstacle.split(':')
    const regulatorKpa = code === 'regulator' ? outlets[Number(number) - 1]?.regulatorKpa : undefined
    if (regulatorKpa !== undefined && regulatorKpa < check().request.targetNozzlePressureKpa) {
      const regulator = underText(regulatorKpa)
      return t(outlets.length > 1 ? 'results.fit.noneHeldOf' : 'results.fit.noneHeld', {
        ...words,
        regulator,
        number,
      })
    }
    return t('results.fit.noneRig', { ...words, reason: reasonSentence(obstacle) })
  }

  return computed(() => {
    const { rig, site, targetPa, ambientPa } = check().question
    const { whenNew, whenWorn, obstacle } = findLargestNozzles(
      rig,
      site,
      targetPa - ambientPa,
      outletIndex,
      NOZZLE_NUMBERS,
    )
    if (!whenNew) return { name: null, sentences: [noneSentence(obstacle)] }
    const name = `No. ${whenNew.number}`
    const words = { nozzle: name, target: target() }
    if (whenWorn?.number === whenNew.number) return { name, sentences: [t('results.fit.wornHolds', words)] }
    const worn = whenNew.wornCheck.operatingPoint
    const lowestPa = worn && Math.min(...worn.outlets.map(({ nozzlePressurePa }) => nozzlePressurePa))
    const newSentence = () => {
      if (whenNew.isWornWiderThanLine) return t('results.fit.newWidest', words)
      return lowestPa === null
        ? t('results.fit.newStops', words)
        : t('results.fit.newHolds', {
            ...words,
            pressure: underText((lowestPa - check().question.ambientPa) / 1000),
          })
    }
    return {
      name,
      sentences: [
        newSentence(),
        whenWorn
          ? t('results.fit.wornLargest', { nozzle: `No. ${whenWorn.number}` })
          : t('results.fit.wornNone', { smallest }),
      ],
    }
  })
}
