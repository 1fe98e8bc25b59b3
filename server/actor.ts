import type { Role } from '#shared/contracts/permissions.ts'

/** Who asks, for which company, and as what: read anew with each request, so that a change holds at once. */
export interface Actor {
  accountId: string
  name: string
  email: string
  companyId: string
  membershipId: string
  roles: readonly Role[]
}

/** Somebody signed in whom no company may have active: enough for their own account and to choose a company. */
export interface SignedIn {
  accountId: string
  name: string
  email: string
}
