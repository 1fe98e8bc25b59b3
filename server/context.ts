import { randomBytes } from 'node:crypto'
import type { Logger } from 'pino'
import type { Config } from './config.ts'
import type { Database } from './db/client.ts'
import { readSetting, writeSetting } from './services/settings.ts'
import { createPasswordHasher } from './services/passwords.ts'
import type { PasswordHasher } from './services/passwords.ts'

/** What every route and service works with. */
export interface AppContext {
  config: Config
  database: Database
  logger: Logger
  /** where people reach this installation, without a closing slash: what links in mails start with */
  publicUrl: string
  sessionSecret: string
  passwords: PasswordHasher
  now: () => Date
  /** tells the mailer that something waits; the mailer sets it when it runs */
  mailIsWaiting: () => void
}

const secretKey = 'session-secret'

/** Outside production an installation makes its own secret once, so that a restart signs nobody out. */
function findSessionSecret(config: Config, database: Database): string {
  if (config.sessionSecret) return config.sessionSecret
  const kept = readSetting(database, secretKey)
  if (kept) return kept
  const made = randomBytes(32).toString('base64url')
  writeSetting(database, secretKey, made)
  return made
}

function addressOf({ host, port }: Config): string {
  return `http://${host.includes(':') ? `[${host}]` : host}:${port}`
}

export function createContext(
  config: Config,
  database: Database,
  logger: Logger,
  overrides: Partial<Pick<AppContext, 'now'>> = {},
): AppContext {
  return {
    config,
    database,
    logger,
    publicUrl: (config.publicUrl ?? addressOf(config)).replace(/\/+$/, ''),
    sessionSecret: findSessionSecret(config, database),
    passwords: createPasswordHasher(config.passwordCost),
    now: () => new Date(),
    mailIsWaiting: () => {},
    ...overrides,
  }
}
