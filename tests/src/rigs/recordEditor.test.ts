import { flushPromises } from '@vue/test-utils'
import { createPinia, setActivePinia } from 'pinia'
import { afterEach, beforeEach, describe, expect, test } from 'vitest'
import { createApp, defineComponent, h, shallowRef } from 'vue'
import type { Session } from '#shared/contracts/accounts.ts'
import type { SiteProfile, SiteRecord } from '#shared/contracts/sites.ts'
import type { Problem } from '#shared/contracts/problems.ts'
import { ApiProblem } from '../../../src/api/request.ts'
import { editOfSite, profileOfSite, siteOfEdit } from '../../../src/components/fleet/recordEdits.ts'
import { useRecordEditor } from '../../../src/composables/useRecordEditor.ts'
import { useSessionStore } from '../../../src/stores/session.ts'
import { makeSite } from './records.ts'

const session = {
  account: { id: 'ana', name: 'Ana', email: 'ana@yard.example', language: 'en' },
  company: { id: 'co', name: 'Co', currency: 'USD', language: 'en', timeZone: 'UTC', version: 1 },
  roles: ['owner'],
  memberships: [],
} as Session

const refuse = (code: Problem['code'], stored?: unknown) =>
  new ApiProblem(code, { type: '', title: '', status: 409, detail: '', code, stored })

/** The sites of one company as the server keeps them: by id and version. */
class FakeServer {
  sites = new Map<string, SiteRecord>()
  isOffline = false
  /** the answer to the next write is lost on its way back */
  losesAnswer = false
  calls = {
    create: async (id: string, profile: SiteProfile) => {
      const stored = this.sites.get(id)
      if (stored && JSON.stringify(profileOfSite(stored)) !== JSON.stringify(profile))
        throw refuse('id-in-use')
      return this.write(stored ?? makeSite({ ...profile, id, version: 1 }))
    },
    change: async ({ id, version }: { id: string; version: number }, profile: SiteProfile) => {
      const stored = this.sites.get(id)!
      if (stored.version !== version) throw refuse('version-conflict', stored)
      return this.write({ ...stored, ...profile, version: version + 1 })
    },
  }

  private write(site: SiteRecord): SiteRecord {
    if (this.isOffline) throw new ApiProblem('offline', null)
    this.sites.set(site.id, site)
    if (!this.losesAnswer) return site
    this.losesAnswer = false
    throw new ApiProblem('offline', null)
  }
}

let server = new FakeServer()
let close = () => {}

/** The editor of a site as a screen opens it. */
function open(site: SiteRecord | null) {
  const record = shallowRef(site)
  let editor!: ReturnType<typeof useRecordEditor<SiteProfile, SiteRecord>>
  const Screen = defineComponent({
    setup() {
      editor = useRecordEditor<SiteProfile, SiteRecord>(record, site?.id ?? null, {
        kind: 'site',
        calls: server.calls,
        start: () => editOfSite(profileOfSite(makeSite({ name: '' })), 'us'),
        editOf: (profile) => editOfSite(profile, 'us'),
        profileOf: siteOfEdit,
        profileOfRecord: profileOfSite,
        find: async (id) => server.sites.get(id) ?? null,
        onSaved: (saved) => (record.value = saved),
      })
      return () => h('p')
    },
  })
  const pinia = createPinia()
  setActivePinia(pinia)
  useSessionStore().set(session)
  const app = createApp(Screen).use(pinia)
  app.mount(document.createElement('div'))
  close = () => app.unmount()
  return { editor, record }
}

beforeEach(() => (server = new FakeServer()))
afterEach(() => {
  close()
  close = () => {}
  localStorage.clear()
})

describe('what is typed into a record', () => {
  test('is saved, and nothing of it waits any more', async () => {
    server.sites.set('yard', makeSite())
    const { editor } = open(makeSite())
    editor.edit.value.fields.name = 'Dock'
    expect(editor.isChanged.value).toBe(true)
    expect((await editor.save())?.name).toBe('Dock')
    expect([editor.isChanged.value, server.sites.get('yard')?.version]).toEqual([false, 2])
    close()
    expect(open(server.sites.get('yard')!).editor.restoredAt.value).toBeNull()
  })

  test('survives the page, and can be thrown away', () => {
    const { editor } = open(makeSite())
    editor.edit.value.fields.name = 'Dock'
    close()
    const again = open(makeSite()).editor
    expect([again.edit.value.fields.name, again.isChanged.value]).toEqual(['Dock', true])
    expect(again.restoredAt.value).not.toBeNull()
    again.discard()
    expect([again.edit.value.fields.name, again.isChanged.value]).toEqual(['Yard', false])
    close()
    expect(open(makeSite()).editor.edit.value.fields.name).toBe('Yard')
  })

  test('stays where the connection is gone', async () => {
    server.isOffline = true
    const { editor } = open(null)
    editor.edit.value.fields.name = 'Dock'
    expect(await editor.save()).toBeNull()
    expect(editor.refusal.value?.code).toBe('offline')
    close()
    const again = open(null).editor
    expect(again.edit.value.fields.name).toBe('Dock')
    server.isOffline = false
    expect((await again.save())?.name).toBe('Dock')
  })

  test('makes one record where an answer was lost, also when more was typed since', async () => {
    const { editor } = open(null)
    editor.edit.value.fields.name = 'Dock'
    server.losesAnswer = true
    expect(await editor.save()).toBeNull()
    editor.edit.value.fields.name = 'Dock 2'
    await editor.save()
    expect([...server.sites.values()].map(({ name }) => name)).toEqual(['Dock 2'])
  })

  test('gives way to somebody else’s version only where nothing was typed', async () => {
    const { editor, record } = open(makeSite())
    record.value = makeSite({ version: 2, name: 'Theirs' })
    await flushPromises()
    expect(editor.edit.value.fields.name).toBe('Theirs')
    editor.edit.value.fields.name = 'Mine'
    record.value = makeSite({ version: 3, name: 'Theirs again' })
    await flushPromises()
    expect(editor.edit.value.fields.name).toBe('Mine')
  })
})

describe('two people who save the same record', () => {
  async function collide() {
    server.sites.set('yard', makeSite({ version: 2, name: 'Theirs', timeZone: 'America/Boise' }))
    const { editor } = open(makeSite())
    editor.edit.value.fields.name = 'Mine'
    editor.edit.value.form.site.humidity = { text: '20 %', system: 'us' }
    expect(await editor.save()).toBeNull()
    return editor
  }

  test('are shown what each of them changed', async () => {
    const editor = await collide()
    const found = editor.conflict.value!.differences.map(({ path, changedBy }) => [path, changedBy])
    expect(Object.fromEntries(found)).toEqual({
      name: 'both',
      relativeHumidityPct: 'mine',
      timeZone: 'theirs',
    })
    expect(server.sites.get('yard')!.name).toBe('Theirs')
  })

  test('have both their work in what was chosen', async () => {
    const editor = await collide()
    const choices = { name: 'mine', relativeHumidityPct: 'mine', timeZone: 'theirs' } as const
    const saved = await editor.settle(choices)
    expect(saved).toMatchObject({
      version: 3,
      name: 'Mine',
      relativeHumidityPct: 20,
      timeZone: 'America/Boise',
    })
    expect(editor.conflict.value).toBeNull()
  })

  test('are asked again where a third saved in between', async () => {
    const editor = await collide()
    server.sites.set('yard', makeSite({ version: 9, name: 'A third' }))
    expect(await editor.settle({ name: 'mine', relativeHumidityPct: 'mine', timeZone: 'theirs' })).toBeNull()
    expect(editor.conflict.value?.stored.name).toBe('A third')
    expect(editor.edit.value.fields.name).toBe('Mine')
  })

  test('lose nothing where the one who collided closes the page', async () => {
    await collide()
    close()
    const again = open(server.sites.get('yard')!).editor
    expect(again.edit.value.fields.name).toBe('Mine')
    expect(await again.save()).toBeNull()
    expect(again.conflict.value!.differences.map(({ path }) => path)).toContain('timeZone')
  })
})
