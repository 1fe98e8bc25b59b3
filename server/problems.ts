import type { FieldError, FieldErrorCode, Problem, ProblemCode } from '#shared/contracts/problems.ts'

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
  'not-signed-in': { status: 401, title: 'Not signed in' },
  'wrong-credentials': { status: 401, title: 'Wrong e-mail or password' },
  forbidden: { status: 403, title: 'Not allowed' },
  'cross-origin': { status: 403, title: 'From another site' },
  'link-not-good': { status: 410, title: 'Link no longer good' },
  'other-company': { status: 409, title: 'Another company' },
  'version-conflict': { status: 409, title: 'Changed meanwhile' },
  'id-in-use': { status: 409, title: 'Id in use' },
  'in-use': { status: 409, title: 'In use' },
  'too-many-records': { status: 409, title: 'Too many records' },
  'last-admin': { status: 409, title: 'Last admin' },
  'last-owner': { status: 409, title: 'Last owner' },
  busy: { status: 503, title: 'Busy' },
  'storage-unavailable': { status: 503, title: 'Storage unavailable' },
  'internal-error': { status: 500, title: 'Internal error' },
} as const satisfies Record<ProblemCode, { status: number; title: string }>

/** A refusal that the error handler turns into problem details. */
export class ProblemError extends Error {
  constructor(readonly problem: Problem) {
    super(problem.detail)
    this.name = 'ProblemError'
  }
}

export function statusOf(code: ProblemCode): number {
  return problemsByCode[code].status
}

export function makeProblem(code: ProblemCode, detail: string, errors?: FieldError[]): ProblemError {
  const { status, title } = problemsByCode[code]
  return new ProblemError({ type: 'about:blank', title, status, detail, code, ...(errors && { errors }) })
}

/** One field of the body is wrong in a way that only the database or the session can tell. */
export function makeFieldProblem(path: string, code: FieldErrorCode, message: string): ProblemError {
  return makeProblem('invalid-fields', 'One field is not as it should be.', [{ path, code, message }])
}

/** Somebody else changed the record meanwhile: the refusal carries how it stands now. */
export function makeVersionConflict(stored: unknown): ProblemError {
  const error = makeProblem('version-conflict', 'Somebody else has changed this meanwhile.')
  error.problem.stored = stored
  return error
}

/** A refusal that passes, and when to come again. */
export class PassingProblemError extends ProblemError {
  constructor(
    refusal: ProblemError,
    readonly retryAfterS: number,
  ) {
    super(refusal.problem)
  }
}

export function makePassingProblem(
  code: Extract<ProblemCode, 'busy' | 'too-many-requests'>,
  detail: string,
  retryAfterS: number,
): PassingProblemError {
  return new PassingProblemError(makeProblem(code, detail), Math.max(1, Math.ceil(retryAfterS)))
}
