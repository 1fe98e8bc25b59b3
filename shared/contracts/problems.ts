import { z } from 'zod'

/** What can be wrong with a request as a whole. */
export const problemCodes = [
  'bad-request',
  'bad-json',
  'not-found',
  'method-not-allowed',
  'body-too-large',
  'wrong-content-type',
  'invalid-fields',
  'body-too-deep',
  'too-many-requests',
  'not-signed-in',
  'wrong-credentials',
  'forbidden',
  'cross-origin',
  'link-not-good',
  'other-company',
  'version-conflict',
  'id-in-use',
  'in-use',
  'too-many-records',
  'last-admin',
  'last-owner',
  'busy',
  'storage-unavailable',
  'internal-error',
] as const

/** What can be wrong with one field of it. */
export const fieldErrorCodes = [
  'required',
  'unknown-field',
  'wrong-type',
  'not-finite',
  'too-small',
  'too-big',
  'too-few',
  'too-many',
  'too-long',
  'not-a-choice',
  'one-of-two',
  'unload-too-near-set',
  'curve-pressure-not-rising',
  'curve-free-air-rising',
  'bore-now-under-new',
  'number-and-bore-differ',
  'measured-in-part',
  'dates-reversed',
  'not-an-email',
  'too-short',
  'too-common',
  'not-a-time-zone',
  'not-a-currency',
  'unknown-reference',
  'name-in-use',
  'wrong-password',
  'not-a-number',
  'unknown-column',
  'invalid',
] as const

export type ProblemCode = (typeof problemCodes)[number]
export type FieldErrorCode = (typeof fieldErrorCodes)[number]

/** More than these would only repeat themselves. */
export const maxFieldErrors = 20

export const fieldErrorSchema = z.strictObject({
  /** a JSON pointer into the body, such as /outlets/0/nozzle/boreMm */
  path: z.string(),
  code: z.enum(fieldErrorCodes),
  message: z.string(),
})

/** RFC 9457 problem details, with a code to act on and one entry per field. */
export const problemSchema = z.strictObject({
  type: z.string(),
  title: z.string(),
  status: z.number().int(),
  detail: z.string(),
  code: z.enum(problemCodes),
  errors: z.array(fieldErrorSchema).max(maxFieldErrors).optional(),
  /** where a record was changed by somebody else meanwhile: how it stands now */
  stored: z.unknown().optional(),
})

export type FieldError = z.infer<typeof fieldErrorSchema>
export type Problem = z.infer<typeof problemSchema>
