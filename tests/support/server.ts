import { mkdtempSync, rmSync } from 'node:fs'
import { createServer } from 'node:http'
import type { AddressInfo } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { createApp } from '../../server/app.ts'
import { readConfig } from '../../server/config.ts'
import type { Config } from '../../server/config.ts'
import { openDatabase } from '../../server/db/client.ts'
import type { Database } from '../../server/db/client.ts'
import { createLogger } from '../../server/middleware/requestLog.ts'

export interface RunningServer {
  address: string
  database: Database
  stop: () => Promise<void>
}

export function makeDataDir(): string {
  return mkdtempSync(join(tmpdir(), 'sixteenth-test-'))
}

/** The real server on a free port, with a real database of its own. */
export async function startServer(overrides: Partial<Config> = {}): Promise<RunningServer> {
  const dataDir = makeDataDir()
  const environment = { NODE_ENV: 'test', PORT: '0', DATA_DIR: dataDir, CHECK_RATE_PER_MINUTE: 'off' }
  const config = { ...readConfig(environment), ...overrides }
  const database = openDatabase(config.dataDir)
  const server = createServer(createApp({ config, database, logger: createLogger(config.logLevel) }))
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve))
  const { port } = server.address() as AddressInfo
  return {
    database,
    address: `http://127.0.0.1:${port}`,
    async stop() {
      server.closeAllConnections()
      await new Promise((resolve) => server.close(resolve))
      database.close()
      rmSync(dataDir, { recursive: true, force: true })
    },
  }
}
