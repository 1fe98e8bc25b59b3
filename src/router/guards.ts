import type { RouteLocationNormalized, Router } from 'vue-router'
import type { Permission } from '#shared/contracts/permissions.ts'
import { useSessionStore } from '../stores/session.ts'
import { holdToken } from './heldToken.ts'
import { ownPath } from './ownPath.ts'

declare module 'vue-router' {
  interface RouteMeta {
    /** has words and queries of its own, which are fetched with it */
    isRoom?: boolean
    /** for whom it is; absent is everybody */
    access?: 'visitor' | 'signed-in' | Permission
    /** opened from a mail, with a token behind the # of its address */
    takesToken?: boolean
  }
}

/** Sends whom a page is not for to where they can go on. The server refuses by itself; this only spares the walk. */
async function admit({ meta: { access }, query, fullPath }: RouteLocationNormalized) {
  if (!access) return true
  const session = useSessionStore()
  // Without a signal nobody knows; the page says so itself.
  await session.load().catch(() => {})
  if (!session.isKnown) return true
  if (access === 'visitor') return session.session ? (ownPath(query.next) ?? '/') : true
  if (!session.session) return { name: 'sign-in', query: { next: fullPath }, replace: true }
  if (access === 'signed-in' || session.can(access)) return true
  return { name: 'not-yours', replace: true }
}

export function guardPages(router: Router, prepareRooms: () => Promise<void>) {
  router.beforeEach(holdToken)
  router.beforeEach(async (to) => {
    const [admission] = await Promise.all([admit(to), to.meta.isRoom ? prepareRooms() : undefined])
    return admission
  })
}
