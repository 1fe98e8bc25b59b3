import { mount } from '@vue/test-utils'
import { createPinia, setActivePinia } from 'pinia'
import PrimeVue from 'primevue/config'
import { afterEach } from 'vitest'
import type { Component } from 'vue'
import type { UnitSystem } from '#shared/units/quantities.ts'
import { es } from '../../../src/i18n/es/index.ts'
import { createTranslations } from '../../../src/i18n/index.ts'
import { usePreferencesStore } from '../../../src/stores/preferences.ts'
import type { Language } from '../../../src/stores/preferences.ts'

let unmountLast = () => {}
afterEach(() => {
  unmountLast()
  localStorage.clear()
})

/** A component in a page of its own, with the application's words, units and parts. */
export function mountInApp(
  component: Component,
  props: Record<string, unknown> = {},
  { units = 'us', language = 'en' }: { units?: UnitSystem; language?: Language } = {},
  slots: Record<string, string> = {},
) {
  const pinia = createPinia()
  setActivePinia(pinia)
  const preferences = usePreferencesStore()
  preferences.units = units
  preferences.language = language
  const wrapper = mount(component, {
    props,
    slots,
    attachTo: document.body,
    global: { plugins: [pinia, createTranslations(language, es), PrimeVue] },
  })
  unmountLast = () => wrapper.unmount()
  return { wrapper, preferences }
}

/** What a person reads: one space for many, no-break spaces too. */
export function textOf(part: { text: () => string }): string {
  return part.text().replace(/\s+/g, ' ').trim()
}
