import { createServer } from 'node:http'
import type { AddressInfo } from 'node:net'
import { createApp } from './app.ts'
import { ConfigError, readConfig } from './config.ts'
import { createContext } from './context.ts'
import { openDatabase } from './db/client.ts'
import { prepareDemo } from './db/seed.ts'
import { createLogger } from './middleware/requestLog.ts'

const graceMs = 5000

function start(): void {
  const config = readConfig(process.env)
  const logger = createLogger(config.logLevel)
  const database = openDatabase(config.dataDir)
  prepareDemo(database, config)
  const server = createServer(createApp(createContext(config, database, logger)))

  server.once('error', (error: NodeJS.ErrnoException) => {
    database.close()
    stop(explainListenError(error, config.host, config.port))
  })
  server.listen(config.port, config.host, () => {
    const { port } = server.address() as AddressInfo
    const host = config.host.includes(':') ? `[${config.host}]` : config.host
    console.log(`Sixteenth is at http://${host}:${port}`)
  })

  // A terminal signals every process of ours, and the start script passes its own on: the second one is no news.
  let isStopping = false
  function shutDown(): void {
    if (isStopping) return
    isStopping = true
    setTimeout(() => server.closeAllConnections(), graceMs).unref()
    server.close(() => database.close())
    server.closeIdleConnections()
  }
  process.on('SIGTERM', shutDown)
  process.on('SIGINT', shutDown)
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
