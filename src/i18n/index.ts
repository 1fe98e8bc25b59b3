import { createI18n } from 'vue-i18n'
import type { Language } from '../stores/preferences.ts'
import { en } from './en/index.ts'
import type { Messages } from './en/index.ts'

/** English comes with the application; Spanish is fetched when it is chosen. */
export function createTranslations(language: Language, spanish?: Messages) {
  return createI18n({
    legacy: false,
    locale: spanish || language === 'en' ? language : 'en',
    fallbackLocale: 'en',
    missingWarn: false,
    fallbackWarn: false,
    messages: { en, ...(spanish ? { es: spanish } : {}) } as Record<string, Messages>,
  })
}

export type Translations = ReturnType<typeof createTranslations>

export async function loadSpanish(): Promise<Messages> {
  return (await import('./es/index.ts')).es
}
