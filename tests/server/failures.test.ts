import express from 'express'
import { createServer } from 'node:http'
import type { AddressInfo } from 'node:net'
import { describe, expect, it } from 'vitest'
import { healthSchema } from '#shared/contracts/health.ts'
import { errorHandler } from '../../server/middleware/errorHandler.ts'
import { createLogger } from '../../server/middleware/requestLog.ts'
import { readProblem } from '../support/requests.ts'
import { startServer } from '../support/server.ts'

describe('when something breaks on our side', () => {
  it('the answer tells nothing of the inside', async () => {
    const app = express()
    app.get('/', async () => {
      throw new Error('no such table: secrets')
    })
    app.use(errorHandler(createLogger('silent')))
    const server = createServer(app)
    await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve))
    const response = await fetch(`http://127.0.0.1:${(server.address() as AddressInfo).port}/`)
    expect(response.status).toBe(500)
    const problem = await readProblem(response)
    expect(problem.code).toBe('internal-error')
    expect(JSON.stringify(problem)).not.toContain('secrets')
    server.closeAllConnections()
    await new Promise((resolve) => server.close(resolve))
  })

  it('health says that the database is gone', async () => {
    const server = await startServer()
    server.database.close()
    const response = await fetch(`${server.address}/api/v1/health`)
    expect(response.status).toBe(503)
    expect(healthSchema.parse(await response.json())).toMatchObject({
      status: 'unavailable',
      database: 'unreachable',
    })
    await server.stop()
  })
})
