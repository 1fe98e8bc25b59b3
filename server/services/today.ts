import { and, eq, gte, lte, sql } from 'drizzle-orm'
import type { Today, TodayInput } from '#shared/contracts/rigs.ts'
import type { Actor } from '../actor.ts'
import type { Database } from '../db/client.ts'
import { rigDays } from '../db/schema/index.ts'
import { writeAudit } from './audit.ts'
import { oncePerDatabase } from './recordQueries.ts'
import { refuseFaults } from './recordRules.ts'
import { findListed } from './records.ts'
import type { Context } from './records.ts'
import { findUnknownReferences, rigKind } from './rigs.ts'

const hourMs = 3600_000
/** the farthest that clocks are behind and ahead of UTC, with the day before where they are behind */
const behindMs = (12 + 24) * hourMs
const aheadMs = 14 * hourMs

const todayColumns = {
  rigId: rigDays.rigId,
  localDate: rigDays.localDate,
  compressorId: rigDays.compressorId,
  siteId: rigDays.siteId,
  pickedBy: rigDays.pickedBy,
  pickedAt: rigDays.pickedAt,
}

const queriesIn = oncePerDatabase(({ queries }) => {
  const isOfCompany = eq(rigDays.companyId, sql.placeholder('companyId'))
  return {
    find: queries
      .select(todayColumns)
      .from(rigDays)
      .where(
        and(
          isOfCompany,
          eq(rigDays.rigId, sql.placeholder('rigId')),
          eq(rigDays.localDate, sql.placeholder('localDate')),
        ),
      )
      .prepare(),
    between: queries
      .select(todayColumns)
      .from(rigDays)
      .where(
        and(
          isOfCompany,
          gte(rigDays.localDate, sql.placeholder('from')),
          lte(rigDays.localDate, sql.placeholder('until')),
        ),
      )
      .orderBy(rigDays.localDate, rigDays.rigId)
      .prepare(),
  }
})

/** The picks that may still be somebody's today or yesterday, wherever on the globe they are. */
export function listRecentPicks(database: Database, companyId: string, now: Date): Today[] {
  const dayAt = (ms: number) => new Date(ms).toISOString().slice(0, 10)
  const from = dayAt(now.getTime() - behindMs)
  const until = dayAt(now.getTime() + aheadMs)
  return queriesIn(database).between.all({ companyId, from, until })
}

/** What a rig has on one day: the last pick counts, and the same pick again is no other. */
export function pickToday(
  { database, now }: Context,
  actor: Actor,
  rigId: string,
  { localDate, compressorId, siteId }: TodayInput,
): Today {
  const { companyId } = actor
  return database.transact((writer) => {
    const rig = findListed(rigKind.queriesIn(database), companyId, rigId)
    refuseFaults(findUnknownReferences(database, companyId, { compressorId, siteId }))
    const before = queriesIn(database).find.get({ companyId, rigId, localDate })
    if (before && before.compressorId === compressorId && before.siteId === siteId) return before
    const at = now()
    const pick = {
      compressorId,
      siteId,
      pickedById: actor.accountId,
      pickedBy: actor.name,
      pickedAt: at.toISOString(),
    }
    writer
      .insert(rigDays)
      .values({ companyId, rigId, localDate, ...pick })
      .onConflictDoUpdate({ target: [rigDays.companyId, rigDays.rigId, rigDays.localDate], set: pick })
      .run()
    writeAudit(writer, actor, at, {
      action: 'rig.today-picked',
      subject: rig.name,
      subjectId: rigId,
      changes: {
        localDate: { from: before ? localDate : null, to: localDate },
        compressorId: { from: before?.compressorId ?? null, to: compressorId },
        siteId: { from: before?.siteId ?? null, to: siteId },
      },
    })
    const { pickedBy, pickedAt } = pick
    return { rigId, localDate, compressorId, siteId, pickedBy, pickedAt }
  })
}
