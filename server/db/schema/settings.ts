import { sqliteTable, text } from 'drizzle-orm/sqlite-core'

/** What the installation itself remembers, such as whether its data is the demo's. */
export const settings = sqliteTable('settings', {
  key: text('key').primaryKey(),
  value: text('value').notNull(),
  /** UTC, ISO 8601 */
  updatedAt: text('updated_at').notNull(),
})
