import { and, count, eq, isNull, sql } from 'drizzle-orm'
import { recordLimits } from '#shared/contracts/limits.ts'
import type { FieldError } from '#shared/contracts/problems.ts'
import type { RigProfile, RigSummary } from '#shared/contracts/rigs.ts'
import type { Actor } from '../actor.ts'
import type { Database } from '../db/client.ts'
import { rigs } from '../db/schema/index.ts'
import { compressorKind } from './compressors.ts'
import { decodeCursor, encodeCursor } from './pages.ts'
import type { Line, PageQuery } from './pages.ts'
import { isAfter, oncePerDatabase, queriesOf } from './recordQueries.ts'
import type { RecordRow } from './recordQueries.ts'
import type { Context, RecordKind } from './records.ts'
import { siteKind } from './sites.ts'

type RigRow = typeof rigs.$inferSelect

/** A reference is good to one of the company's own that is not deleted; an archived one only an archived rig keeps. */
function findReferenceFault(
  { path, noun }: { path: string; noun: string },
  row: RecordRow | undefined,
  isRigArchived: boolean,
): FieldError[] {
  const refuse = (message: string): FieldError[] => [{ path, code: 'unknown-reference', message }]
  if (!row) return refuse(`There is no such ${noun}.`)
  if (row.deletedAt !== null) return refuse(`The ${noun} “${row.name}” has been deleted.`)
  if (row.archivedAt !== null && !isRigArchived) return refuse(`The ${noun} “${row.name}” is archived.`)
  return []
}

export function findUnknownReferences(
  database: Database,
  companyId: string,
  { compressorId, siteId }: Pick<RigProfile, 'compressorId' | 'siteId'>,
  { isArchived } = { isArchived: false },
): FieldError[] {
  const faults: FieldError[] = []
  if (compressorId !== null) {
    const row = compressorKind.queriesIn(database).find(companyId, compressorId)
    faults.push(...findReferenceFault({ path: '/compressorId', noun: 'compressor' }, row, isArchived))
  }
  if (siteId !== null) {
    const row = siteKind.queriesIn(database).find(companyId, siteId)
    faults.push(...findReferenceFault({ path: '/siteId', noun: 'site' }, row, isArchived))
  }
  return faults
}

export const rigKind: RecordKind<RigProfile, RigRow> = {
  noun: 'rig',
  queriesIn: queriesOf(rigs),
  toColumns: ({ hoods, ...profile }) => ({
    ...profile,
    hoodCount: hoods.count,
    hoodFreeAirM3Min: hoods.freeAirEachM3Min,
  }),
  toProfile: ({
    name,
    airLine,
    pot,
    outlets,
    hoodCount,
    hoodFreeAirM3Min,
    toolsFreeAirM3Min,
    targetNozzlePressureKpa,
    bitSet,
    compressorId,
    siteId,
    hour,
  }) => ({
    name,
    airLine,
    pot,
    outlets,
    hoods: { count: hoodCount, freeAirEachM3Min: hoodFreeAirM3Min },
    toolsFreeAirM3Min,
    targetNozzlePressureKpa,
    bitSet,
    compressorId,
    siteId,
    hour,
  }),
  findFaults: findUnknownReferences,
}

/** A page of the list as the database writes it: of all that is asked for, this is asked for most. */
const summaryQueriesIn = oncePerDatabase(({ queries }) => {
  const isListed = and(eq(rigs.companyId, sql.placeholder('companyId')), isNull(rigs.deletedAt))
  const isNext = and(isListed, isAfter(rigs))
  const inOrder = (where: typeof isListed) =>
    sql`from ${rigs} where ${where} order by ${rigs.name}, ${rigs.id}`
  const page = (where: typeof isListed) =>
    queries
      .select({
        items: sql<string>`json_group_array(json_object('id', id, 'name', name, 'version', version,
          'isArchived', iif(archived_at is null, json('false'), json('true')), 'updatedAt', updated_at))`,
        count: count(),
      })
      .from(
        sql`(select id, name, version, archived_at, updated_at ${inOrder(where)} limit ${sql.placeholder('limit')})`,
      )
      .prepare()
  return {
    firstPage: page(isListed),
    nextPage: page(isNext),
    next: queries.select({ id: rigs.id }).from(rigs).where(isNext).limit(1).prepare(),
  }
})

/** The lines of the list: what is needed to choose a rig, and no more; a page of RigSummary as JSON. */
export function writeRigList(
  { database }: Pick<Context, 'database'>,
  { companyId }: Pick<Actor, 'companyId'>,
  { cursor, limit = recordLimits.pageSize }: PageQuery,
): string {
  const { firstPage, nextPage, next } = summaryQueriesIn(database)
  const placeAfter = ({ name, id }: Line) => ({ companyId, afterName: name, afterId: id })
  const page =
    cursor === undefined
      ? firstPage.get({ companyId, limit })
      : nextPage.get({ ...placeAfter(decodeCursor(cursor)), limit })
  const { items = '[]', count = 0 } = page ?? {}
  if (count < limit) return `{"items":${items},"nextCursor":null}`
  // No text of a name can hold this: its quotes would be escaped.
  const last = JSON.parse(items.slice(items.lastIndexOf('{"id":'), -1)) as RigSummary
  const nextCursor = next.get(placeAfter(last)) ? encodeCursor(last) : null
  return `{"items":${items},"nextCursor":${JSON.stringify(nextCursor)}}`
}
