import { index, integer, primaryKey, sqliteTable, text, uniqueIndex } from 'drizzle-orm/sqlite-core'
import type { Role } from '#shared/contracts/permissions.ts'
import { instant } from '../columns.ts'

export const companies = sqliteTable('companies', {
  id: text('id').primaryKey(),
  name: text('name').notNull(),
  currency: text('currency').notNull(),
  language: text('language', { enum: ['en', 'es'] }).notNull(),
  timeZone: text('time_zone').notNull(),
  version: integer('version').notNull(),
  creationHash: text('creation_hash').notNull(),
  createdAt: instant('created_at').notNull(),
})

/** A person, by their own confirmed e-mail address; there is no account before the address is confirmed. */
export const accounts = sqliteTable('accounts', {
  id: text('id').primaryKey(),
  email: text('email').notNull().unique(),
  name: text('name').notNull(),
  passwordHash: text('password_hash').notNull(),
  language: text('language', { enum: ['en', 'es'] }).notNull(),
  createdAt: instant('created_at').notNull(),
})

export const memberships = sqliteTable(
  'memberships',
  {
    id: text('id').primaryKey(),
    companyId: text('company_id')
      .notNull()
      .references(() => companies.id),
    accountId: text('account_id')
      .notNull()
      .references(() => accounts.id),
    roles: text('roles', { mode: 'json' }).$type<Role[]>().notNull(),
    state: text('state', { enum: ['active', 'deactivated'] }).notNull(),
    lastSeenAt: instant('last_seen_at'),
    joinedAt: instant('joined_at').notNull(),
    version: integer('version').notNull(),
  },
  (table) => [
    uniqueIndex('memberships_company_account').on(table.companyId, table.accountId),
    index('memberships_account').on(table.accountId),
  ],
)

/** A sign-up that waits for its address to be confirmed. Only the hash of its token is kept. */
export const signUps = sqliteTable('sign_ups', {
  tokenHash: text('token_hash').primaryKey(),
  email: text('email').notNull(),
  name: text('name').notNull(),
  passwordHash: text('password_hash').notNull(),
  company: text('company', { mode: 'json' })
    .$type<{ name: string; currency: string; language: 'en' | 'es'; timeZone: string }>()
    .notNull(),
  createdAt: instant('created_at').notNull(),
  expiresAt: instant('expires_at').notNull(),
})

export const passwordResets = sqliteTable(
  'password_resets',
  {
    tokenHash: text('token_hash').primaryKey(),
    accountId: text('account_id')
      .notNull()
      .references(() => accounts.id),
    createdAt: instant('created_at').notNull(),
    expiresAt: instant('expires_at').notNull(),
    usedAt: instant('used_at'),
  },
  (table) => [index('password_resets_account').on(table.accountId)],
)

export const invitations = sqliteTable(
  'invitations',
  {
    companyId: text('company_id')
      .notNull()
      .references(() => companies.id),
    id: text('id').notNull(),
    email: text('email').notNull(),
    roles: text('roles', { mode: 'json' }).$type<Role[]>().notNull(),
    language: text('language', { enum: ['en', 'es'] }).notNull(),
    /** sending it again makes another token: the earlier mail's link is dead then */
    tokenHash: text('token_hash').notNull().unique(),
    invitedBy: text('invited_by').notNull(),
    creationHash: text('creation_hash').notNull(),
    createdAt: instant('created_at').notNull(),
    expiresAt: instant('expires_at').notNull(),
    acceptedAt: instant('accepted_at'),
    withdrawnAt: instant('withdrawn_at'),
    version: integer('version').notNull(),
  },
  (table) => [primaryKey({ columns: [table.companyId, table.id] })],
)

/** Sessions under the hash of their id: who reads the database can take over none. */
export const sessions = sqliteTable(
  'sessions',
  {
    idHash: text('id_hash').primaryKey(),
    accountId: text('account_id').references(() => accounts.id),
    /** the one company that is active in it */
    companyId: text('company_id').references(() => companies.id),
    data: text('data').notNull(),
    createdAt: instant('created_at').notNull(),
    lastUsedAt: instant('last_used_at').notNull(),
    expiresAt: instant('expires_at').notNull(),
  },
  (table) => [index('sessions_account').on(table.accountId), index('sessions_expiry').on(table.expiresAt)],
)
