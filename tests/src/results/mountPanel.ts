import { mount } from '@vue/test-utils'
import { createPinia, setActivePinia } from 'pinia'
import PrimeVue from 'primevue/config'
import type { Component } from 'vue'
import { createCheckForm } from '#shared/form/checkForm.ts'
import type { CheckForm } from '#shared/form/checkForm.ts'
import { readForm } from '#shared/form/readForm.ts'
import type { UnitSystem } from '#shared/units/quantities.ts'
import { answerRequest } from '../../../src/composables/usePressureCheck.ts'
import { es } from '../../../src/i18n/es/index.ts'
import { createTranslations } from '../../../src/i18n/index.ts'
import { usePreferencesStore } from '../../../src/stores/preferences.ts'
import type { Language } from '../../../src/stores/preferences.ts'

const us = (text: string) => ({ text, system: 'us' as const })

/** A rig that holds with something left: 375 cfm, 1 1/4 in hose, a No. 6 worn to 25/64, 100 psi. */
export function makeForm(change: (form: CheckForm) => void = () => {}): CheckForm {
  const form = createCheckForm()
  form.compressor.freeAir = us('375 cfm')
  form.compressor.setPressure = us('125 psi')
  const [outlet] = form.outlets
  outlet!.hose.bore = us('1 1/4 in')
  outlet!.whip.bore = us('1 in')
  outlet!.newBore = us('No. 6')
  outlet!.boreNow = us('25/64')
  form.target = us('100 psi')
  change(form)
  return form
}

export { us }

export function answerForm(form: CheckForm) {
  const { request, problems, values } = readForm(form)
  if (!request) throw new Error(`the form is not whole: ${Object.keys(problems).join(', ')}`)
  return { check: answerRequest(request), problems, values }
}

export interface PanelSettings {
  language?: Language
  units?: UnitSystem
}

export function mountPanel(
  panel: Component,
  props: Record<string, unknown>,
  { language = 'en', units = 'us' }: PanelSettings = {},
) {
  const pinia = createPinia()
  setActivePinia(pinia)
  const preferences = usePreferencesStore()
  preferences.language = language
  preferences.units = units
  return mount(panel, {
    props,
    attachTo: document.body,
    global: { plugins: [pinia, createTranslations(language, es), PrimeVue] },
  })
}

/** A message's key where its words should be. */
export const rawKey = /\b(results|verdicts|elements|reasons|fields)\.[a-z]/
/** What a broken figure looks like. */
export const brokenFigure = /NaN|Infinity|undefined|\bnull\b|\{[a-z]+\}/i
