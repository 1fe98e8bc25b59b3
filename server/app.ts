import compression from 'compression'
import express from 'express'
import type { Express, RequestHandler } from 'express'
import type { Logger } from 'pino'
import { readBuiltClient } from './builtClient.ts'
import type { Config } from './config.ts'
import type { Database } from './db/client.ts'
import { clientFiles } from './middleware/clientFiles.ts'
import { errorHandler } from './middleware/errorHandler.ts'
import { requestLog } from './middleware/requestLog.ts'
import { securityHeaders } from './middleware/securityHeaders.ts'
import { makeProblem } from './problems.ts'
import { checkRoutes } from './routes/check.ts'
import { healthRoutes } from './routes/health.ts'
import { openapiRoutes } from './routes/openapi.ts'

export interface AppContext {
  config: Config
  database: Database
  logger: Logger
}

const notFound: RequestHandler = (_request, _response, next) =>
  next(makeProblem('not-found', 'There is nothing at this address.'))

const neverStore: RequestHandler = (_request, response, next) => {
  response.set('Cache-Control', 'no-store')
  next()
}

export function createApp(context: AppContext): Express {
  const client = readBuiltClient(context.config.clientDir)
  const app = express()
  app.set('trust proxy', context.config.trustProxy)
  app.use(requestLog(context.logger))
  app.use(securityHeaders(context.config, client.inlineScriptHashes))
  app.use(compression())

  app.use('/api', neverStore)
  app.use('/api/v1/health', healthRoutes(context))
  app.use('/api/v1/check', checkRoutes(context))
  app.use('/api/openapi.json', openapiRoutes(context))
  app.use('/api', notFound)

  app.use(clientFiles(client))
  app.use(errorHandler(context.logger))
  return app
}
