import { eq } from 'drizzle-orm'
import type { Database } from '../db/client.ts'
import { settings } from '../db/schema/index.ts'

export function readSetting(database: Database, key: string): string | null {
  const row = database.queries.select().from(settings).where(eq(settings.key, key)).get()
  return row?.value ?? null
}

export function writeSetting(database: Database, key: string, value: string): void {
  const updatedAt = new Date().toISOString()
  database.queries
    .insert(settings)
    .values({ key, value, updatedAt })
    .onConflictDoUpdate({ target: settings.key, set: { value, updatedAt } })
    .run()
}
