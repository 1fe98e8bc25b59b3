import { flushPromises, mount } from '@vue/test-utils'
import { PiniaColada } from '@pinia/colada'
import { createPinia, setActivePinia } from 'pinia'
import PrimeVue from 'primevue/config'
import { afterEach, vi } from 'vitest'
import type { Component } from 'vue'
import { createMemoryHistory, createRouter } from 'vue-router'
import type { Session } from '#shared/contracts/accounts.ts'
import type { FieldError, Problem } from '#shared/contracts/problems.ts'
import { es } from '../../../src/i18n/es/index.ts'
import { createTranslations, loadRoomWords } from '../../../src/i18n/index.ts'
import { usePreferencesStore } from '../../../src/stores/preferences.ts'
import type { Language } from '../../../src/stores/preferences.ts'
import { useSessionStore } from '../../../src/stores/session.ts'

export const company = {
  id: '7b0c2f8e-0d5c-4a52-9c1a-5c1c8f6a2d11',
  version: 1,
  name: 'Ridge Line Blasting',
  currency: 'USD',
  language: 'en' as const,
  timeZone: 'America/Denver',
}

export function makeSession(overrides: Partial<Session> = {}): Session {
  return {
    account: { id: 'account-1', name: 'Pat', email: 'pat@example.test', language: 'en' },
    company,
    roles: ['blaster'],
    memberships: [{ companyId: company.id, companyName: company.name, roles: ['blaster'] }],
    ...overrides,
  }
}

interface Asked {
  method: string
  path: string
  body: unknown
}

type Answer = unknown | Response | Error

/** A server that says what it is told to, and notes what it was asked. */
export function fakeServer(answer: (asked: Asked) => Answer): Asked[] {
  const asked: Asked[] = []
  vi.stubGlobal('fetch', async (path: string, { method = 'GET', body }: RequestInit = {}) => {
    const request = { method, path, body: typeof body === 'string' ? JSON.parse(body) : undefined }
    asked.push(request)
    const said = await answer(request)
    if (said instanceof Error) throw said
    return said instanceof Response ? said : new Response(said === undefined ? '' : JSON.stringify(said))
  })
  return asked
}

export function refuse(status: number, code: Problem['code'], errors?: Partial<FieldError>[], more = {}) {
  const problem = {
    type: 'about:blank',
    title: '',
    status,
    detail: '',
    code,
    ...(errors && { errors }),
    ...more,
  }
  return new Response(JSON.stringify(problem), { status })
}

let unmountLast = () => {}
afterEach(() => {
  unmountLast()
  unmountLast = () => {}
  localStorage.clear()
  vi.unstubAllGlobals()
})

/** A page behind the sign-in, with its words, its queries and the session of whoever opens it. */
export async function mountRoom(
  component: Component,
  {
    props = {},
    language = 'en',
    session = null,
  }: { props?: Record<string, unknown>; language?: Language; session?: Session | null } = {},
) {
  const pinia = createPinia()
  setActivePinia(pinia)
  usePreferencesStore().language = language
  const store = useSessionStore()
  store.set(session)
  const translations = createTranslations(language, es)
  await loadRoomWords(translations)
  const empty = { template: '<p />' }
  const names = ['sign-in', 'sign-up', 'forgotten-password', 'mail', 'people', 'company', 'account']
  const router = createRouter({
    history: createMemoryHistory(),
    routes: [
      { path: '/', component: empty },
      ...names.map((name) => ({ path: `/${name}`, name, component: empty })),
    ],
  })
  const wrapper = mount(component, {
    props,
    attachTo: document.body,
    global: { plugins: [pinia, translations, PrimeVue, router, [PiniaColada, {}]] },
  })
  unmountLast = () => wrapper.unmount()
  await flushPromises()

  const fieldOf = (label: string) => {
    const found = wrapper.findAll('label').find((each) => each.text().startsWith(label))
    const id = found?.attributes('for')
    if (!id) throw new Error(`No field is called ${label}.`)
    return wrapper.get<HTMLInputElement>(`[id="${id}"]`)
  }
  return {
    wrapper,
    store,
    router,
    fieldOf,
    /** what a screen reader reads with a field */
    sentenceOf(label: string) {
      const id = fieldOf(label).attributes('aria-describedby')
      return id ? wrapper.get(`[id="${id}"]`).text() : ''
    },
    async submit() {
      await wrapper.get('form').trigger('submit')
      await flushPromises()
    },
  }
}
