import { shallowRef } from 'vue'
import type { Router } from 'vue-router'

/** Where somebody wanted to go and its page could not be fetched; null where nothing is in the way. */
export const unreachedPage = shallowRef<string | null>(null)

const askWhetherThere = () =>
  fetch('/healthz', { cache: 'no-store' }).then(
    ({ ok }) => ok,
    () => false,
  )
const openAnew = (path: string) => location.assign(path)

/**
 * A page whose script does not come: without a signal it is said and can be tried again. Where the server answers, a
 * newer version stands there under other file names, and is opened whole.
 */
export function mindUnreachedPages(router: Router, isThere = askWhetherThere, open = openAnew) {
  router.onError(async (_error, to, from) => {
    // a first page that fails would only be opened again and again
    if (from.matched.length === 0) return
    if (await isThere()) open(to.fullPath)
    else unreachedPage.value = to.fullPath
  })
  router.afterEach((_to, _from, failure) => {
    if (!failure) unreachedPage.value = null
  })
}
