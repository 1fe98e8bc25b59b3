import { shallowRef, watch } from 'vue'
import type { Session } from '#shared/contracts/accounts.ts'
import { useSessionStore } from '../../stores/session.ts'

/** The session a page was opened in: whoever is let go meanwhile keeps the page, and what they typed on it. */
export function useKeptSession() {
  const store = useSessionStore()
  const kept = shallowRef<Session | null>(store.session)
  watch(
    () => store.session,
    (session) => {
      if (session) kept.value = session
    },
  )
  return kept
}
