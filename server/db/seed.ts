import { ConfigError } from '../config.ts'
import type { Config } from '../config.ts'
import { seedDemo } from '../demo/seedDemo.ts'
import { readSetting, writeSetting } from '../services/settings.ts'
import type { Database } from './client.ts'
import { companies } from './schema/index.ts'

const demoKey = 'demo'

export function holdsDemo(database: Database): boolean {
  return readSetting(database, demoKey) === 'true'
}

function holdsCompanies({ queries }: Database): boolean {
  return queries.select({ id: companies.id }).from(companies).limit(1).get() !== undefined
}

/**
 * Fills an empty database with the demo, on the own machine only. In production the demo, whose accounts anyone
 * knows, may not even be there.
 */
export function prepareDemo(database: Database, config: Config, now = new Date()): void {
  if (config.isProduction) {
    if (holdsDemo(database)) {
      throw new ConfigError([
        'DATA_DIR holds the demo, which production refuses: give it a folder of its own',
      ])
    }
    return
  }
  if (!config.isLoopback || holdsCompanies(database) || holdsDemo(database)) return
  database.transact(() => {
    writeSetting(database, demoKey, 'true')
    seedDemo(database, now)
  })
}
