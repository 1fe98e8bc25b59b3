import type { RouteRecordRaw } from 'vue-router'

export const fleetPages: RouteRecordRaw[] = [
  {
    path: '/rigs',
    name: 'rigs',
    component: () => import('../views/rigs/RigListView.vue'),
    meta: { isRoom: true },
  },
  {
    path: '/rigs/new',
    name: 'rig-new',
    component: () => import('../views/rigs/RigEditorView.vue'),
    meta: { isRoom: true, access: 'write-fleet' },
  },
  {
    path: '/rigs/:rigId',
    name: 'rig',
    component: () => import('../views/rigs/RigProfileView.vue'),
    props: true,
    meta: { isRoom: true, access: 'see-rigs' },
  },
  {
    path: '/rigs/:rigId/edit',
    name: 'rig-edit',
    component: () => import('../views/rigs/RigEditorView.vue'),
    props: true,
    meta: { isRoom: true, access: 'write-fleet' },
  },
  {
    path: '/fleet/compressors',
    name: 'compressors',
    component: () => import('../views/fleet/CompressorListView.vue'),
    meta: { isRoom: true, access: 'see-rigs' },
  },
  {
    path: '/fleet/compressors/new',
    name: 'compressor-new',
    component: () => import('../views/fleet/CompressorEditorView.vue'),
    meta: { isRoom: true, access: 'write-fleet' },
  },
  {
    path: '/fleet/compressors/:compressorId',
    name: 'compressor-edit',
    component: () => import('../views/fleet/CompressorEditorView.vue'),
    props: true,
    meta: { isRoom: true, access: 'write-fleet' },
  },
  {
    path: '/fleet/sites',
    name: 'sites',
    component: () => import('../views/fleet/SiteListView.vue'),
    meta: { isRoom: true, access: 'see-rigs' },
  },
  {
    path: '/fleet/sites/new',
    name: 'site-new',
    component: () => import('../views/fleet/SiteEditorView.vue'),
    meta: { isRoom: true, access: 'add-sites' },
  },
  {
    path: '/fleet/sites/:siteId',
    name: 'site-edit',
    component: () => import('../views/fleet/SiteEditorView.vue'),
    props: true,
    meta: { isRoom: true, access: 'write-fleet' },
  },
  {
    path: '/fleet/import',
    name: 'fleet-files',
    component: () => import('../views/fleet/FleetFilesView.vue'),
    meta: { isRoom: true, access: 'signed-in' },
  },
]
