import { common } from './common.ts'
import { fields } from './fields.ts'
import { results } from './results.ts'
import { pages } from './pages.ts'

/** What a visitor's first page may say. */
export const firstWords = { ...common, fields, results, pages }
