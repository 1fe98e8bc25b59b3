import { createRouter } from 'vue-router'
import type { RouterHistory } from 'vue-router'
import PressureCheckView from '../views/check/PressureCheckView.vue'
import { accountPages } from './accountPages.ts'
import { fleetPages } from './fleetPages.ts'
import { guardPages } from './guards.ts'
import { mindUnreachedPages } from './unreachedPages.ts'

const SettingsView = () => import('../views/settings/SettingsView.vue')
const SourcesView = () => import('../views/sources/SourcesView.vue')

/** Fetches the pages ahead of a visit to them. */
export function fetchPages(): Promise<unknown>[] {
  return [SettingsView(), SourcesView()]
}

/** The check is in the first script, since it is what a visitor came for; every other page is fetched when opened. */
export function createPages(history: RouterHistory, prepareRooms: () => Promise<void>) {
  const router = createRouter({
    history,
    routes: [
      { path: '/', name: 'check', component: PressureCheckView },
      {
        path: '/settings',
        name: 'settings',
        component: SettingsView,
      },
      { path: '/sources', name: 'sources', component: SourcesView },
      ...fleetPages,
      ...accountPages,
      {
        path: '/:path(.*)*',
        name: 'not-found',
        component: () => import('../views/NotFoundView.vue'),
      },
    ],
    scrollBehavior: (to, from, saved) => saved ?? (to.path === from.path ? undefined : { top: 0 }),
  })
  guardPages(router, prepareRooms)
  mindUnreachedPages(router)
  return router
}
