import type { ErrorRequestHandler } from 'express'
import type { Logger } from 'pino'
import { isStorageFailure } from '../db/storageFailure.ts'
import { makeProblem, PassingProblemError, ProblemError } from '../problems.ts'

/** What Express and its body reader refuse by themselves, in our own codes. */
function translate(error: unknown): ProblemError {
  if (error instanceof ProblemError) return error
  const { status, type, limit } = (typeof error === 'object' && error !== null ? error : {}) as Record<
    string,
    unknown
  >
  if (type === 'entity.parse.failed') return makeProblem('bad-json', 'The body is not valid JSON.')
  if (status === 413) return makeProblem('body-too-large', `The body is larger than ${String(limit)} bytes.`)
  if (status === 415) return makeProblem('wrong-content-type', 'The body must be JSON in UTF-8.')
  if (typeof status === 'number' && status >= 400 && status < 500) {
    return makeProblem('bad-request', 'The request could not be read.')
  }
  if (isStorageFailure(error)) {
    return makeProblem(
      'storage-unavailable',
      'This could not be saved: the disk is full or may not be written.',
    )
  }
  return makeProblem('internal-error', 'Something went wrong on our side. It has been noted.')
}

export function errorHandler(logger: Logger): ErrorRequestHandler {
  return (error, request, response, next) => {
    const { problem } = translate(error)
    if (problem.status >= 500)
      logger.error(
        { err: error, method: request.method, path: request.path, id: request.id },
        'unexpected error',
      )
    if (response.headersSent) return next(error)
    if (error instanceof PassingProblemError) response.set('Retry-After', String(error.retryAfterS))
    response.status(problem.status).type('application/problem+json').send(JSON.stringify(problem))
  }
}
