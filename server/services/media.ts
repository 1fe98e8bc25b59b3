import type { NewMedium } from '#shared/contracts/media.ts'
import { media } from '../db/schema/index.ts'
import { queriesOf } from './recordQueries.ts'
import type { RecordKind } from './records.ts'

type MediumRow = typeof media.$inferSelect
export type MediumProfile = Omit<NewMedium, 'id'>

export const mediumKind: RecordKind<MediumProfile, MediumRow> = {
  noun: 'medium',
  plural: 'media',
  queriesIn: queriesOf(media),
  toColumns: (profile) => profile,
  toProfile: ({ name, abrasive, bulkDensityKgM3, mohsHardness, hasFreeSilica }) => ({
    name,
    abrasive,
    bulkDensityKgM3,
    mohsHardness,
    hasFreeSilica,
  }),
}
