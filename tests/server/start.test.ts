import { spawn } from 'node:child_process'
import { once } from 'node:events'
import { rmSync } from 'node:fs'
import { createServer } from 'node:net'
import type { AddressInfo } from 'node:net'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { makeDataDir } from '../support/server.ts'

let dataDir: string
beforeEach(() => {
  dataDir = makeDataDir()
})
afterEach(() => rmSync(dataDir, { recursive: true, force: true }))

/** The server as a process of its own; what it says is collected. */
function spawnServer(environment: Record<string, string>) {
  const inherited = { PATH: process.env['PATH'] ?? '' }
  const child = spawn(process.execPath, ['--import', 'tsx', 'server/index.ts'], {
    env: { ...inherited, DATA_DIR: dataDir, PORT: '0', ...environment },
  })
  let said = ''
  const spoke = new Promise<void>((resolve) => {
    for (const stream of [child.stdout, child.stderr]) {
      stream.on('data', (chunk: Buffer) => {
        said += chunk.toString()
        resolve()
      })
    }
  })
  const ended = once(child, 'close').then(([code]) => code as number | null)
  return { child, spoke, ended, said: () => said }
}

describe('starting the server', () => {
  it('prints its address, answers there, and ends cleanly when told to', async () => {
    const server = spawnServer({})
    await server.spoke
    const address = /^Sixteenth is at (http:\/\/127\.0\.0\.1:\d+)$/m.exec(server.said())?.[1]
    expect((await fetch(`${address}/api/v1/health`)).status).toBe(200)
    server.child.kill('SIGTERM')
    expect(await server.ended).toBe(0)
  })

  it('in production without secrets stops with a list of what is missing', async () => {
    const server = spawnServer({ NODE_ENV: 'production' })
    expect(await server.ended).toBe(1)
    expect(server.said()).toMatch(/- PUBLIC_URL is missing.*\n.*- SESSION_SECRET is missing/)
    expect(server.said()).not.toMatch(/\n\s+at /)
  })

  it('says in one sentence that the port is in use', async () => {
    const other = createServer().listen(0, '127.0.0.1')
    await once(other, 'listening')
    const { port } = other.address() as AddressInfo
    const server = spawnServer({ PORT: String(port) })
    expect(await server.ended).toBe(1)
    expect(server.said()).toMatch(`Port ${port} is already in use.`)
    expect(server.said()).not.toMatch(/\n\s+at /)
    other.close()
  })
})
