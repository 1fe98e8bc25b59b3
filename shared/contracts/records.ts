import { z } from 'zod'
import { recordLimits } from './limits.ts'
import type { Range } from './limits.ts'
import type { FieldErrorCode } from './problems.ts'

/** What the contracts of saved records share. */

export const within = ({ min, max }: Range) => z.number().min(min).max(max)

/** Made by whoever creates the record, so that the same post twice is one record. */
export const idSchema = z.uuid().overwrite((id) => id.toLowerCase())
export const versionSchema = z.number().int().min(1).max(1_000_000_000)

/** A rule between fields reports its own code of the closed list beside a sentence. */
export function ruleBroken(code: FieldErrorCode, message: string, path: PropertyKey[]) {
  return { code: 'custom' as const, message, path, params: { code } }
}

const controlCharacters = /\p{Cc}|[\u2028\u2029\ufeff\u202a-\u202e\u2066-\u2069]/u
/** halves of characters, which no encoding can carry */
const loneSurrogate = /\p{Cs}/u
const isWholeText = (text: string) => !loneSurrogate.test(text) && !controlCharacters.test(text)

/** One line of text that says something. */
export const lineOfText = (most: number) =>
  z
    .string()
    .max(most)
    .refine(isWholeText, { error: 'This may not hold control characters.', params: { code: 'invalid' } })
    .overwrite((text) => text.trim().normalize('NFC'))
    .refine((text) => text.length > 0, { error: 'This may not be blank.', params: { code: 'required' } })

export const nameSchema = lineOfText(recordLimits.name)

/** A day on somebody's calendar, such as 2026-05-03. */
export const localDateSchema = z.iso
  .date({ error: 'This must be a date such as 2026-05-03.', abort: true })
  .refine((date) => date >= '1990-01-01' && date <= '2199-12-31', {
    error: 'This must be a date from 1990 to 2199.',
    params: { code: 'invalid' },
  })

/** When something was done, with the offset of the clock it was read from, such as 2026-05-03T14:10:00-06:00. */
export const instantSchema = z.iso
  .datetime({
    offset: true,
    error: 'This must be a time with its offset, such as 2026-05-03T14:10:00-06:00.',
    abort: true,
  })
  .refine((text) => text >= '1990' && text < '2200', {
    error: 'This must be a time from 1990 to 2199.',
    params: { code: 'invalid' },
  })

/** An address to write to. Its case says nothing, so it is kept small. */
export const emailSchema = z
  .string()
  .max(recordLimits.email)
  .overwrite((text) => text.trim().toLowerCase())
  .refine((text) => /^[^\s@"<>(),:;[\]\\]+@[a-z0-9.-]+\.[a-z]{2,}$/.test(text), {
    error: 'This must be an e-mail address.',
    params: { code: 'not-an-email' },
  })

export const languageSchema = z.enum(['en', 'es'])

/** An answer that is a page of a list; a cursor where there is more. */
export const pageOf = <Item extends z.ZodType>(item: Item) =>
  z.strictObject({ items: z.array(item), nextCursor: z.string().nullable() })

export const pageQuerySchema = z.strictObject({
  cursor: z.string().min(1).max(400).optional(),
  limit: z.coerce.number().int().min(1).max(recordLimits.pageSize).optional(),
})

/** A change names the version it was made on. */
export const versionedSchema = z.strictObject({ version: versionSchema })

/** A deletion has no body: its version stands in the address. */
export const versionQuerySchema = z.strictObject({ version: z.coerce.number().pipe(versionSchema) })
