import { readConfig } from '../../server/config.ts'
import { createContext } from '../../server/context.ts'
import { openDatabase } from '../../server/db/client.ts'
import { createLogger } from '../../server/middleware/requestLog.ts'
import type { RunningServer } from './server.ts'

/** Writes into a data folder before a server process starts on it: companies, and people who are signed in. */
export async function prepareData<Result>(
  dataDir: string,
  prepare: (data: Pick<RunningServer, 'database' | 'context' | 'address'>) => Result,
): Promise<Result> {
  const database = openDatabase(dataDir)
  const config = readConfig({ NODE_ENV: 'test', PORT: '0', DATA_DIR: dataDir })
  const context = createContext(config, database, createLogger('silent'))
  try {
    return database.transact(() => prepare({ database, context, address: '' }))
  } finally {
    await context.passwords.close()
    database.close()
  }
}
