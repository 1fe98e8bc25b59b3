import type { Permission } from '#shared/contracts/permissions.ts'

export interface NavigationPage {
  name: 'check' | 'rigs' | 'sources' | 'settings' | 'people' | 'audit' | 'account' | 'more' | 'sign-in'
  path: string
  icon: string
  /** other addresses that belong to it */
  also?: readonly string[]
  /** the bar of a phone holds five; a rail has room */
  isOn?: 'phone' | 'desk'
  isFor?: 'visitor' | 'signed-in' | Permission
}

/** In this order. What comes with a session stands last, or in the place of the sign-in: nothing moves for it. */
export const navigationPages: readonly NavigationPage[] = [
  { name: 'check', path: '/', icon: 'M4 17a8 8 0 1 1 16 0M12 17l4-6' },
  {
    name: 'rigs',
    path: '/rigs',
    icon: 'M3 6h9v10H3zM12 10h4l4 3v3h-8M6.5 19.5a1.7 1.7 0 1 0 0-.1M16.5 19.5a1.7 1.7 0 1 0 0-.1',
    also: ['/fleet'],
  },
  { name: 'sources', path: '/sources', icon: 'M6 4h12v16H6zM9 9h6M9 13h6' },
  { name: 'settings', path: '/settings', icon: 'M4 8h10M18 8h2M4 16h2M10 16h10M16 6v4M8 14v4' },
  {
    name: 'people',
    path: '/people',
    icon: 'M9 11a3 3 0 1 0 0-6a3 3 0 0 0 0 6M3 19a6 6 0 0 1 12 0M16 11a2.6 2.6 0 1 0-1-5M17 14a5 5 0 0 1 4 5',
    isOn: 'desk',
    isFor: 'manage-people',
  },
  {
    name: 'audit',
    path: '/audit',
    icon: 'M12 5a7.5 7.5 0 1 1-7 4.8M4.5 5v5h5M12 9v4l3 2',
    isOn: 'desk',
    isFor: 'read-audit',
  },
  {
    name: 'more',
    path: '/more',
    icon: 'M5 7h14M5 12h14M5 17h14',
    also: ['/account', '/company', '/people', '/audit', '/mail'],
    isOn: 'phone',
    isFor: 'signed-in',
  },
  {
    name: 'account',
    path: '/account',
    icon: 'M12 12a4 4 0 1 0 0-8a4 4 0 0 0 0 8M4.5 20a7.5 7.5 0 0 1 15 0',
    also: ['/company'],
    isOn: 'desk',
    isFor: 'signed-in',
  },
  {
    name: 'sign-in',
    path: '/sign-in',
    icon: 'M12 12a4 4 0 1 0 0-8a4 4 0 0 0 0 8M4.5 20a7.5 7.5 0 0 1 15 0',
    also: ['/sign-up', '/forgotten-password', '/confirm', '/reset-password', '/invitation'],
    isFor: 'visitor',
  },
]

/** Whether an address is that of a page, or of what is under it. */
export function isWithin({ path, also = [] }: NavigationPage, address: string): boolean {
  return [path, ...also].some((each) => address === each || (each !== '/' && address.startsWith(`${each}/`)))
}
