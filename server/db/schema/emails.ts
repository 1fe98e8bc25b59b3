import { index, integer, sqliteTable, text } from 'drizzle-orm/sqlite-core'
import { instant } from '../columns.ts'

/** Mail to send, written with the change that causes it; it waits here through any outage of the mail server. */
export const emails = sqliteTable(
  'emails',
  {
    id: text('id').primaryKey(),
    to: text('to_address').notNull(),
    subject: text('subject').notNull(),
    text: text('text').notNull(),
    html: text('html').notNull(),
    state: text('state', { enum: ['waiting', 'sent', 'given-up'] }).notNull(),
    attempts: integer('attempts').notNull(),
    nextAttemptAt: instant('next_attempt_at').notNull(),
    lastError: text('last_error'),
    createdAt: instant('created_at').notNull(),
    sentAt: instant('sent_at'),
  },
  (table) => [index('emails_waiting').on(table.state, table.nextAttemptAt)],
)
