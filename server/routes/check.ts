import { Router } from 'express'
import { answerCheck } from '#shared/check/answerCheck.ts'
import { checkRequestSchema } from '#shared/contracts/check.ts'
import type { AppContext } from '../app.ts'
import { checkRateLimit } from '../middleware/checkRateLimit.ts'
import { jsonBody } from '../middleware/jsonBody.ts'
import { methodNotAllowed } from '../middleware/methodNotAllowed.ts'
import { parseBody } from '../parseBody.ts'

export function checkRoutes({ config }: AppContext): Router {
  const router = Router()
  router
    .route('/')
    .post(checkRateLimit(config.checkRatePerMinute), ...jsonBody(), (request, response) => {
      response.json(answerCheck(parseBody(checkRequestSchema, request.body)))
    })
    .all(methodNotAllowed('POST'))
  return router
}
