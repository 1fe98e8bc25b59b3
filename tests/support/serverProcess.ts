import { spawn } from 'node:child_process'
import { once } from 'node:events'
import { join } from 'node:path'

const projectRoot = join(import.meta.dirname, '../..')

export interface ServerProcess {
  address: string
  kill(signal: NodeJS.Signals): void
  /** the exit code; null where a signal ended it */
  ended: Promise<number | null>
  said(): string
}

/** The server as people start it, in a process of its own on a free port, once it listens. */
export async function startServerProcess(
  dataDir: string,
  environment: Record<string, string> = {},
): Promise<ServerProcess> {
  const child = spawn(process.execPath, ['--import', 'tsx', 'server/index.ts'], {
    cwd: projectRoot,
    stdio: ['ignore', 'pipe', 'pipe'],
    env: {
      PATH: process.env['PATH'] ?? '',
      NODE_ENV: 'test',
      HOST: '127.0.0.1',
      PORT: '0',
      DATA_DIR: dataDir,
      CHECK_RATE_PER_MINUTE: 'off',
      ...environment,
    },
  })
  let said = ''
  const ended = once(child, 'close').then(([code]) => code as number | null)
  const address = await new Promise<string>((resolve, reject) => {
    for (const stream of [child.stdout, child.stderr]) {
      stream.on('data', (chunk: Buffer) => {
        said += chunk.toString()
        const found = /^Sixteenth is at (http:\/\/\S+)$/m.exec(said)?.[1]
        if (found) resolve(found)
      })
    }
    void ended.then((code) => reject(new Error(`The server ended with ${code} before it listened:\n${said}`)))
  })
  return { address, kill: (signal) => void child.kill(signal), ended, said: () => said }
}
