import type { SiteProfile } from '#shared/contracts/sites.ts'
import { sites } from '../db/schema/index.ts'
import { queriesOf } from './recordQueries.ts'
import type { RecordKind } from './records.ts'
import { findRigsWith } from './rigUses.ts'
import { isTimeZone } from './timeZones.ts'

type SiteRow = typeof sites.$inferSelect

export const siteKind: RecordKind<SiteProfile, SiteRow> = {
  noun: 'site',
  queriesIn: queriesOf(sites),
  toColumns: (profile) => profile,
  toProfile: ({ name, altitudeM, airTemperatureC, relativeHumidityPct, timeZone }) => ({
    name,
    altitudeM,
    airTemperatureC,
    relativeHumidityPct,
    timeZone,
  }),
  findFaults: (_database, _companyId, { timeZone }) =>
    isTimeZone(timeZone)
      ? []
      : [{ path: '/timeZone', code: 'not-a-time-zone', message: `${timeZone} is not a time zone.` }],
  findUse: (database, row, intent) => findRigsWith(database, 'site', row, intent),
}
