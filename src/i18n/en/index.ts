import { firstWords } from './firstWords.ts'
import { rooms } from './rooms.ts'

/** All of it: the application fetches the two parts apart, so this is for types and tests alone. */
export const en = { ...firstWords, ...rooms }

type Worded<T> = { [K in keyof T]: T[K] extends string ? string : Worded<T[K]> }
/** What every language has to say. */
export type Messages = Worded<typeof en>
