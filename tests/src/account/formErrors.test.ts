import { describe, expect, test } from 'vitest'
import { fieldErrorCodes, problemCodes } from '#shared/contracts/problems.ts'
import { ApiProblem } from '../../../src/api/request.ts'
import {
  errorAt,
  fieldSentence,
  refusalOf,
  refusalSentence,
  unclaimedErrors,
} from '../../../src/components/account/formErrors.ts'
import { en } from '../../../src/i18n/en/index.ts'
import { es } from '../../../src/i18n/es/index.ts'

const error = (path: string, code: (typeof fieldErrorCodes)[number] = 'invalid') => ({
  path,
  code,
  message: 'As the server says it.',
})

describe('what a form says beside its fields', () => {
  test('an error stands at its own field or at the list it is in', () => {
    const errors = [error('/company/name'), error('/roles/0'), error('/name')]
    expect(errorAt(errors, '/company/name')?.path).toBe('/company/name')
    expect(errorAt(errors, '/roles')?.path).toBe('/roles/0')
    expect(errorAt(errors, '/name')?.path).toBe('/name')
    expect(errorAt(errors, '/nam')).toBeUndefined()
    expect(errorAt(errors, '/password')).toBeUndefined()
  })

  test('what no field of the form is to blame for is known', () => {
    const errors = [error('/email'), error('/id'), error('/names')]
    expect(unclaimedErrors(errors, ['/email', '/name']).map(({ path }) => path)).toEqual(['/id', '/names'])
    expect(unclaimedErrors(errors, ['/email', '/id', '/names'])).toEqual([])
  })

  test('a blank field lacks something; it is not too short or malformed', () => {
    expect(fieldSentence(error('/password', 'too-short'), true)).toBe('required')
    expect(fieldSentence(error('/email', 'not-an-email'), true)).toBe('required')
    expect(fieldSentence(error('/password', 'too-short'), false)).toBe('too-short')
    expect(fieldSentence(error('/currentPassword', 'wrong-password'), true)).toBe('wrong-password')
  })

  test('a company’s long name is not told what a password may have', () => {
    expect(fieldSentence(error('/company/name', 'too-long'), false)).toBe('too-long')
    expect(fieldSentence(error('/newPassword', 'too-long'), false)).toBe('password-too-long')
    expect(fieldSentence(error('/password', 'too-long'), false)).toBe('password-too-long')
  })

  test('each code of a field and of a whole has a sentence in both languages', () => {
    for (const { accounts } of [en, es]) {
      for (const code of fieldErrorCodes)
        for (const path of ['/name', '/password'])
          expect(accounts.problems[fieldSentence(error(path, code), false)]).toBeTruthy()
      for (const code of [...problemCodes, 'offline'] as const)
        expect(accounts.refusals[refusalSentence(code)]).toBeTruthy()
    }
  })

  test('an error that is not the server’s is not blamed on the network', () => {
    expect(refusalOf(new TypeError('broken'))).toBe('other')
    expect(refusalOf(new ApiProblem('offline', null))).toBe('offline')
    expect(refusalOf(new ApiProblem('last-admin', null))).toBe('last-admin')
  })
})
