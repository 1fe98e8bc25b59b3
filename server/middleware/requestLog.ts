import { pino } from 'pino'
import { pinoHttp } from 'pino-http'
import type { Logger } from 'pino'
import type { RequestHandler } from 'express'

export function createLogger(level: string): Logger {
  return pino({
    level,
    redact: ['req.headers.cookie', 'req.headers.authorization', 'res.headers["set-cookie"]'],
  })
}

/** A line for each request, with its id. Where such lines are not wanted, failures are still noted by the error handler. */
export function requestLog(logger: Logger): RequestHandler {
  if (!logger.isLevelEnabled('info')) return (_request, _response, next) => next()
  return pinoHttp({
    logger,
    customLogLevel: (_request, response) => (response.statusCode >= 500 ? 'error' : 'info'),
  })
}
