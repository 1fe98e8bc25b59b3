import { and, asc, desc, eq, lte, ne } from 'drizzle-orm'
import type { KeptMail } from '#shared/contracts/mails.ts'
import type { Config } from '../config.ts'
import type { AppContext } from '../context.ts'
import { emails } from '../db/schema/index.ts'

export type QueuedMail = typeof emails.$inferSelect

const mostKeptShown = 50

/** Links in mails are live: they can be read here only where there is nobody but the developer. */
export function isMailPageOpen({ isProduction, isLoopback, smtpUrl }: Config): boolean {
  return !isProduction && isLoopback && smtpUrl === null
}

export function listKeptMails({ database }: Pick<AppContext, 'database'>): KeptMail[] {
  return database.queries
    .select({
      id: emails.id,
      to: emails.to,
      subject: emails.subject,
      text: emails.text,
      html: emails.html,
      createdAt: emails.createdAt,
    })
    .from(emails)
    .where(ne(emails.text, ''))
    .orderBy(desc(emails.createdAt), desc(emails.id))
    .limit(mostKeptShown)
    .all()
}

export function findDueMail({ database, now }: AppContext): QueuedMail | undefined {
  return database.queries
    .select()
    .from(emails)
    .where(and(eq(emails.state, 'waiting'), lte(emails.nextAttemptAt, now().toISOString())))
    .orderBy(asc(emails.nextAttemptAt), asc(emails.createdAt))
    .limit(1)
    .get()
}

/** What was handed over is not kept: its links are the receiver's alone. */
const blank = { text: '', html: '' }

export function markSent({ database, now }: AppContext, id: string): void {
  database.queries
    .update(emails)
    .set({ state: 'sent', sentAt: now().toISOString(), lastError: null, ...blank })
    .where(eq(emails.id, id))
    .run()
}

/** Where no mail server is, a mail counts as sent and is kept to be read here. */
export function markKept({ database, now }: AppContext, id: string): void {
  database.queries
    .update(emails)
    .set({ state: 'sent', sentAt: now().toISOString() })
    .where(eq(emails.id, id))
    .run()
}

export function markFailed(
  { database }: AppContext,
  mail: QueuedMail,
  lastError: string,
  nextAttemptAt: Date,
): void {
  database.queries
    .update(emails)
    .set({ attempts: mail.attempts + 1, lastError, nextAttemptAt: nextAttemptAt.toISOString() })
    .where(eq(emails.id, mail.id))
    .run()
}

export function markGivenUp({ database }: AppContext, mail: QueuedMail, lastError: string): void {
  database.queries
    .update(emails)
    .set({ state: 'given-up', attempts: mail.attempts + 1, lastError, ...blank })
    .where(eq(emails.id, mail.id))
    .run()
}

/** Mails kept for reading before there was a mail server. */
export function blankSentMails({ database }: Pick<AppContext, 'database'>): void {
  database.queries
    .update(emails)
    .set(blank)
    .where(and(ne(emails.state, 'waiting'), ne(emails.text, '')))
    .run()
}
