import type { z } from 'zod'
import { fieldErrorCodes, maxFieldErrors } from '#shared/contracts/problems.ts'
import type { FieldError, FieldErrorCode } from '#shared/contracts/problems.ts'
import { makeProblem } from './problems.ts'

type Path = readonly PropertyKey[]

function toPointer(path: Path): string {
  return path.map((step) => `/${String(step).replaceAll('~', '~0').replaceAll('/', '~1')}`).join('')
}

function valueAt(body: unknown, path: Path): unknown {
  return path.reduce<unknown>((value, step) => {
    const isInside = typeof value === 'object' && value !== null && Object.hasOwn(value, step)
    return isInside ? (value as Record<PropertyKey, unknown>)[step] : undefined
  }, body)
}

function nameOf(path: Path): string {
  const name = path.findLast((step) => typeof step === 'string')
  if (name === undefined) return 'The body'
  return typeof path.at(-1) === 'number' ? `Each of ${String(name)}` : String(name)
}

/** Numbers must stay within their limits, lists and texts within their lengths: three codes for one kind of issue. */
function describeSize(issue: z.core.$ZodIssueTooBig | z.core.$ZodIssueTooSmall, path: Path) {
  const isOver = issue.code === 'too_big'
  const bound = isOver ? `at most ${issue.maximum}` : `at least ${issue.minimum}`
  if (issue.origin === 'array') {
    const code = isOver ? ('too-many' as const) : ('too-few' as const)
    return {
      code,
      message: `${nameOf(path)} may hold ${bound}.`.replace('may hold at least', 'must hold at least'),
    }
  }
  if (issue.origin === 'string') {
    return { code: 'too-long' as const, message: `${nameOf(path)} may have ${bound} characters.` }
  }
  const code = isOver ? ('too-big' as const) : ('too-small' as const)
  return { code, message: `${nameOf(path)} must be ${bound}.` }
}

function describeType(expected: string, value: unknown, path: Path): Omit<FieldError, 'path'> {
  const name = nameOf(path)
  if (value === undefined) return { code: 'required', message: `${name} is missing.` }
  if (typeof value === 'number' && !Number.isFinite(value)) {
    return { code: 'not-finite', message: `${name} must be a finite number.` }
  }
  const article = /^[aeiou]/.test(expected) ? 'an' : 'a'
  const words =
    { array: 'a list', object: 'an object', string: 'a text' }[expected] ?? `${article} ${expected}`
  const absent = value === null ? ' null is not the same as leaving it out.' : ''
  return { code: 'wrong-type', message: `${name} must be ${words}.${absent}` }
}

function isFieldErrorCode(code: unknown): code is FieldErrorCode {
  return fieldErrorCodes.some((known) => known === code)
}

function describeIssue(issue: z.core.$ZodIssue, body: unknown): FieldError[] {
  const path = toPointer(issue.path)
  switch (issue.code) {
    case 'unrecognized_keys':
      return issue.keys.map((key) => ({
        path: toPointer([...issue.path, key]),
        code: 'unknown-field',
        message: `${key.slice(0, 60)} is not a field here.`,
      }))
    case 'too_big':
    case 'too_small':
      return [{ path, ...describeSize(issue, issue.path) }]
    case 'invalid_type':
      return [{ path, ...describeType(issue.expected, valueAt(body, issue.path), issue.path) }]
    case 'invalid_value': {
      const choices = issue.values.map(String).join(', ')
      return [{ path, code: 'not-a-choice', message: `${nameOf(issue.path)} must be one of: ${choices}.` }]
    }
    case 'custom': {
      const code: unknown = issue.params?.['code']
      return [{ path, code: isFieldErrorCode(code) ? code : 'invalid', message: issue.message }]
    }
    default:
      return [{ path, code: 'invalid', message: `${nameOf(issue.path)} is not valid.` }]
  }
}

/** The body as the contract has it, or a refusal that names each wrong field. */
export function parseBody<Schema extends z.ZodType>(schema: Schema, body: unknown): z.output<Schema> {
  const parsed = schema.safeParse(body)
  if (parsed.success) return parsed.data
  const errors = parsed.error.issues.flatMap((issue) => describeIssue(issue, body))
  // Of ten thousand wrong elements the one thing to know is that there are too many.
  errors.sort((one, other) => Number(other.code === 'too-many') - Number(one.code === 'too-many'))
  const count = errors.length === 1 ? 'One field is' : `${errors.length} fields are`
  throw makeProblem('invalid-fields', `${count} not as they should be.`, errors.slice(0, maxFieldErrors))
}
