import { and, eq, isNull, sql } from 'drizzle-orm'
import type { NewNozzle, NozzleRecord, UnknownNozzle } from '#shared/contracts/nozzles.ts'
import type { Actor } from '../actor.ts'
import type { Database } from '../db/client.ts'
import { nozzles, photos, rigs } from '../db/schema/index.ts'
import { oncePerDatabase, queriesOf } from './recordQueries.ts'
import { foldName } from './recordRules.ts'
import { createRecord } from './records.ts'
import type { Context, RecordKind } from './records.ts'
import { findUnknown } from './references.ts'

type NozzleRow = typeof nozzles.$inferSelect

/** With what no owner types: what it is called, and the photo of one whose tag nobody can read. */
export type NozzleProfile = Omit<NewNozzle, 'id'> & { name: string; photoId: string | null }

const standIn = /^unknown (\d{1,6})$/

/** The names of all that have no tag, deleted ones too: a stand-in is never given twice. */
const standInsIn = oncePerDatabase(({ queries }) =>
  queries
    .select({ name: nozzles.name })
    .from(nozzles)
    .where(and(eq(nozzles.companyId, sql.placeholder('companyId')), isNull(nozzles.tag)))
    .prepare(),
)

function makeStandIn(database: Database, companyId: string): string {
  const taken = new Set(
    nozzleKind
      .queriesIn(database)
      .names(companyId)
      .map(({ name }) => foldName(name)),
  )
  const numbers = standInsIn(database)
    .all({ companyId })
    .map(({ name }) => Number(standIn.exec(name)?.[1] ?? 0))
  let next = Math.max(0, ...numbers) + 1
  while (taken.has(`unknown ${next}`)) next += 1
  return `unknown ${next}`
}

export const nozzleKind: RecordKind<NozzleProfile, NozzleRow> = {
  noun: 'nozzle',
  nameField: 'tag',
  isNameFreedByArchiving: true,
  priceFields: ['priceMinor'],
  queriesIn: queriesOf(nozzles),
  toColumns: (profile) => profile,
  toProfile: ({
    name,
    tag,
    numberSixteenths,
    newBoreMm,
    shape,
    liner,
    dischargeCoefficient,
    thread,
    entryMm,
    hoursBefore,
    boxRigId,
    photoId,
    priceMinor,
  }) => ({
    name,
    tag,
    numberSixteenths,
    newBoreMm,
    shape,
    liner,
    dischargeCoefficient,
    thread,
    entryMm,
    hoursBefore,
    boxRigId,
    photoId,
    priceMinor,
  }),
  complete: (database, companyId, profile, before) => ({
    ...profile,
    name: profile.tag ?? (before?.tag === null ? before.name : makeStandIn(database, companyId)),
    photoId: before ? before.photoId : profile.photoId,
  }),
  findFaults: (database, companyId, { boxRigId, photoId }) => [
    ...findUnknown(database, companyId, { path: '/boxRigId', noun: 'rig', table: rigs, id: boxRigId }),
    ...findUnknown(database, companyId, { path: '/photoId', noun: 'photo', table: photos, id: photoId }),
  ],
}

/** What an owner sends of a nozzle, as it is kept. */
export function toNozzleProfile<Sent extends Omit<NewNozzle, 'id'>>(sent: Sent): Sent & NozzleProfile {
  return { ...sent, name: sent.tag ?? '', photoId: null }
}

/** A nozzle that was found on a rig and whose tag nobody can read: all else is for the owner to fill in. */
export function registerUnknown(
  context: Context,
  actor: Actor,
  { id, shape, boxRigId, photoId }: UnknownNozzle,
): NozzleRecord {
  const profile = toNozzleProfile({
    tag: null,
    numberSixteenths: null,
    newBoreMm: null,
    shape,
    liner: null,
    dischargeCoefficient: null,
    thread: null,
    entryMm: null,
    hoursBefore: null,
    boxRigId,
    priceMinor: null,
  })
  return createRecord(nozzleKind, context, actor, id, { ...profile, photoId })
}
