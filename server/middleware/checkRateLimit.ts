import { rateLimit } from 'express-rate-limit'
import type { RequestHandler } from 'express'
import { makeProblem } from '../problems.ts'

export function checkRateLimit(perMinute: number | null): RequestHandler {
  if (perMinute === null) return (_request, _response, next) => next()
  return rateLimit({
    windowMs: 60_000,
    limit: perMinute,
    standardHeaders: 'draft-8',
    legacyHeaders: false,
    // Whose word to take for an address is decided by TRUST_PROXY alone.
    validate: { xForwardedForHeader: false },
    handler: (_request, _response, next) =>
      next(
        makeProblem(
          'too-many-requests',
          `At most ${perMinute} checks a minute from one address. Wait a moment.`,
        ),
      ),
  })
}
