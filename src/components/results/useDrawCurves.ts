import { computed } from 'vue'
import { freeAirOnCurve, traceDeliveryAndDraw } from '#shared/airflow/drawCurves.ts'
import type { AirPoint, DrawCurve } from '#shared/airflow/drawCurves.ts'
import { prepareRig } from '#shared/airflow/preparedRig.ts'
import { displayUnit, fromBase, mmOfInches } from '#shared/units/quantities.ts'
import type { AnsweredCheck } from '../../composables/usePressureCheck.ts'
import { useWords } from '../../composables/useWords.ts'
import { useBoreNames } from './useBoreNames.ts'

export type DrawName = 'new' | 'now' | 'more'

export interface NamedDraw extends DrawCurve {
  name: DrawName
  label: string
}

const sixteenthMm = mmOfInches(1 / 16)
const sameBoreMm = 0.0005
const outletIndex = 0
const perMinute = 60

/** The curves of a check in the person's units, for a chart and for its table. */
export function useDrawCurves(check: () => AnsweredCheck) {
  const { t, quantity, system, elementName, reasonSentence } = useWords()
  const { nozzleName } = useBoreNames()

  const curves = computed(() => {
    const { request, question } = check()
    const nozzle = request.outlets[outletIndex]!.nozzle
    const newBoreMm = nozzle.newBoreMm ?? nozzle.boreMm
    const bores: { name: DrawName; mm: number }[] = [
      { name: 'now', mm: nozzle.boreMm },
      { name: 'more', mm: nozzle.boreMm + sixteenthMm },
    ]
    if (Math.abs(newBoreMm - nozzle.boreMm) > sameBoreMm) bores.unshift({ name: 'new', mm: newBoreMm })
    const targetGaugePa = question.targetPa - question.ambientPa
    const traced = traceDeliveryAndDraw(
      prepareRig(question.rig, question.site),
      outletIndex,
      bores.map(({ mm }) => mm / 1000),
      targetGaugePa,
    )
    return { ...traced, names: bores, targetGaugePa }
  })

  const draws = computed<NamedDraw[]>(() =>
    curves.value.draws.map((draw, index) => {
      const { name, mm } = curves.value.names[index]!
      const label =
        name === 'more'
          ? t('results.curve.more', { size: quantity('bore', sixteenthMm) })
          : t(`results.curve.${name}`, { bore: nozzleName(mm) })
      return { ...draw, name, label }
    }),
  )

  const pressureUnit = computed(() => displayUnit('pressure', system.value))
  const airUnit = computed(() => displayUnit('volumeFlow', system.value))
  const pressureOf = (gaugePa: number) => fromBase(pressureUnit.value, gaugePa / 1000)
  const airOf = (freeAirM3S: number) => fromBase(airUnit.value, freeAirM3S * perMinute)
  const toDisplay = (points: readonly AirPoint[]) =>
    points.map((point) => ({ x: pressureOf(point.nozzleGaugePa), y: airOf(point.freeAirM3S) }))
  const pressureText = (gaugePa: number) => quantity('pressure', gaugePa / 1000)
  const airText = (freeAirM3S: number | null) =>
    freeAirM3S === null ? '–' : quantity('volumeFlow', freeAirM3S * perMinute)

  /** One row each 10 psi or half a bar of the chart. */
  const rows = computed(() => {
    const { lowestGaugePa, highestGaugePa, delivery } = curves.value
    const unit = pressureUnit.value
    const stepPa = ((system.value === 'us' ? 10 : 0.5) * unit.times * 1000) / unit.over
    const every = Math.max(1, Math.ceil((highestGaugePa - lowestGaugePa) / stepPa / 12))
    const list = []
    for (let i = Math.ceil(lowestGaugePa / stepPa); i * stepPa <= highestGaugePa; i += every) {
      const gauge = i * stepPa
      const drawn = draws.value.map((draw) => airText(freeAirOnCurve(draw, gauge)))
      list.push({ pressure: pressureText(gauge), delivered: airText(freeAirOnCurve(delivery, gauge)), drawn })
    }
    return list
  })

  /** Does the delivery end on the chart, because the other nozzles take all? */
  const isDeliveryTaken = computed(() => {
    const { delivery, highestGaugePa } = curves.value
    const last = delivery.points.at(-1)
    return delivery.isTakenByOthers && last !== undefined && last.nozzleGaugePa < highestGaugePa
  })

  /** In words: where each draw balances, and why a line ends. */
  const notes = computed(() => {
    const { delivery, lowestGaugePa } = curves.value
    const ends = draws.value.flatMap(({ end, label, points }) => {
      if (!end) return []
      const [code, element = ''] = end.split(':')
      const words = { line: label, element: elementName(element) }
      if (code !== 'choked') return [t('results.curve.endsHeld')]
      return [t(points.length > 0 ? 'results.curve.endsChoked' : 'results.curve.neverPasses', words)]
    })
    if (isDeliveryTaken.value) ends.push(t('results.curve.endsTaken'))
    const first = delivery.points[0]
    const isCutLow = delivery.end && first && first.nozzleGaugePa > lowestGaugePa
    if (isCutLow) {
      const element = elementName(delivery.end?.split(':')[1] ?? '')
      ends.push(t('results.curve.startsChoked', { element }))
    }
    if (!first) ends.push(reasonSentence('air-taken-first'))
    return [...new Set(ends)]
  })

  const balances = computed(() =>
    draws.value.map(({ label, operatingPoint }) =>
      operatingPoint
        ? t('results.curve.meets', {
            line: label,
            pressure: pressureText(operatingPoint.nozzleGaugePa),
            air: airText(operatingPoint.freeAirM3S),
          })
        : t('results.curve.meetsNot', { line: label }),
    ),
  )

  return {
    curves,
    draws,
    isDeliveryTaken,
    rows,
    notes,
    balances,
    pressureUnit,
    airUnit,
    pressureOf,
    airOf,
    toDisplay,
  }
}
