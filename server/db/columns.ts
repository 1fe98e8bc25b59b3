import { integer, text } from 'drizzle-orm/sqlite-core'

/** UTC, ISO 8601 to the millisecond: sorts as text. */
export const instant = (name: string) => text(name)

/** What every saved record of a company carries: a key of its own maker's, a version, and by whom it stands as it does. */
export const recordColumns = () => ({
  companyId: text('company_id').notNull(),
  id: text('id').notNull(),
  version: integer('version').notNull(),
  /** of the body that made it: the same post twice is one record, another body under its id is refused */
  creationHash: text('creation_hash').notNull(),
  createdAt: instant('created_at').notNull(),
  updatedAt: instant('updated_at').notNull(),
  updatedBy: text('updated_by').notNull(),
  archivedAt: instant('archived_at'),
  deletedAt: instant('deleted_at'),
})
