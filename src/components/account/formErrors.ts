import type { InjectionKey, Ref } from 'vue'
import { inject } from 'vue'
import { ApiProblem } from '../../api/request.ts'
import type { FieldError, Problem } from '#shared/contracts/problems.ts'

/** What a form says beside its fields, by their JSON pointer. */
export interface FormErrors {
  sentenceAt: (pointer: string) => string
  /** what is typed anew is not scolded for what stood there before */
  forget: (pointer: string) => void
  /** a field that shows its own errors */
  claim: (pointer: string) => () => void
  isBusy: Ref<boolean>
}

export const formErrorsKey: InjectionKey<FormErrors> = Symbol('formErrors')

export function useFormErrors(): FormErrors {
  const errors = inject(formErrorsKey)
  if (!errors) throw new Error('A field of a form stands outside of one.')
  return errors
}

/** The first error of each place, those under it included: `/roles/0` is said at `/roles`. */
export function errorAt(errors: readonly FieldError[], pointer: string): FieldError | undefined {
  return errors.find(({ path }) => path === pointer || path.startsWith(`${pointer}/`))
}

export function unclaimedErrors(errors: readonly FieldError[], claimed: readonly string[]): FieldError[] {
  return errors.filter(
    ({ path }) => !claimed.some((pointer) => path === pointer || path.startsWith(`${pointer}/`)),
  )
}

/** The codes that have a sentence of their own here; the others are said in general. */
const fieldSentences = [
  'required',
  'too-long',
  'too-short',
  'too-common',
  'too-few',
  'not-an-email',
  'not-a-time-zone',
  'not-a-currency',
  'name-in-use',
  'wrong-password',
] as const satisfies readonly FieldError['code'][]
export type FieldSentence = (typeof fieldSentences)[number] | 'password-too-long' | 'invalid'

const isOfPassword = (path: string) => /password$/i.test(path)

/** Which sentence says what is wrong with a field: an empty one lacks a name before it has a wrong form. */
export function fieldSentence(
  { code, path }: Pick<FieldError, 'code' | 'path'>,
  isBlank: boolean,
): FieldSentence {
  if (isBlank && code !== 'wrong-password') return 'required'
  if (code === 'too-long' && isOfPassword(path)) return 'password-too-long'
  return fieldSentences.find((known) => known === code) ?? 'invalid'
}

const refusalSentences = [
  'offline',
  'invalid-fields',
  'too-many-requests',
  'not-signed-in',
  'wrong-credentials',
  'forbidden',
  'link-not-good',
  'other-company',
  'version-conflict',
  'id-in-use',
  'too-many-records',
  'last-admin',
  'last-owner',
  'busy',
  'storage-unavailable',
  'not-found',
] as const satisfies readonly (Problem['code'] | 'offline')[]
export type RefusalSentence = (typeof refusalSentences)[number] | 'other'

/** Which sentence says why the whole was refused. */
export function refusalSentence(code: Problem['code'] | 'offline'): RefusalSentence {
  return refusalSentences.find((known) => known === code) ?? 'other'
}

/** The same of whatever a request threw. */
export function refusalOf(error: unknown): RefusalSentence {
  return error instanceof ApiProblem ? refusalSentence(error.code) : 'other'
}
