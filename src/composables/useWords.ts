import { computed } from 'vue'
import { useI18n } from 'vue-i18n'
import { formatQuantity } from '#shared/units/format.ts'
import type { FormattedQuantity } from '#shared/units/format.ts'
import type { QuantityKind } from '#shared/units/quantities.ts'
import { usePreferencesStore } from '../stores/preferences.ts'

/** Numbers and sentences in the person's units and language. */
export function useWords() {
  const { t, te } = useI18n()
  const preferences = usePreferencesStore()
  const system = computed(() => preferences.units)

  /** Number and unit apart, for where the unit is set smaller. */
  function parts(kind: QuantityKind, value: number, digits?: number): FormattedQuantity {
    return formatQuantity(kind, value, { system: system.value, locale: preferences.language, digits })
  }

  /** `103 psi`; the space does not break. */
  function quantity(kind: QuantityKind, value: number, digits?: number): string {
    const { number, unit } = parts(kind, value, digits)
    return unit === '' ? number : `${number}\u00a0${unit}`
  }

  /** The name of an element of the line: `blast-hose-2` is "blast hose 2". */
  function elementName(code: string): string {
    const [, base = code, number] = /^(.*?)(?:-(\d+))?$/.exec(code) ?? []
    const name = te(`elements.${base}`) ? t(`elements.${base}`) : code
    return number === undefined ? name : `${name} ${number}`
  }

  /** The sentence of a reason code: `choked:whip`. */
  function reasonSentence(reason: string): string {
    const [code = '', detail = ''] = reason.split(':')
    return t(`reasons.${code}`, { element: elementName(detail), number: detail })
  }

  return { t, te, system, parts, quantity, elementName, reasonSentence }
}
