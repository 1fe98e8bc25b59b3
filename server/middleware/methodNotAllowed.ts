import type { RequestHandler } from 'express'
import { makeProblem } from '../problems.ts'

/** Stands last on a route that exists, for the methods it does not have. */
export function methodNotAllowed(...allowed: string[]): RequestHandler {
  return (request, response, next) => {
    response.set('Allow', allowed.join(', '))
    next(
      makeProblem(
        'method-not-allowed',
        `${request.method} is not possible here, only ${allowed.join(', ')}.`,
      ),
    )
  }
}
