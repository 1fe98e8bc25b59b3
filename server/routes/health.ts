import { Router } from 'express'
import type { Health } from '#shared/contracts/health.ts'
import type { AppContext } from '../app.ts'
import { methodNotAllowed } from '../middleware/methodNotAllowed.ts'

export function healthRoutes({ config, database }: AppContext): Router {
  const router = Router()
  router
    .route('/')
    .get((_request, response) => {
      const isReachable = database.isReachable()
      const health: Health = {
        status: isReachable ? 'ok' : 'unavailable',
        version: config.version,
        database: isReachable ? 'reachable' : 'unreachable',
      }
      response.status(isReachable ? 200 : 503).json(health)
    })
    .all(methodNotAllowed('GET', 'HEAD'))
  return router
}
