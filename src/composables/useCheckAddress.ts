import { effect, onBeforeUnmount, onMounted, stop, watch } from 'vue'
import { onBeforeRouteLeave, useRoute, useRouter } from 'vue-router'
import { usePressureCheckStore } from '../stores/pressureCheck.ts'

const delayMs = 250

/**
 * The check in the address's fragment: it opens what the address holds, and the address follows the form a moment
 * behind, so that every state can be reloaded, bookmarked or sent.
 */
export function useCheckAddress() {
  const route = useRoute()
  const router = useRouter()
  const store = usePressureCheckStore()
  let pause: ReturnType<typeof setTimeout> | undefined

  const hashOf = (fragment: string) => (fragment ? `#${fragment}` : '')

  function write() {
    const fragment = store.fragment()
    if (fragment !== '') store.isLinkBroken = false
    if (route.name === 'check' && route.hash.slice(1) !== fragment) {
      void router.replace({ hash: hashOf(fragment) })
    }
  }

  /** The address as it will be in a moment, for whoever copies it at once. */
  function writtenAddress(): string {
    return `${location.origin}/${hashOf(store.fragment())}`
  }

  if (!import.meta.env.SSR) store.resume(route.hash)
  /** What a deep watcher would walk through at each move of the thumb is walked through once it rests. */
  const follow = effect(() => store.fragment(), {
    scheduler() {
      clearTimeout(pause)
      pause = setTimeout(() => {
        follow()
        write()
      }, delayMs)
    },
  })
  onBeforeUnmount(() => stop(follow))
  /** A link pasted over an open check is opened; the page's own link, without one, leaves the check as it is. */
  watch(
    () => route.hash,
    (hash) => {
      if (route.name !== 'check' || hash.slice(1) === store.fragment()) return
      if (hash === '') write()
      else store.open(hash)
    },
  )
  onMounted(write)
  /** Replacing the route now would call off the visit to the other page: only its place in the history is brought up. */
  onBeforeRouteLeave(() => {
    clearTimeout(pause)
    const current = router.resolve({ hash: hashOf(store.fragment()) }).fullPath
    history.replaceState({ ...history.state, current }, '', current)
  })

  return { writtenAddress }
}
