/** Who may do what: the one table. The server enforces it; the client only hides what it would refuse. */
export const roles = ['blaster', 'estimator', 'owner', 'admin'] as const
export type Role = (typeof roles)[number]

export const permissions = {
  'see-rigs': ['blaster', 'estimator', 'owner', 'admin'],
  'pick-today': ['blaster', 'estimator', 'owner', 'admin'],
  'log-work': ['blaster', 'estimator', 'owner', 'admin'],
  'set-calibration-aside': ['owner'],
  'add-sites': ['blaster', 'estimator', 'owner'],
  'see-prices': ['estimator', 'owner'],
  'write-fleet': ['owner'],
  'manage-people': ['admin'],
  'read-audit': ['admin'],
  'export-data': ['owner', 'admin'],
} as const satisfies Record<string, readonly Role[]>

export type Permission = keyof typeof permissions

export function isPermission(access: string): access is Permission {
  return Object.hasOwn(permissions, access)
}

export function may(held: readonly Role[], permission: Permission): boolean {
  const allowed: readonly Role[] = permissions[permission]
  return held.some((role) => allowed.includes(role))
}
