import { createPinia, setActivePinia } from 'pinia'
import { afterEach, beforeEach, describe, expect, test, vi } from 'vitest'
import type { Session, Visit } from '#shared/contracts/accounts.ts'
import { askApi } from '../../../src/api/request.ts'
import { useSessionStore } from '../../../src/stores/session.ts'
import { makeSession } from './mountRoom.ts'

function makeVisit(session: Session | null): Visit {
  return { session, demoPeople: [], hasMailPage: false }
}

const json = (body: unknown, status = 200) => new Response(JSON.stringify(body), { status })
const notSignedIn = () =>
  json({ type: 'about:blank', title: '', status: 401, detail: '', code: 'not-signed-in' }, 401)

/** What the server would answer, in turn. */
let answers: (() => Response | Promise<Response>)[] = []

beforeEach(() => {
  setActivePinia(createPinia())
  answers = []
  vi.stubGlobal('fetch', async () => {
    const answer = answers.shift()
    if (!answer) throw new TypeError('no network')
    return answer()
  })
})
afterEach(() => {
  vi.unstubAllGlobals()
  localStorage.clear()
})

describe('the session of this device', () => {
  test('nobody is known until the server has said who it is', async () => {
    const store = useSessionStore()
    expect([store.isKnown, store.session, store.can('see-rigs')]).toEqual([false, null, false])
    answers = [() => json(makeVisit(makeSession()))]
    await store.load()
    expect(store.isKnown).toBe(true)
    expect(store.session?.account.name).toBe('Pat')
  })

  test('a blaster may see rigs and pick today’s, and nothing of the owner’s', () => {
    const store = useSessionStore()
    store.set(makeSession({ roles: ['blaster'] }))
    expect(store.can('see-rigs')).toBe(true)
    expect(store.can('pick-today')).toBe(true)
    for (const permission of ['write-fleet', 'see-prices', 'manage-people', 'read-audit'] as const)
      expect(store.can(permission)).toBe(false)
  })

  test('roles add up', () => {
    const store = useSessionStore()
    store.set(makeSession({ roles: ['blaster', 'admin'] }))
    expect(store.can('manage-people')).toBe(true)
    store.set(makeSession({ roles: ['owner'] }))
    expect(store.can('manage-people')).toBe(false)
    expect(store.can('write-fleet')).toBe(true)
  })

  test('the server is asked once, however many pages want to know', async () => {
    const store = useSessionStore()
    answers = [() => json(makeVisit(null))]
    await Promise.all([store.load(), store.load()])
    await store.load()
    expect(store.isKnown).toBe(true)
  })

  test('without a network nobody is signed out, and the next attempt is heard', async () => {
    const store = useSessionStore()
    await expect(store.load()).rejects.toMatchObject({ code: 'offline' })
    expect(store.isKnown).toBe(false)
    answers = [() => json(makeVisit(makeSession()))]
    await store.load()
    expect(store.session).not.toBeNull()
  })

  test('whoever signs in while an older answer is under way stays signed in', async () => {
    const store = useSessionStore()
    let answerLate: (response: Response) => void = () => {}
    answers = [() => new Promise<Response>((resolve) => (answerLate = resolve))]
    const loading = store.load()
    store.set(makeSession())
    answerLate(json(makeVisit(null)))
    await loading
    expect(store.session?.account.email).toBe('pat@example.test')
    expect(store.visit).not.toBeNull()
  })

  test('a session that ends under an open page leaves a note of whose it was', async () => {
    const store = useSessionStore()
    store.set(makeSession())
    const scope = store.scope
    answers = [notSignedIn]
    await expect(askApi('GET', '/api/v1/people')).rejects.toMatchObject({ code: 'not-signed-in' })
    expect(store.session).toBeNull()
    expect(store.cutOff?.email).toBe('pat@example.test')
    expect(store.scope).toBe(scope)
    store.set(makeSession())
    expect(store.cutOff).toBeNull()
  })

  test('a visitor who is refused is not told that they were signed out', async () => {
    const store = useSessionStore()
    store.set(null)
    answers = [notSignedIn]
    await expect(askApi('GET', '/api/v1/people')).rejects.toThrow()
    expect(store.cutOff).toBeNull()
  })

  test('another window that goes to another company takes this one along', async () => {
    // as browsers do: only a value that changes is told to the other windows
    const told: string[] = []
    const kept = new Map<string, string>()
    vi.stubGlobal('localStorage', {
      getItem: (key: string) => kept.get(key) ?? null,
      setItem(key: string, value: string) {
        if (kept.get(key) !== value) told.push(key)
        kept.set(key, value)
      },
      removeItem: (key: string) => kept.delete(key) && told.push(key),
    })
    const elsewhere = useSessionStore()
    elsewhere.set(makeSession())
    told.length = 0
    elsewhere.set(makeSession())
    expect(told).toEqual([])
    const other = makeSession()
    const company = { ...other.company!, id: '9d2a4f10-0000-4000-8000-00000000000b', name: 'Second' }
    elsewhere.set({ ...other, company })
    expect(told).not.toEqual([])

    setActivePinia(createPinia())
    const here = useSessionStore()
    here.set(makeSession())
    // the stores of the other tests are windows too
    answers = Array.from({ length: 40 }, () => () => json(makeVisit({ ...other, company })))
    dispatchEvent(new StorageEvent('storage', { key: told[0]! }))
    await vi.waitFor(() => expect(here.session?.company?.name).toBe('Second'))
  })

  test('signing out holds also where the session has ended already', async () => {
    const store = useSessionStore()
    store.set(makeSession())
    answers = [notSignedIn]
    await store.signOut()
    expect([store.session, store.cutOff, store.scope]).toEqual([null, null, ''])
  })

  test('without a network nobody is told that they are signed out', async () => {
    const store = useSessionStore()
    store.set(makeSession())
    await expect(store.signOut()).rejects.toMatchObject({ code: 'offline' })
    expect(store.session).not.toBeNull()
  })

  test('the device remembers that somebody was signed in, and nothing more', () => {
    useSessionStore().set(makeSession())
    expect({ ...localStorage }).toEqual({ 'sixteenth.signed-in': '1' })
    setActivePinia(createPinia())
    const later = useSessionStore()
    expect([later.isKnown, later.isProbablySignedIn, later.session]).toEqual([false, true, null])
    later.set(null)
    expect(later.isProbablySignedIn).toBe(false)
    expect(localStorage.length).toBe(0)
  })
})
