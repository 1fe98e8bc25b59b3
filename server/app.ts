import compression from 'compression'
import express from 'express'
import type { Express, RequestHandler } from 'express'
import { readBuiltClient } from './builtClient.ts'
import type { AppContext } from './context.ts'
import { clientFiles } from './middleware/clientFiles.ts'
import { errorHandler } from './middleware/errorHandler.ts'
import { requestLog } from './middleware/requestLog.ts'
import { securityHeaders } from './middleware/securityHeaders.ts'
import { makeProblem } from './problems.ts'
import { routes } from './routes/index.ts'
import { mountRoutes } from './routing/mountRoutes.ts'

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
  // Answers of the API are never stored, and the client's files carry marks of their own.
  app.set('etag', false)
  app.use(requestLog(context.logger))
  app.use(securityHeaders(context.config, client.inlineScriptHashes))
  const compress = compression()
  app.use((request, response, next) => {
    if (request.headers['accept-encoding'] === undefined) next()
    else compress(request, response, next)
  })

  app.use('/api', neverStore)
  app.use(mountRoutes(routes, context))
  app.use('/api', notFound)

  app.use(clientFiles(client))
  app.use(errorHandler(context.logger))
  return app
}
