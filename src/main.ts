import './assets/fonts.css'
import './assets/tokens.css'
import './assets/base.css'
import { createWebHistory } from 'vue-router'
import { createSixteenth } from './createSixteenth.ts'
import { loadSpanish } from './i18n/index.ts'

/** What theme.js set before the first paint: the language that was chosen on this device. */
const isSpanish = document.documentElement.lang === 'es'

/** A pause in which a thumb is heard. */
const pause = () => new Promise<void>((resolve) => setTimeout(resolve))

async function start() {
  await pause()
  const { app, router } = createSixteenth(createWebHistory(), isSpanish ? await loadSpanish() : undefined)
  await router.isReady()
  await pause()
  app.mount('#app')
  document.documentElement.classList.remove('is-starting')
}

void start()
