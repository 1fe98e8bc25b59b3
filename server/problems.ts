import type { FieldError, Problem, ProblemCode } from '#shared/contracts/problems.ts'

const problemsByCode = {
  'bad-request': { status: 400, title: 'Bad request' },
  'bad-json': { status: 400, title: 'Bad JSON' },
  'not-found': { status: 404, title: 'Not found' },
  'method-not-allowed': { status: 405, title: 'Method not allowed' },
  'body-too-large': { status: 413, title: 'Body too large' },
  'wrong-content-type': { status: 415, title: 'Wrong content type' },
  'invalid-fields': { status: 422, title: 'Invalid fields' },
  'body-too-deep': { status: 422, title: 'Body too deep' },
  'too-many-requests': { status: 429, title: 'Too many requests' },
  'internal-error': { status: 500, title: 'Internal error' },
} as const satisfies Record<ProblemCode, { status: number; title: string }>

/** A refusal that the error handler turns into problem details. */
export class ProblemError extends Error {
  constructor(readonly problem: Problem) {
    super(problem.detail)
    this.name = 'ProblemError'
  }
}

export function makeProblem(code: ProblemCode, detail: string, errors?: FieldError[]): ProblemError {
  const { status, title } = problemsByCode[code]
  return new ProblemError({ type: 'about:blank', title, status, detail, code, ...(errors && { errors }) })
}
