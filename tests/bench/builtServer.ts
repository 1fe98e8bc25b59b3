import { spawn } from 'node:child_process'
import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { build } from 'vite'

const projectRoot = join(import.meta.dirname, '../..')

/** The client built from these sources, and the server in a process of its own, on a free port. */
export async function startBuiltServer() {
  await build({ root: projectRoot, logLevel: 'warn' })
  const dataDir = mkdtempSync(join(tmpdir(), 'sixteenth-bench-'))
  const child = spawn(process.execPath, ['--import', 'tsx', 'server/index.ts'], {
    cwd: projectRoot,
    stdio: ['ignore', 'pipe', 'inherit'],
    env: {
      ...process.env,
      NODE_ENV: 'test',
      HOST: '127.0.0.1',
      PORT: '0',
      DATA_DIR: dataDir,
      CHECK_RATE_PER_MINUTE: 'off',
    },
  })
  const exit = new Promise<void>((resolve) => child.once('exit', () => resolve()))
  const address = await new Promise<string>((resolve, reject) => {
    let said = ''
    child.stdout.on('data', (text: Buffer) => {
      said += text.toString()
      const found = /http:\/\/[\w.:]+/.exec(said)
      if (found) resolve(found[0])
    })
    void exit.then(() => reject(new Error('The server stopped before it listened.')))
  })
  return {
    address,
    async stop() {
      child.kill('SIGTERM')
      await exit
      rmSync(dataDir, { recursive: true, force: true })
    },
  }
}
