import { lt } from 'drizzle-orm'
import type { AppContext } from '../context.ts'
import { passwordResets, signUps } from '../db/schema/index.ts'
import { deleteExpiredSessions } from './sessions.ts'

/** Clears away what nobody can use any more: sign-ups never confirmed, old links, sessions that have run out. */
export function deleteExpired(context: Pick<AppContext, 'database' | 'now'>): void {
  const { database, now } = context
  const at = now().toISOString()
  database.transact((writer) => {
    writer.delete(signUps).where(lt(signUps.expiresAt, at)).run()
    writer.delete(passwordResets).where(lt(passwordResets.expiresAt, at)).run()
  })
  deleteExpiredSessions(context)
}
