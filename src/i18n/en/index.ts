import { common } from './common.ts'
import { fields } from './fields.ts'
import { results } from './results.ts'
import { pages } from './pages.ts'

export const en = { ...common, fields, results, pages }

type Worded<T> = { [K in keyof T]: T[K] extends string ? string : Worded<T[K]> }
/** What every language has to say. */
export type Messages = Worded<typeof en>
