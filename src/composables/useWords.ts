import { computed } from 'vue'
import { useI18n } from 'vue-i18n'
import { formatQuantity } from '#shared/units/format.ts'
import type { FormattedQuantity } from '#shared/units/format.ts'
import type { QuantityKind } from '#shared/units/quantities.ts'
import { usePreferencesStore } from '../stores/preferences.ts'

/**
 * Sentences by language, cut at their gaps: `['hold ', 'target', ' here']`. Hundreds are asked for at each touch, and
 * none needs the compiler; null is for those that do.
 */
const cutSentences = new Map<string, readonly string[] | null>()

/** Odd places are the names of gaps. A plural, a linked or a quoted sentence is the compiler's. */
function cutSentence(written: unknown): readonly string[] | null {
  if (typeof written !== 'string') return null
  const pieces = written.split(/\{(\w+)\}/)
  return pieces.some((piece) => /[{}@|]/.test(piece)) ? null : pieces
}

const stepInto = (tree: unknown, name: string) => (tree as Record<string, unknown> | undefined)?.[name]

/** Numbers and sentences in the person's units and language. */
export function useWords() {
  const { t: translate, te, locale, getLocaleMessage } = useI18n({ useScope: 'global' })
  const preferences = usePreferencesStore()
  const system = computed(() => preferences.units)

  function cutOf(key: string): readonly string[] | null {
    const place = `${locale.value}.${key}`
    let pieces = cutSentences.get(place)
    if (pieces === undefined) {
      pieces = cutSentence(key.split('.').reduce<unknown>(stepInto, getLocaleMessage(locale.value)))
      cutSentences.set(place, pieces)
    }
    return pieces
  }

  function t(key: string, words: Record<string, unknown> = {}, count?: number): string {
    const pieces = cutOf(key)
    if (!pieces) return count === undefined ? translate(key, words) : translate(key, words, count)
    let text = pieces[0]!
    for (let i = 1; i < pieces.length; i += 2) text += String(words[pieces[i]!] ?? '') + pieces[i + 1]!
    return text
  }

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
