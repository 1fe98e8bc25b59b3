import { defineStore } from 'pinia'
import { ref, watch } from 'vue'
import type { UnitSystem } from '#shared/units/quantities.ts'

export const themes = ['light', 'dark', 'sun'] as const
export const languages = ['en', 'es'] as const
export type Theme = (typeof themes)[number]
export type Language = (typeof languages)[number]

/** Read before the first paint by src/public/theme.js as well. */
const storageKey = 'sixteenth.preferences'

interface Preferences {
  units: UnitSystem
  theme: Theme
  language: Language
}

function readStored(): Partial<Preferences> {
  try {
    const stored: unknown = JSON.parse(localStorage.getItem(storageKey) ?? '{}')
    return stored !== null && typeof stored === 'object' ? stored : {}
  } catch {
    return {}
  }
}

function oneOf<T extends string>(allowed: readonly T[], value: unknown, otherwise: T): T {
  return allowed.find((candidate) => candidate === value) ?? otherwise
}

/** Units, language and theme: the person's own, remembered on this device. */
export const usePreferencesStore = defineStore('preferences', () => {
  const stored = import.meta.env.SSR ? {} : readStored()
  const prefersDark = !import.meta.env.SSR && matchMedia('(prefers-color-scheme: dark)').matches
  const speaksSpanish = !import.meta.env.SSR && navigator.language.startsWith('es')
  const units = ref<UnitSystem>(oneOf(['us', 'metric'], stored.units, 'us'))
  const theme = ref<Theme>(oneOf(themes, stored.theme, prefersDark ? 'dark' : 'light'))
  const language = ref<Language>(oneOf(languages, stored.language, speaksSpanish ? 'es' : 'en'))

  if (!import.meta.env.SSR) {
    watch(
      [units, theme, language],
      () => {
        document.documentElement.dataset.theme = theme.value
        document.documentElement.lang = language.value
        const chosen = { units: units.value, theme: theme.value, language: language.value }
        try {
          localStorage.setItem(storageKey, JSON.stringify(chosen))
        } catch {
          // A browser that keeps nothing still shows what was chosen.
        }
      },
      { immediate: true },
    )
  }
  return { units, theme, language }
})
