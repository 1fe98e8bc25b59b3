import { and, asc, eq, isNull, sql } from 'drizzle-orm'
import type { Database } from '../db/client.ts'
import { rigs } from '../db/schema/index.ts'
import { oncePerDatabase } from './recordQueries.ts'
import type { RecordRow } from './recordQueries.ts'

const mostNamed = 5

function prepareFind({ queries }: Database, column: typeof rigs.compressorId | typeof rigs.siteId) {
  return queries
    .select({ name: rigs.name, archivedAt: rigs.archivedAt })
    .from(rigs)
    .where(
      and(
        eq(rigs.companyId, sql.placeholder('companyId')),
        eq(column, sql.placeholder('id')),
        isNull(rigs.deletedAt),
      ),
    )
    .orderBy(asc(rigs.name))
    .prepare()
}

const usersIn = {
  compressor: oncePerDatabase((database) => prepareFind(database, rigs.compressorId)),
  site: oncePerDatabase((database) => prepareFind(database, rigs.siteId)),
}

/** Why a compressor or a site may not go: the rigs that have it as their usual one. An archived rig keeps an archived one. */
export function findRigsWith(
  database: Database,
  noun: keyof typeof usersIn,
  { companyId, id, name }: Pick<RecordRow, 'companyId' | 'id' | 'name'>,
  intent: 'archive' | 'delete',
): string | null {
  const users = usersIn[noun](database)
    .all({ companyId, id })
    .filter(({ archivedAt }) => intent === 'delete' || archivedAt === null)
  if (users.length === 0) return null
  const named = users.slice(0, mostNamed).map((rig) => `“${rig.name}”`)
  const others = users.length > mostNamed ? ` and ${users.length - mostNamed} more` : ''
  return `“${name}” is the usual ${noun} of ${named.join(', ')}${others}.`
}
