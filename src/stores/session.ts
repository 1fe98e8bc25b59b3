import { defineStore } from 'pinia'
import { computed, ref, shallowRef } from 'vue'
import type { Session, Visit } from '#shared/contracts/accounts.ts'
import { may } from '#shared/contracts/permissions.ts'
import type { Permission } from '#shared/contracts/permissions.ts'
import { fetchVisit, signOut as askToSignOut } from '../api/accounts.ts'
import { ApiProblem, askFor, whenOtherCompany, whenSignedOut } from '../api/request.ts'

/** Says only that somebody was signed in on this device, so that the navigation is drawn as it will be. */
const hintKey = 'sixteenth.signed-in'

function readHint(): boolean {
  try {
    return localStorage.getItem(hintKey) === '1'
  } catch {
    return false
  }
}

/** Other windows hear of it where it is written anew: they would go on in another company than the server does. */
function writeHint(isSignedIn: boolean, isAnew: boolean) {
  try {
    if (!isSignedIn || isAnew) localStorage.removeItem(hintKey)
    if (isSignedIn) localStorage.setItem(hintKey, '1')
  } catch {
    // A browser that keeps nothing draws its navigation a moment later.
  }
}

/** Who is signed in, and as what. The server decides what they may; the screens only hide. */
export const useSessionStore = defineStore('session', () => {
  const visit = shallowRef<Visit | null>(null)
  const session = shallowRef<Session | null>(null)
  /** whether the server has said who this is */
  const isKnown = ref(false)
  /** whom the server let go while their page was open, and what they typed still stands there */
  const cutOff = shallowRef<Session['account'] | null>(null)
  /** what answers are kept under: whose and which company's they are; stays while a page is cut off */
  const scope = ref('')
  const hint = ref(!import.meta.env.SSR && readHint())
  const isProbablySignedIn = computed(() => (isKnown.value ? session.value !== null : hint.value))
  let loading: Promise<void> | null = null
  /** An answer that was asked for before somebody signed in or out says nothing any more. */
  let turn = 0

  function set(next: Session | null) {
    turn++
    const before = scope.value
    session.value = next
    isKnown.value = true
    cutOff.value = null
    askFor(next?.company?.id ?? null)
    scope.value = next ? `${next.account.id} ${next.company?.id ?? ''}` : ''
    hint.value = next !== null
    writeHint(hint.value, before !== '' && before !== scope.value)
  }

  whenSignedOut(() => {
    const account = session.value?.account
    if (!account) return
    const kept = scope.value
    set(null)
    scope.value = kept
    cutOff.value = account
  })

  async function ask() {
    const asked = ++turn
    try {
      const answer = await fetchVisit()
      visit.value = answer
      if (asked === turn) set(answer.session)
    } finally {
      loading = null
    }
  }

  /** Asks the server who this is; `isAnew` also where that is known. Throws where nothing answers. */
  function load(isAnew = false): Promise<void> {
    if (isKnown.value && visit.value && !isAnew) return Promise.resolve()
    return (loading ??= ask())
  }

  /** Whoever signs in or out, or goes to another company, in another window of this browser does so here too. */
  if (!import.meta.env.SSR) {
    const askAnew = () => void load(true).catch(() => {})
    whenOtherCompany(askAnew)
    addEventListener('storage', ({ key }) => {
      if (key === hintKey) askAnew()
    })
    // a page that was put away heard nothing
    addEventListener('pageshow', ({ persisted }) => {
      if (persisted) askAnew()
    })
  }

  function can(permission: Permission): boolean {
    return session.value !== null && may(session.value.roles, permission)
  }

  async function signOut() {
    try {
      await askToSignOut()
    } catch (error) {
      // who has no session any more is signed out already
      if (!(error instanceof ApiProblem && error.code === 'not-signed-in')) throw error
    }
    set(null)
  }

  return { visit, session, isKnown, isProbablySignedIn, cutOff, scope, load, set, can, signOut }
})
