import { createHash } from 'node:crypto'
import { Store } from 'express-session'
import type { SessionData } from 'express-session'
import { and, eq, lt, ne, sql } from 'drizzle-orm'
import type { AppContext } from '../context.ts'
import type { Database, Writer } from '../db/client.ts'
import { sessions } from '../db/schema/index.ts'
import { writeIfPossible } from '../db/storageFailure.ts'

/** forgotten on a device that nobody uses for so long */
export const sessionIdleMs = 14 * 24 * 3600_000
/** signed in again after so long, used or not */
export const sessionAbsoluteMs = 90 * 24 * 3600_000
/** a session in use is written down as used no more often than this */
const touchEveryMs = 60_000
/** more than can be under way at once; requests that are broken off leave theirs behind */
const mostRemembered = 10_000

export function hashSessionId(sessionId: string): string {
  return createHash('sha256').update(sessionId).digest('hex')
}

type Callback = (error?: unknown) => void

function prepareQueries({ queries }: Database) {
  return {
    find: queries
      .select()
      .from(sessions)
      .where(eq(sessions.idHash, sql.placeholder('idHash')))
      .prepare(),
    destroy: queries
      .delete(sessions)
      .where(eq(sessions.idHash, sql.placeholder('idHash')))
      .prepare(),
  }
}

/** Keeps the sessions of express-session in our own database, so that they outlive a restart. */
export class SessionStore extends Store {
  private readonly prepared: ReturnType<typeof prepareQueries>
  /** of sessions that a request under way has just read, by the hash of their id */
  private readonly lastUsed = new Map<string, string>()

  constructor(private readonly context: Pick<AppContext, 'database' | 'now'>) {
    super()
    this.prepared = prepareQueries(context.database)
  }

  override get(sessionId: string, callback: (error: unknown, session?: SessionData | null) => void): void {
    this.answer(callback, () => {
      const idHash = hashSessionId(sessionId)
      const row = this.prepared.find.get({ idHash })
      if (!row) return null
      const now = this.context.now()
      const oldest = new Date(now.getTime() - sessionAbsoluteMs).toISOString()
      if (row.expiresAt > now.toISOString() && row.createdAt > oldest) {
        if (this.lastUsed.size >= mostRemembered) this.lastUsed.clear()
        this.lastUsed.set(idHash, row.lastUsedAt)
        return JSON.parse(row.data) as SessionData
      }
      writeIfPossible(() => {
        this.prepared.destroy.run({ idHash })
      })
      return null
    })
  }

  override set(sessionId: string, session: SessionData, callback: Callback = () => {}): void {
    this.answer(callback, () => {
      const now = this.context.now()
      const values = {
        accountId: session.accountId ?? null,
        companyId: session.companyId ?? null,
        data: JSON.stringify(session),
        lastUsedAt: now.toISOString(),
        expiresAt: new Date(now.getTime() + sessionIdleMs).toISOString(),
      }
      this.context.database.queries
        .insert(sessions)
        .values({ idHash: hashSessionId(sessionId), createdAt: now.toISOString(), ...values })
        .onConflictDoUpdate({ target: sessions.idHash, set: values })
        .run()
    })
  }

  override destroy(sessionId: string, callback: Callback = () => {}): void {
    this.answer(callback, () => {
      this.prepared.destroy.run({ idHash: hashSessionId(sessionId) })
    })
  }

  override touch(sessionId: string, _session: SessionData, callback: Callback = () => {}): void {
    this.answer(callback, () => {
      const idHash = hashSessionId(sessionId)
      const now = this.context.now()
      const justNow = new Date(now.getTime() - touchEveryMs).toISOString()
      const lastUsedAt = this.lastUsed.get(idHash) ?? this.prepared.find.get({ idHash })?.lastUsedAt
      this.lastUsed.delete(idHash)
      if (lastUsedAt === undefined || lastUsedAt > justNow) return
      const expiresAt = new Date(now.getTime() + sessionIdleMs).toISOString()
      writeIfPossible(() => {
        this.context.database.queries
          .update(sessions)
          .set({ lastUsedAt: now.toISOString(), expiresAt })
          .where(eq(sessions.idHash, idHash))
          .run()
      })
    })
  }

  private answer<Result>(callback: (error: unknown, result?: Result) => void, work: () => Result): void {
    let result: Result
    try {
      result = work()
    } catch (error) {
      return callback(error)
    }
    callback(null, result)
  }
}

/** Ends every session of an account, but perhaps the one that asks for it. */
export function endSessionsOfAccount(writer: Writer, accountId: string, exceptSessionId?: string): void {
  const isOther = exceptSessionId ? ne(sessions.idHash, hashSessionId(exceptSessionId)) : undefined
  writer
    .delete(sessions)
    .where(and(eq(sessions.accountId, accountId), isOther))
    .run()
}

/** Ends the sessions in which an account has this company active. */
export function endSessionsInCompany(writer: Writer, accountId: string, companyId: string): void {
  writer
    .delete(sessions)
    .where(and(eq(sessions.accountId, accountId), eq(sessions.companyId, companyId)))
    .run()
}

export function deleteExpiredSessions({ database, now }: Pick<AppContext, 'database' | 'now'>): void {
  database.queries.delete(sessions).where(lt(sessions.expiresAt, now().toISOString())).run()
}
