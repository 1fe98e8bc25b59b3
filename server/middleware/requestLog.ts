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

export function requestLog(logger: Logger): RequestHandler {
  return pinoHttp({
    logger,
    customLogLevel: (_request, response) => (response.statusCode >= 500 ? 'error' : 'info'),
  })
}
