import type { Messages } from '../en/index.ts'
import { accounts } from './accounts.ts'
import { common } from './common.ts'
import { fields } from './fields.ts'
import { kit } from './fleet.ts'
import { results } from './results.ts'
import { pages } from './pages.ts'

export const es: Messages = { ...common, fields, results, pages, accounts, kit }
