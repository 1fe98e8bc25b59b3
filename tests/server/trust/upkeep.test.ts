import { createHash } from 'node:crypto'
import { rmSync } from 'node:fs'
import { expect, it } from 'vitest'
import { sessions } from '../../../server/db/schema/index.ts'
import { listDailyBackups } from '../../../server/services/backup.ts'
import { startUpkeep } from '../../../server/upkeep.ts'
import { makeCompany, makePerson } from '../../support/people.ts'
import { makeDataDir, startServer } from '../../support/server.ts'

async function waitUntil(isTrue: () => boolean): Promise<void> {
  for (let waitedMs = 0; waitedMs < 20_000; waitedMs += 50) {
    if (isTrue()) return
    await new Promise((resolve) => setTimeout(resolve, 50))
  }
  throw new Error('It never came true.')
}

it('by the clock a day’s backup is made once, and sessions that have run out go', async () => {
  const backupDir = makeDataDir()
  const server = await startServer({ backupDir })
  const { database, context } = server
  const { accountId } = makePerson(server, makeCompany(server))
  const at = new Date(Date.now() - 1000).toISOString()
  const idHash = createHash('sha256').update('old').digest('hex')
  const old = { idHash, accountId, data: '{}', createdAt: at, lastUsedAt: at, expiresAt: at }
  database.queries.insert(sessions).values(old).run()
  const countSessions = () => database.queries.select().from(sessions).all().length
  expect(countSessions()).toBe(2)

  // The tool finds its folders in the environment, as it does beside the real server.
  const { DATA_DIR, BACKUP_DIR } = process.env
  Object.assign(process.env, { DATA_DIR: context.config.dataDir, BACKUP_DIR: backupDir })
  const upkeep = startUpkeep(context, { firstMs: 10, repeatMs: 20 })
  try {
    await waitUntil(() => countSessions() === 1)
    await waitUntil(() => listDailyBackups(backupDir).length > 0)
    await new Promise((resolve) => setTimeout(resolve, 1000))
    expect(listDailyBackups(backupDir)).toHaveLength(1)
  } finally {
    upkeep.stop()
    for (const [name, value] of Object.entries({ DATA_DIR, BACKUP_DIR })) {
      if (value === undefined) delete process.env[name]
      else process.env[name] = value
    }
    await server.stop()
    rmSync(backupDir, { recursive: true, force: true })
  }
})
