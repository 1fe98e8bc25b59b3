import { createPinia } from 'pinia'
import PrimeVue from 'primevue/config'
import { createApp } from 'vue'
import type { RouterHistory } from 'vue-router'
import App from './App.vue'
import { createTranslations } from './i18n/index.ts'
import type { Messages } from './i18n/en/index.ts'
import { createPages } from './router/index.ts'
import { createRoomKeeper } from './router/prepareRooms.ts'
import { usePreferencesStore } from './stores/preferences.ts'
import { preset } from './theme/preset.ts'

/** The application, for the browser and for the page that is drawn at build. */
export function createSixteenth(history: RouterHistory, spanish?: Messages) {
  const app = createApp(App)
  app.use(createPinia())
  const translations = createTranslations(usePreferencesStore().language, spanish)
  const router = createPages(history, createRoomKeeper(app, translations))
  app.use(translations)
  app.use(PrimeVue, { theme: { preset, options: { darkModeSelector: false, cssLayer: false } } })
  app.use(router)
  return { app, router }
}
