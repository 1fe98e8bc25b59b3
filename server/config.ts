import { readFileSync } from 'node:fs'
import { isIP } from 'node:net'
import { resolve } from 'node:path'
import { fileURLToPath } from 'node:url'
import { z } from 'zod'

export const projectRoot = fileURLToPath(new URL('..', import.meta.url))

const minSecretLength = 32
const packageSchema = z.object({ version: z.string() })

const isAddressOrRange = (text: string) =>
  /^[^/]+(\/\d{1,3})?$/.test(text) && isIP(text.split('/')[0] ?? '') > 0

/** How many proxies to trust, or which: Express decides from it whose address a request carries. */
const trustProxySchema = z
  .string()
  .refine((value) => value === 'off' || /^\d{1,2}$/.test(value) || value.split(',').every(isAddressOrRange), {
    error: 'must be "off", the number of proxies in front, or their addresses separated by commas',
  })
  .transform((value) => {
    if (value === 'off') return false
    return /^\d+$/.test(value) ? Number(value) : value.split(',')
  })

const environmentSchema = z.object({
  NODE_ENV: z
    .enum(['development', 'test', 'production'], { error: 'must be development, test or production' })
    .default('development'),
  PORT: z.coerce
    .number({ error: 'must be a port number, 0 to 65535' })
    .int('must be a whole number')
    .min(0, 'must be 0 to 65535')
    .max(65535, 'must be 0 to 65535')
    .default(3000),
  HOST: z.string().min(1, 'must be an address or a host name').default('127.0.0.1'),
  DATA_DIR: z.string().min(1, 'must be a folder').default('./data'),
  PUBLIC_URL: z.url({ protocol: /^https?$/, error: 'must be the http(s) address people type' }).optional(),
  SESSION_SECRET: z
    .string()
    .min(minSecretLength, `must have at least ${minSecretLength} characters`)
    .optional(),
  CHECK_RATE_PER_MINUTE: z
    .union([z.literal('off'), z.coerce.number().int().min(1).max(1_000_000)], {
      error: 'must be a whole number of checks a minute, or "off"',
    })
    .default(240),
  TRUST_PROXY: trustProxySchema.default(false),
  SMTP_URL: z
    .url({ protocol: /^smtps?$/, error: 'must be smtp:// or smtps:// with the mail server' })
    .optional(),
  MAIL_FROM: z.string().min(3, 'must be an e-mail address').optional(),
  BACKUP_DIR: z.string().min(1, 'must be a folder').optional(),
  LOG_LEVEL: z
    .enum(['trace', 'debug', 'info', 'warn', 'error', 'silent'], {
      error: 'must be trace, debug, info, warn, error or silent',
    })
    .optional(),
})

const requiredInProduction = {
  PUBLIC_URL: 'the address people type, such as https://sixteenth.example.com',
  SESSION_SECRET: `a random text of at least ${minSecretLength} characters, kept secret`,
} as const

export interface Config {
  version: string
  isProduction: boolean
  port: number
  host: string
  isLoopback: boolean
  dataDir: string
  clientDir: string
  publicUrl: string | null
  sessionSecret: string | null
  /** checks a minute from one address; null is no limit */
  checkRatePerMinute: number | null
  trustProxy: boolean | number | string[]
  logLevel: string
  /** rounds of bcrypt as a power of two */
  passwordCost: number
  /** where mail is handed over; null keeps it here to be read on the own machine */
  smtpUrl: string | null
  /** whom mail comes from */
  mailFrom: string
  /** where the daily backups go */
  backupDir: string
}

const passwordCost = 12

/** What is wrong with the environment, for a person to read: no stack belongs to it. */
export class ConfigError extends Error {
  constructor(readonly complaints: string[]) {
    super(
      ['Sixteenth cannot start. In its environment:', ...complaints.map((line) => `  - ${line}`)].join('\n'),
    )
    this.name = 'ConfigError'
  }
}

/** Sessions travel over TLS only, but on the own machine, where nothing travels. */
function isReachedSafely(publicUrl: string): boolean {
  if (!URL.canParse(publicUrl)) return true
  const { protocol, hostname } = new URL(publicUrl)
  return protocol === 'https:' || isLoopbackHost(hostname.replace(/^\[|\]$/g, ''))
}

export function isLoopbackHost(host: string): boolean {
  if (host === 'localhost' || host === '::1') return true
  return isIP(host) === 4 && host.startsWith('127.')
}

export function readConfig(environment: Record<string, string | undefined>): Config {
  const given = Object.fromEntries(Object.entries(environment).filter(([, value]) => value !== ''))
  const parsed = environmentSchema.safeParse(given)
  const complaints = parsed.success
    ? []
    : parsed.error.issues.map((issue) => `${issue.path.join('.')} ${issue.message}`)
  if (given['NODE_ENV'] === 'production') {
    for (const [name, meaning] of Object.entries(requiredInProduction)) {
      if (given[name] === undefined) complaints.push(`${name} is missing: ${meaning}`)
    }
    if (!isReachedSafely(given['PUBLIC_URL'] ?? '')) {
      complaints.push('PUBLIC_URL must begin with https:// in production: sessions travel over TLS only')
    }
  }
  if (!parsed.success || complaints.length > 0) throw new ConfigError(complaints)

  const { NODE_ENV, PORT, HOST, DATA_DIR, PUBLIC_URL, SESSION_SECRET, CHECK_RATE_PER_MINUTE } = parsed.data
  const isProduction = NODE_ENV === 'production'
  const defaultLogLevel = { production: 'info', development: 'warn', test: 'silent' }[NODE_ENV]
  return {
    version: packageSchema.parse(JSON.parse(readFileSync(resolve(projectRoot, 'package.json'), 'utf8')))
      .version,
    isProduction,
    port: PORT,
    host: HOST,
    isLoopback: isLoopbackHost(HOST),
    dataDir: resolve(projectRoot, DATA_DIR),
    clientDir: resolve(projectRoot, 'dist'),
    publicUrl: PUBLIC_URL ?? null,
    sessionSecret: SESSION_SECRET ?? null,
    checkRatePerMinute: CHECK_RATE_PER_MINUTE === 'off' ? null : CHECK_RATE_PER_MINUTE,
    trustProxy: parsed.data.TRUST_PROXY,
    logLevel: parsed.data.LOG_LEVEL ?? defaultLogLevel,
    passwordCost,
    smtpUrl: parsed.data.SMTP_URL ?? null,
    mailFrom:
      parsed.data.MAIL_FROM ??
      `Sixteenth <no-reply@${PUBLIC_URL ? new URL(PUBLIC_URL).hostname : 'localhost'}>`,
    backupDir: resolve(projectRoot, parsed.data.BACKUP_DIR ?? `${DATA_DIR}/backups`),
  }
}
