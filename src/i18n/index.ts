import { createI18n } from 'vue-i18n'
import type { Language } from '../stores/preferences.ts'
import { firstWords } from './en/firstWords.ts'
import type { Messages } from './en/index.ts'

/** English comes with the application, its rooms behind the sign-in apart; Spanish is fetched when it is chosen. */
export function createTranslations(language: Language, spanish?: Messages) {
  return createI18n({
    legacy: false,
    locale: spanish || language === 'en' ? language : 'en',
    fallbackLocale: 'en',
    missingWarn: false,
    fallbackWarn: false,
    messages: { en: firstWords as Messages, ...(spanish ? { es: spanish } : {}) } as Record<string, Messages>,
  })
}

export type Translations = ReturnType<typeof createTranslations>

export async function loadSpanish(): Promise<Messages> {
  return (await import('./es/index.ts')).es
}

/** The English of the pages behind the sign-in. Spanish is one file, so that it is whole wherever it is chosen. */
export async function loadRoomWords(translations: Translations): Promise<void> {
  const { rooms } = await import('./en/rooms.ts')
  translations.global.mergeLocaleMessage('en', rooms)
}
