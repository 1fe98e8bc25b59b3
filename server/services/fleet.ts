import type { Fleet } from '#shared/contracts/rigs.ts'
import type { Actor } from '../actor.ts'
import { compressorKind } from './compressors.ts'
import { listRecords } from './records.ts'
import type { Context } from './records.ts'
import { rigKind } from './rigs.ts'
import { siteKind } from './sites.ts'
import { listRecentPicks } from './today.ts'

/** All that the screens compute verdicts from, as it was at one moment. */
export function readFleet({ database, now }: Context, reader: Pick<Actor, 'companyId'>): Fleet {
  return database.queries.transaction(() => ({
    rigs: listRecords(rigKind, database, reader),
    compressors: listRecords(compressorKind, database, reader),
    sites: listRecords(siteKind, database, reader),
    today: listRecentPicks(database, reader.companyId, now()),
  }))
}
