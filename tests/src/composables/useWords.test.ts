import { describe, expect, it } from 'vitest'
import { defineComponent } from 'vue'
import { useI18n } from 'vue-i18n'
import { useWords } from '../../../src/composables/useWords.ts'
import { en } from '../../../src/i18n/en/index.ts'
import { languages } from '../../../src/stores/preferences.ts'
import { mountInApp } from '../components/mountInApp.ts'

type Tree = { [key: string]: string | Tree }

function flatten(tree: Tree, prefix = ''): [string, string][] {
  return Object.entries(tree).flatMap(([name, value]): [string, string][] =>
    typeof value === 'string' ? [[prefix + name, value]] : flatten(value, `${prefix}${name}.`),
  )
}

const messages = flatten(en)
const gaps = messages.flatMap(([, text]) => [...text.matchAll(/\{(\w+)\}/g)].map(([, name]) => name!))
/** Something for every gap: a name, an amount, and one that a compiler would read as a gap of its own. */
const words: Record<string, unknown> = {
  ...Object.fromEntries(gaps.map((name) => [name, `<${name}>`])),
  count: 2,
  number: 3,
  bore: '{limit} | @:25/64',
}

describe('sentences with gaps', () => {
  it.each(languages)('are in %s as the translator itself would fill them in', (language) => {
    let said: string[] = []
    let expected: string[] = []
    const Listener = defineComponent(() => {
      const { t } = useWords()
      const { t: translate } = useI18n({ useScope: 'global' })
      said = messages.flatMap(([key]) => [t(key, words), t(key, words, 2)])
      expected = messages.flatMap(([key]) => [translate(key, words), translate(key, words, 2)])
      return () => null
    })
    mountInApp(Listener, {}, { language })
    expect(expected.length).toBeGreaterThan(500)
    expect(expected.some((text) => text.includes('{limit} | @:25/64'))).toBe(true)
    expect(said).toEqual(expected)
  })
})
