import type { RouteRecordRaw } from 'vue-router'

/** Getting in, and what whoever is in does with their account, company and people. */
export const accountPages: RouteRecordRaw[] = [
  {
    path: '/sign-up',
    name: 'sign-up',
    component: () => import('../views/account/SignUpView.vue'),
    meta: { isRoom: true, access: 'visitor' },
  },
  {
    path: '/confirm',
    name: 'confirm',
    component: () => import('../views/account/ConfirmView.vue'),
    meta: { isRoom: true, takesToken: true },
  },
  {
    path: '/sign-in',
    name: 'sign-in',
    component: () => import('../views/account/SignInView.vue'),
    meta: { isRoom: true, access: 'visitor' },
  },
  {
    path: '/forgotten-password',
    name: 'forgotten-password',
    component: () => import('../views/account/ForgottenPasswordView.vue'),
    meta: { isRoom: true },
  },
  {
    path: '/reset-password',
    name: 'reset-password',
    component: () => import('../views/account/ResetPasswordView.vue'),
    meta: { isRoom: true, takesToken: true },
  },
  {
    path: '/invitation',
    name: 'invitation',
    component: () => import('../views/account/InvitationView.vue'),
    meta: { isRoom: true, takesToken: true },
  },
  {
    path: '/more',
    name: 'more',
    component: () => import('../views/account/MoreView.vue'),
    meta: { isRoom: true, access: 'signed-in' },
  },
  {
    path: '/account',
    name: 'account',
    component: () => import('../views/account/AccountView.vue'),
    meta: { isRoom: true, access: 'signed-in' },
  },
  {
    path: '/company',
    name: 'company',
    component: () => import('../views/account/CompanyView.vue'),
    meta: { isRoom: true, access: 'write-fleet' },
  },
  {
    path: '/people',
    name: 'people',
    component: () => import('../views/people/PeopleView.vue'),
    meta: { isRoom: true, access: 'manage-people' },
  },
  {
    path: '/audit',
    name: 'audit',
    component: () => import('../views/audit/AuditView.vue'),
    meta: { isRoom: true, access: 'read-audit' },
  },
  {
    path: '/mail',
    name: 'mail',
    component: () => import('../views/mail/MailListView.vue'),
    meta: { isRoom: true },
  },
  {
    path: '/not-yours',
    name: 'not-yours',
    component: () => import('../views/account/NotYoursView.vue'),
    meta: { isRoom: true },
  },
]
