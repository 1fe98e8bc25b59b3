import { and, inArray, lt } from 'drizzle-orm'
import type { AppContext } from '../context.ts'
import { emails, passwordResets, signUps } from '../db/schema/index.ts'
import { deleteExpiredSessions } from './sessions.ts'

/** how long it can be looked up whether a mail went out; its address may be nobody's who has an account */
const mailKeptMs = 90 * 24 * 3600_000

/**
 * Clears away what nobody can use any more: sign-ups never confirmed, old links, sessions that have run out, and what is
 * left of mails that are done with.
 */
export function deleteExpired(context: Pick<AppContext, 'database' | 'now'>): void {
  const { database, now } = context
  const at = now().toISOString()
  const oldestMail = new Date(now().getTime() - mailKeptMs).toISOString()
  database.transact((writer) => {
    writer.delete(signUps).where(lt(signUps.expiresAt, at)).run()
    writer.delete(passwordResets).where(lt(passwordResets.expiresAt, at)).run()
    const isDone = inArray(emails.state, ['sent', 'given-up'])
    writer
      .delete(emails)
      .where(and(isDone, lt(emails.createdAt, oldestMail)))
      .run()
  })
  deleteExpiredSessions(context)
}
