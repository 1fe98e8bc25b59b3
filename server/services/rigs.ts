import { and, asc, eq, isNull, sql } from 'drizzle-orm'
import type { FieldError } from '#shared/contracts/problems.ts'
import type { RigProfile, RigSummary } from '#shared/contracts/rigs.ts'
import type { Actor } from '../actor.ts'
import type { Database } from '../db/client.ts'
import { rigs } from '../db/schema/index.ts'
import { compressorKind } from './compressors.ts'
import { readPage } from './pages.ts'
import type { Page, PageQuery } from './pages.ts'
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

const summaryColumns = {
  id: rigs.id,
  name: rigs.name,
  version: rigs.version,
  archivedAt: rigs.archivedAt,
  updatedAt: rigs.updatedAt,
}

const summaryQueriesIn = oncePerDatabase(({ queries }) => {
  const isListed = and(eq(rigs.companyId, sql.placeholder('companyId')), isNull(rigs.deletedAt))
  const page = (where: typeof isListed) =>
    queries
      .select(summaryColumns)
      .from(rigs)
      .where(where)
      .orderBy(asc(rigs.name), asc(rigs.id))
      .limit(sql.placeholder('limit'))
      .prepare()
  return { firstPage: page(isListed), nextPage: page(and(isListed, isAfter(rigs))) }
})

type SummaryValues = [id: string, name: string, version: number, archivedAt: string | null, updatedAt: string]

/**
 * The lines of the list: what is needed to choose a rig, and no more. It is asked for more than all else together, so
 * the driver's own rows are read, in the order of summaryColumns.
 */
export function listRigs(
  { database }: Pick<Context, 'database'>,
  { companyId }: Pick<Actor, 'companyId'>,
  query: PageQuery,
): Page<RigSummary> {
  const { firstPage, nextPage } = summaryQueriesIn(database)
  return readPage(query, (limit, after) => {
    const rows = after
      ? nextPage.values({ companyId, limit, afterName: after.name, afterId: after.id })
      : firstPage.values({ companyId, limit })
    return (rows as SummaryValues[]).map(([id, name, version, archivedAt, updatedAt]) => ({
      id,
      name,
      version,
      isArchived: archivedAt !== null,
      updatedAt,
    }))
  })
}
