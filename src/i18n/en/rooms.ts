import { accounts } from './accounts.ts'
import { kit } from './fleet.ts'

/** The words of the pages behind the sign-in: fetched with the first of them. */
export const rooms = { accounts, kit }
