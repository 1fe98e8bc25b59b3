import { spawn } from 'node:child_process'
import type { ChildProcess } from 'node:child_process'
import { join } from 'node:path'
import { projectRoot } from './config.ts'
import type { AppContext } from './context.ts'
import { isDailyBackupDue } from './services/backup.ts'
import { deleteExpired } from './services/expiry.ts'

const firstAfterMs = 60_000
const everyMs = 3600_000
const backupTool = join(projectRoot, 'server/tools/backup.ts')

export interface Upkeep {
  stop(): void
}

/** What is done by the clock: what has run out is cleared away, and each day has its backup. */
export function startUpkeep(
  { config, database, logger, now }: AppContext,
  { firstMs = firstAfterMs, repeatMs = everyMs } = {},
): Upkeep {
  let backup: ChildProcess | null = null

  /** In a process of its own: to copy and check everything takes its time, which would be the requests'. */
  function backUpIfDue(): void {
    if (backup || !isDailyBackupDue(config.backupDir, now())) return
    const child = spawn(process.execPath, ['--import', 'tsx', backupTool, '--daily'], {
      cwd: projectRoot,
      stdio: ['ignore', 'ignore', 'pipe'],
    })
    backup = child
    let complaint = ''
    child.stderr.on('data', (chunk: Buffer) => (complaint += chunk.toString().slice(0, 2000)))
    child.once('error', (error) => (complaint += error.message))
    child.once('close', (code, signal) => {
      backup = null
      if (code === 0) logger.info('the daily backup is made')
      else if (signal === null) logger.error({ complaint }, 'the daily backup failed')
    })
  }

  function round(): void {
    for (const task of [() => deleteExpired({ database, now }), backUpIfDue]) {
      try {
        task()
      } catch (error) {
        logger.error({ err: error }, 'the upkeep')
      }
    }
  }

  let repeat: NodeJS.Timeout | undefined
  const first = setTimeout(() => {
    round()
    repeat = setInterval(round, repeatMs).unref()
  }, firstMs).unref()

  return {
    stop() {
      clearTimeout(first)
      clearInterval(repeat)
      backup?.kill()
    },
  }
}
