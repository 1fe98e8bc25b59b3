import type { Server } from 'node:http'
import type { Socket } from 'node:net'

const lookEveryMs = 50

/**
 * Answers what ends the server in good order: it takes no new connection, lets the requests that are being answered
 * finish, and cuts those that are not done in time. A connection that is kept alive ends after its answer.
 */
export function prepareDrain(server: Server): (graceMs: number) => Promise<void> {
  // Browsers open connections in advance, which Node does not count among the idle ones.
  const open = new Set<Socket>()
  server.on('connection', (socket: Socket) => {
    open.add(socket)
    socket.once('close', () => open.delete(socket))
  })

  return async (graceMs) => {
    function closeIdle(): void {
      server.closeIdleConnections()
      for (const socket of open) if (socket.bytesRead === 0) socket.destroy()
    }
    const look = setInterval(closeIdle, lookEveryMs)
    const cut = setTimeout(() => server.closeAllConnections(), graceMs)
    try {
      await new Promise<void>((resolve) => {
        server.close(() => resolve())
        closeIdle()
      })
    } finally {
      clearInterval(look)
      clearTimeout(cut)
    }
  }
}
