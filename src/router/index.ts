import { createRouter } from 'vue-router'
import type { RouterHistory } from 'vue-router'
import PressureCheckView from '../views/check/PressureCheckView.vue'

/** The check is in the first script, since it is what a visitor came for; every other page is fetched when opened. */
export function createPages(history: RouterHistory) {
  return createRouter({
    history,
    routes: [
      { path: '/', name: 'check', component: PressureCheckView },
      {
        path: '/settings',
        name: 'settings',
        component: () => import('../views/settings/SettingsView.vue'),
      },
      { path: '/sources', name: 'sources', component: () => import('../views/sources/SourcesView.vue') },
      {
        path: '/:path(.*)*',
        name: 'not-found',
        component: () => import('../views/NotFoundView.vue'),
      },
    ],
    scrollBehavior: (to, from, saved) => saved ?? (to.path === from.path ? undefined : { top: 0 }),
  })
}
