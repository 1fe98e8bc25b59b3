import { computed, ref, watch } from 'vue'
import type { HourFigures } from '#shared/check/hourOfCheck.ts'
import type { FieldProblem } from '#shared/form/readForm.ts'

const fields = ['mediaRate', 'bagMass', 'fullLoadFuel', 'waterRate', 'tank'] as const
export type HourField = (typeof fields)[number]

interface ReadHour {
  values: Record<string, number>
  problems: Record<string, FieldProblem>
}

/**
 * An hour's figures: what is typed, else the defaults. A field that is half typed keeps its last whole figure; one that
 * never had any has none, for its default would look typed.
 */
export function useHourFigures(read: () => ReadHour, defaults: () => HourFigures) {
  const typed = ref<Partial<Record<HourField, number>>>({})
  watch(
    read,
    ({ values, problems }) => {
      for (const field of fields) {
        const value = values[`hour.${field}`]
        if (value !== undefined) typed.value[field] = value
        else if (!problems[`hour.${field}`]) delete typed.value[field]
      }
    },
    { immediate: true },
  )
  const isUnfinished = (...asked: HourField[]) => asked.some((field) => read().problems[`hour.${field}`])
  const isTyped = (field: HourField) => typed.value[field] !== undefined || isUnfinished(field)
  const figureOf = (field: HourField, otherwise: number) =>
    typed.value[field] ?? (isUnfinished(field) ? NaN : otherwise)
  const figures = computed<HourFigures>(() => ({
    mediaKgPerH: figureOf('mediaRate', defaults().mediaKgPerH),
    bagMassKg: figureOf('bagMass', defaults().bagMassKg),
    fullLoadFuelLPerH: figureOf('fullLoadFuel', defaults().fullLoadFuelLPerH),
    waterLPerMin: figureOf('waterRate', defaults().waterLPerMin),
    tankL: figureOf('tank', defaults().tankL),
  }))
  return { figures, isTyped, isUnfinished }
}
