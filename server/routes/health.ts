import { healthSchema } from '#shared/contracts/health.ts'
import type { Health } from '#shared/contracts/health.ts'
import type { AppContext } from '../context.ts'
import { defineRoute } from '../routing/route.ts'

function readHealth({ config, database }: AppContext): Health {
  const isReachable = database.isReachable()
  return {
    status: isReachable ? 'ok' : 'unavailable',
    version: config.version,
    database: isReachable ? 'reachable' : 'unreachable',
  }
}

function readinessRoute(path: string, operationId: string) {
  return defineRoute({
    method: 'get',
    path,
    access: 'anyone',
    operationId,
    summary: 'Whether the service and its database are there',
    answer: healthSchema,
    handle: ({ context, response }) => {
      const health = readHealth(context)
      if (health.status !== 'ok') response.status(503).json(health)
      return health
    },
  })
}

export const healthRoutes = [
  readinessRoute('/api/v1/health', 'readHealth'),
  readinessRoute('/readyz', 'readReadiness'),
  defineRoute({
    method: 'get',
    path: '/healthz',
    access: 'anyone',
    operationId: 'readLiveness',
    summary: 'Whether the process answers, whatever its database does',
    file: 'text/plain',
    handle: ({ response }) => response.type('text/plain').send('ok'),
  }),
]
