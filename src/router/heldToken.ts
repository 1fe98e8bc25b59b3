import { shallowRef } from 'vue'
import type { RouteLocationNormalized } from 'vue-router'

/** The token of a mail's link. It is kept here alone: never in the address, the history or the storage. */
export const heldToken = shallowRef<string | null>(null)

/** Takes the token out of the address as soon as it is read. */
export function holdToken(to: RouteLocationNormalized) {
  if (!to.meta.takesToken || to.hash.length < 2) return true
  heldToken.value = decodeToken(to.hash.slice(1))
  history.replaceState(history.state, '', to.path)
  return { path: to.path, replace: true }
}

function decodeToken(text: string): string {
  try {
    return decodeURIComponent(text)
  } catch {
    return text
  }
}
