import { ConfigError } from '../config.ts'
import type { Config } from '../config.ts'
import { hasAnySetting, readSetting, writeSetting } from '../services/settings.ts'
import type { Database } from './client.ts'

const demoKey = 'demo'

export function holdsDemo(database: Database): boolean {
  return readSetting(database, demoKey) === 'true'
}

/**
 * Fills an empty database with the demo, on the own machine only. In production the demo, whose accounts anyone
 * knows, may not even be there.
 */
export function prepareDemo(database: Database, config: Config): void {
  if (config.isProduction) {
    if (holdsDemo(database)) {
      throw new ConfigError([
        'DATA_DIR holds the demo, which production refuses: give it a folder of its own',
      ])
    }
    return
  }
  if (!config.isLoopback || hasAnySetting(database)) return
  writeSetting(database, demoKey, 'true')
}
