import type { Fleet } from '#shared/contracts/rigs.ts'
import type { Actor } from '../actor.ts'
import { compressorKind } from './compressors.ts'
import { listRecords } from './records.ts'
import type { Context } from './records.ts'
import { rigKind } from './rigs.ts'
import { siteKind } from './sites.ts'
import { listRecentPicks } from './today.ts'

/** All that the screens compute verdicts from, as it was at one moment. */
export function readFleet({ database, now }: Context, { companyId }: Pick<Actor, 'companyId'>): Fleet {
  return database.queries.transaction(() => ({
    rigs: listRecords(rigKind, database, companyId),
    compressors: listRecords(compressorKind, database, companyId),
    sites: listRecords(siteKind, database, companyId),
    today: listRecentPicks(database, companyId, now()),
  }))
}
