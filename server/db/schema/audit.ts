import { index, integer, sqliteTable, text } from 'drizzle-orm/sqlite-core'
import type { AuditAction, AuditEntry } from '#shared/contracts/people.ts'
import { instant } from '../columns.ts'
import { companies } from './accounts.ts'

/** Who did what, when; written in the transaction of the change. Triggers refuse any update or delete. */
export const auditEntries = sqliteTable(
  'audit_entries',
  {
    id: integer('id').primaryKey({ autoIncrement: true }),
    companyId: text('company_id')
      .notNull()
      .references(() => companies.id),
    at: instant('at').notNull(),
    actorId: text('actor_id'),
    actorName: text('actor_name').notNull(),
    action: text('action').$type<AuditAction>().notNull(),
    subject: text('subject').notNull(),
    subjectId: text('subject_id'),
    changes: text('changes', { mode: 'json' }).$type<AuditEntry['changes']>().notNull(),
  },
  (table) => [index('audit_company').on(table.companyId, table.id)],
)
