import { createServer } from 'node:http'
import type { AddressInfo } from 'node:net'
import { createApp } from './app.ts'
import { ConfigError, readConfig } from './config.ts'
import { createContext } from './context.ts'
import { openDatabase } from './db/client.ts'
import { prepareDemo } from './db/seed.ts'
import { prepareDrain } from './drain.ts'
import { startMailer } from './email/mailer.ts'
import { createLogger } from './middleware/requestLog.ts'
import { startUpkeep } from './upkeep.ts'

/** how long requests may take to finish once we are told to end, and then how long the rest may take */
const graceMs = 4500
const closingMs = 400

function start(): void {
  const config = readConfig(process.env)
  const logger = createLogger(config.logLevel)
  const database = openDatabase(config.dataDir)
  prepareDemo(database, config)
  const context = createContext(config, database, logger)
  const server = createServer(createApp(context))
  const drain = prepareDrain(server)

  server.once('error', (error: NodeJS.ErrnoException) => {
    database.close()
    stop(explainListenError(error, config.host, config.port))
  })
  server.listen(config.port, config.host, () => {
    const { port } = server.address() as AddressInfo
    const host = config.host.includes(':') ? `[${config.host}]` : config.host
    const address = `http://${host}:${port}`
    // With PORT=0 the port is known only now.
    if (!config.publicUrl) context.publicUrl = address
    const upkeep = startUpkeep(context)
    const mailer = startMailer(context)
    console.log(`Sixteenth is at ${address}`)

    async function shutDown(): Promise<void> {
      upkeep.stop()
      await drain(graceMs)
      setTimeout(() => process.exit(0), closingMs).unref()
      await Promise.allSettled([mailer.stop(), context.passwords.close()])
      database.close()
    }
    // A terminal signals every process of ours, and the start script passes its own on: the second one is no news.
    let isStopping = false
    for (const signal of ['SIGTERM', 'SIGINT'] as const) {
      process.on(signal, () => {
        if (isStopping) return
        isStopping = true
        void shutDown()
      })
    }
  })
}

function explainListenError(error: NodeJS.ErrnoException, host: string, port: number): string {
  if (error.code === 'EADDRINUSE') {
    return `Port ${port} is already in use. Stop what uses it, or choose another: PORT=${port + 1} npm start`
  }
  if (error.code === 'EACCES')
    return `Port ${port} needs more rights than this account has. Choose one over 1023.`
  return `Cannot listen on ${host}, port ${port}: ${error.message}`
}

function stop(message: string): void {
  console.error(message)
  process.exitCode = 1
}

try {
  start()
} catch (error) {
  if (!(error instanceof ConfigError)) throw error
  stop(error.message)
}
