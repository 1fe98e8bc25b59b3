import { once } from 'node:events'
import { existsSync, rmSync } from 'node:fs'
import { connect } from 'node:net'
import type { Socket } from 'node:net'
import { join } from 'node:path'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { makeCheckRequest } from '../../support/checkRequest.ts'
import { makeDataDir } from '../../support/server.ts'
import { startServerProcess } from '../../support/serverProcess.ts'

let dataDir: string
beforeEach(() => {
  dataDir = makeDataDir()
})
afterEach(() => rmSync(dataDir, { recursive: true, force: true }))

const body = JSON.stringify(makeCheckRequest())

async function openSocket(address: string): Promise<Socket> {
  const { hostname, port } = new URL(address)
  const socket = connect(Number(port), hostname)
  await once(socket, 'connect')
  return socket
}

/** A request whose body comes only in part for now. */
async function beginCheck(address: string): Promise<{ socket: Socket; heard: () => string }> {
  const socket = await openSocket(address)
  let text = ''
  socket.on('data', (chunk: Buffer) => (text += chunk.toString()))
  socket.on('error', () => {})
  socket.write(
    [
      'POST /api/v1/check HTTP/1.1',
      'Host: localhost',
      'Content-Type: application/json',
      `Content-Length: ${Buffer.byteLength(body)}`,
      '',
      body.slice(0, 20),
    ].join('\r\n'),
  )
  // Long enough for the server to have read the head.
  await new Promise((resolve) => setTimeout(resolve, 200))
  return { socket, heard: () => text }
}

describe('told to end', () => {
  it('the server finishes the requests it has, takes no new one, and ends at once then', async () => {
    const server = await startServerProcess(dataDir)
    const idle = await openSocket(server.address)
    idle.on('error', () => {})
    const { socket, heard } = await beginCheck(server.address)
    const closed = once(socket, 'close')
    const begun = performance.now()
    server.kill('SIGTERM')
    await once(idle.resume(), 'close')
    await expect(openSocket(server.address)).rejects.toThrow(/ECONNREFUSED/)

    await new Promise((resolve) => setTimeout(resolve, 1000))
    expect(heard()).toBe('')
    socket.write(body.slice(20))
    await closed
    expect(heard()).toMatch(/^HTTP\/1\.1 200 OK/)
    expect(heard()).toMatch(/"verdict":/)
    expect(await server.ended).toBe(0)
    expect(performance.now() - begun).toBeLessThan(3000)
    // SQLite removes its log when the last connection is closed in good order.
    expect(existsSync(join(dataDir, 'sixteenth.sqlite-wal'))).toBe(false)
  })

  it('the server waits no longer than five seconds for a request that never ends', async () => {
    const server = await startServerProcess(dataDir)
    await beginCheck(server.address)
    const begun = performance.now()
    server.kill('SIGTERM')
    // As a terminal and the start script do.
    server.kill('SIGINT')
    expect(await server.ended).toBe(0)
    const took = performance.now() - begun
    expect(took).toBeGreaterThan(3000)
    expect(took).toBeLessThan(5500)
    expect(existsSync(join(dataDir, 'sixteenth.sqlite-wal'))).toBe(false)
  })
})
