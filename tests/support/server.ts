import { mkdtempSync, rmSync } from 'node:fs'
import { createServer } from 'node:http'
import type { AddressInfo } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { createApp } from '../../server/app.ts'
import { readConfig } from '../../server/config.ts'
import type { Config } from '../../server/config.ts'
import { createContext } from '../../server/context.ts'
import type { AppContext } from '../../server/context.ts'
import { openDatabase } from '../../server/db/client.ts'
import type { Database } from '../../server/db/client.ts'
import { createLogger } from '../../server/middleware/requestLog.ts'

export interface RunningServer {
  address: string
  database: Database
  context: AppContext
  stop: () => Promise<void>
}

export function makeDataDir(): string {
  return mkdtempSync(join(tmpdir(), 'sixteenth-test-'))
}

/** The real server on a free port, with a real database of its own. */
export async function startServer(
  overrides: Partial<Config> = {},
  now: () => Date = () => new Date(),
): Promise<RunningServer> {
  const dataDir = makeDataDir()
  const environment = { NODE_ENV: 'test', PORT: '0', DATA_DIR: dataDir, CHECK_RATE_PER_MINUTE: 'off' }
  // The least bcrypt takes: the cost of the real one has a test of its own.
  const config = { ...readConfig(environment), passwordCost: 4, ...overrides }
  const database = openDatabase(config.dataDir)
  const server = createServer()
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve))
  const { port } = server.address() as AddressInfo
  const address = `http://127.0.0.1:${port}`
  const context = createContext({ ...config, port }, database, createLogger(config.logLevel), { now })
  server.on('request', createApp(context))
  return {
    database,
    context,
    address,
    async stop() {
      server.closeAllConnections()
      await new Promise((resolve) => server.close(resolve))
      await context.passwords.close()
      database.close()
      rmSync(dataDir, { recursive: true, force: true })
    },
  }
}
