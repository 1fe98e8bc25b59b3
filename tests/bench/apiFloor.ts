/*
 * The floor of the API bench: Express with the session and the security headers of the real server, answering the
 * same objects by res.json and doing nothing else.
 */
import { readFileSync } from 'node:fs'
import type { AddressInfo } from 'node:net'
import express from 'express'
import { readConfig } from '../../server/config.ts'
import { createContext } from '../../server/context.ts'
import { openDatabase } from '../../server/db/client.ts'
import { createLogger } from '../../server/middleware/requestLog.ts'
import { securityHeaders } from '../../server/middleware/securityHeaders.ts'
import { sessionHandler } from '../../server/middleware/session.ts'

interface FloorAnswer {
  method: 'get' | 'post' | 'put'
  path: string
  answer: unknown
}

const config = readConfig(process.env)
const answers = JSON.parse(readFileSync(process.env['FLOOR_ANSWERS'] ?? '', 'utf8')) as FloorAnswer[]
const context = createContext(config, openDatabase(config.dataDir), createLogger(config.logLevel))

const app = express()
app.use(securityHeaders(config, []))
app.use(sessionHandler(context))
for (const { method, path, answer } of answers) {
  const readBody = method === 'get' ? [] : [express.json()]
  app[method](path, ...readBody, (_request, response) => void response.json(answer))
}
const server = app.listen(config.port, config.host, () => {
  console.log(`Sixteenth is at http://${config.host}:${(server.address() as AddressInfo).port}`)
})
