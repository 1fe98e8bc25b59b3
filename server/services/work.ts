import { and, desc, eq, sql } from 'drizzle-orm'
import { recordLimits } from '#shared/contracts/limits.ts'
import type { GaugeReading, Shift, Work } from '#shared/contracts/work.ts'
import type { Actor } from '../actor.ts'
import { gaugeReadings, shifts } from '../db/schema/index.ts'
import { makeProblem } from '../problems.ts'
import { writeAudit } from './audit.ts'
import { findMade, listMade } from './madeRecords.ts'
import { mediumKind } from './media.ts'
import { nozzleKind } from './nozzles.ts'
import { decodeCursor, encodeCursor } from './pages.ts'
import type { Page, PageQuery } from './pages.ts'
import { oncePerDatabase } from './recordQueries.ts'
import { listRecords } from './records.ts'
import type { Context } from './records.ts'
import { rigKind } from './rigs.ts'
import { boreCheckKind, gaugeReadingKind, nozzleEventKind, shiftKind } from './workKinds.ts'

/** All nozzles and what was written down of them, as it was at one moment. */
export function readWork({ database }: Pick<Context, 'database'>, actor: Actor): Work {
  const { companyId } = actor
  return database.queries.transaction(() => ({
    nozzles: listRecords(nozzleKind, database, actor),
    events: listMade(nozzleEventKind, database, companyId),
    media: listRecords(mediumKind, database, actor),
    shifts: listMade(shiftKind, database, companyId),
    boreChecks: listMade(boreCheckKind, database, companyId),
    gaugeReadings: listMade(gaugeReadingKind, database, companyId),
  }))
}

const shiftQueriesIn = oncePerDatabase(({ queries }) => {
  const isOfCompany = eq(shifts.companyId, sql.placeholder('companyId'))
  const place = sql`(${shifts.localDate}, ${shifts.receivedAt}, ${shifts.id})`
  const after = sql`(${sql.placeholder('localDate')}, ${sql.placeholder('receivedAt')}, ${sql.placeholder('id')})`
  const page = (where: typeof isOfCompany | undefined) =>
    queries
      .select()
      .from(shifts)
      .where(where)
      .orderBy(desc(shifts.localDate), desc(shifts.receivedAt), desc(shifts.id))
      .limit(sql.placeholder('limit'))
      .prepare()
  return { first: page(isOfCompany), next: page(and(isOfCompany, sql`${place} < ${after}`)) }
})

/** Newest day first; of one day, what came last first. */
export function listShifts(
  { database }: Pick<Context, 'database'>,
  { companyId }: Pick<Actor, 'companyId'>,
  { cursor, limit = recordLimits.pageSize }: PageQuery,
): Page<Shift> {
  const { first, next } = shiftQueriesIn(database)
  let rows
  if (cursor === undefined) rows = first.all({ companyId, limit: limit + 1 })
  else {
    const { name, id } = decodeCursor(cursor)
    const [localDate = '', receivedAt = ''] = name.split(' ')
    rows = next.all({ companyId, limit: limit + 1, localDate, receivedAt, id })
  }
  const items = rows.slice(0, limit)
  const last = items.at(-1)
  const isMore = rows.length > limit && last !== undefined
  return {
    items: items.map((row) => shiftKind.toAnswer(row as never)),
    nextCursor: isMore ? encodeCursor({ name: `${last.localDate} ${last.receivedAt}`, id: last.id }) : null,
  }
}

/** Whether a reading is used: the reading itself stays as it was read. */
export function setGaugesAside(
  { database, now }: Context,
  actor: Actor,
  id: string,
  { isSetAside }: { isSetAside: boolean },
): GaugeReading {
  const { companyId, name } = actor
  return database.transact((writer) => {
    const before = findMade(gaugeReadingKind, database, companyId, id)
    if (!before) throw makeProblem('not-found', 'There is nothing at this address.')
    const reading = gaugeReadingKind.toAnswer(before as never)
    if ((reading.setAsideAt !== null) === isSetAside) return reading
    const at = now()
    const set = { setAsideBy: isSetAside ? name : null, setAsideAt: isSetAside ? at.toISOString() : null }
    writer
      .update(gaugeReadings)
      .set(set)
      .where(and(eq(gaugeReadings.companyId, companyId), eq(gaugeReadings.id, id)))
      .run()
    writeAudit(writer, actor, at, {
      action: isSetAside ? 'gauges.set-aside' : 'gauges.used-again',
      subject: rigKind.queriesIn(database).find(companyId, reading.rigId)?.name ?? reading.rigId,
      subjectId: id,
    })
    return { ...reading, ...set }
  })
}
