import { asc, eq } from 'drizzle-orm'
import type { CompressorRecord } from '#shared/contracts/compressors.ts'
import type { OutletProfile, RigRecord } from '#shared/contracts/rigs.ts'
import type { SiteRecord } from '#shared/contracts/sites.ts'
import type { Database } from '../db/client.ts'
import { accounts, companies, memberships, rigDays } from '../db/schema/index.ts'
import { compressorColumns } from '../tables/compressorColumns.ts'
import { exported } from '../tables/exportTable.ts'
import type { ExportColumn, ExportTable } from '../tables/exportTable.ts'
import { outletColumns, rigOwnColumns } from '../tables/rigColumns.ts'
import type { RecordFields } from './records.ts'

export function column<Row>(
  heading: string,
  description: string,
  write: ExportColumn<Row>['write'],
): ExportColumn<Row> {
  return { heading, description, write }
}

/** Where a record stands; an import reads none of it but whether it is archived. */
export function recordColumns<Row extends RecordFields>(): ExportColumn<Row>[] {
  return [
    column('id', 'the record’s own id', ({ id }) => id),
    column('version', 'how often it has been saved', ({ version }) => version),
    column('created_at', 'UTC', ({ createdAt }) => createdAt),
    column('updated_at', 'UTC', ({ updatedAt }) => updatedAt),
    column('updated_by', 'who saved it last', ({ updatedBy }) => updatedBy),
  ]
}

export function makeCompanyTable({ queries }: Database, companyId: string) {
  const rows = queries.select().from(companies).where(eq(companies.id, companyId)).all()
  return {
    name: 'company.csv',
    about: 'The company.',
    rows,
    columns: [
      column('name', 'text', ({ name }) => name),
      column('currency', 'three letters of ISO 4217', ({ currency }) => currency),
      column('language', 'en or es', ({ language }) => language),
      column('time_zone', 'a name such as America/Denver', ({ timeZone }) => timeZone),
    ],
  } satisfies ExportTable<(typeof rows)[number]>
}

export function makePeopleTable({ queries }: Database, companyId: string) {
  const rows = queries
    .select({ name: accounts.name, roles: memberships.roles, state: memberships.state })
    .from(memberships)
    .innerJoin(accounts, eq(accounts.id, memberships.accountId))
    .where(eq(memberships.companyId, companyId))
    .orderBy(asc(accounts.name))
    .all()
  return {
    name: 'people.csv',
    about: 'Who is or was with the company.',
    rows,
    columns: [
      column('name', 'text', ({ name }) => name),
      column('roles', 'with a space between', ({ roles }) => roles.join(' ')),
      column('state', 'active or deactivated', ({ state }) => state),
    ],
  } satisfies ExportTable<(typeof rows)[number]>
}

export function makeCompressorTable(rows: CompressorRecord[]): ExportTable<CompressorRecord> {
  return {
    name: 'compressors.csv',
    about: 'The compressors, as they can be imported again.',
    rows,
    columns: [...compressorColumns.map((one) => exported<CompressorRecord>(one)), ...recordColumns()],
  }
}

export function makeSiteTable(rows: SiteRecord[]): ExportTable<SiteRecord> {
  return {
    name: 'sites.csv',
    about: 'The sites.',
    rows,
    columns: [
      column('name', 'text', ({ name }) => name),
      column('altitude_m', 'm above the sea', ({ altitudeM }) => altitudeM),
      column('air_temperature_c', 'the usual heat, °C', ({ airTemperatureC }) => airTemperatureC),
      column('relative_humidity_pct', '%', ({ relativeHumidityPct }) => relativeHumidityPct),
      column('time_zone', 'a name such as America/Denver', ({ timeZone }) => timeZone),
      column('is_archived', 'yes or no', ({ isArchived }) => (isArchived ? 'yes' : 'no')),
      ...recordColumns<SiteRecord>(),
    ],
  }
}

/** The names that ids stand for: in a table that people read and import again. */
export interface Names {
  compressor(id: string | null): string | null
  site(id: string | null): string | null
  rig(id: string | null): string | null
  nozzle(id: string | null): string | null
  medium(id: string | null): string | null
}

export function makeRigTable(rigs: RigRecord[], names: Names): ExportTable<RigRecord> {
  const most = Math.max(1, ...rigs.map(({ outlets }) => outlets.length))
  const outlets = Array.from({ length: most }, (_, index) => outletColumns(index)).flat()
  return {
    name: 'rigs.csv',
    about: 'The rigs with their outlets side by side, as they can be imported again.',
    rows: rigs.map((rig) => ({
      ...rig,
      compressorId: names.compressor(rig.compressorId),
      siteId: names.site(rig.siteId),
    })),
    columns: [...[...rigOwnColumns, ...outlets].map((one) => exported<RigRecord>(one)), ...recordColumns()],
  }
}

interface OutletRow {
  rig: string
  number: number
  outlets: OutletProfile[]
}

export function makeOutletTable(rigs: RigRecord[]): ExportTable<OutletRow> {
  return {
    name: 'rig_outlets.csv',
    about: 'The same outlets, one a line.',
    rows: rigs.flatMap(({ name, outlets }) =>
      outlets.map((outlet, index) => ({ rig: name, number: index + 1, outlets: [outlet] })),
    ),
    columns: [
      column('rig', 'the rig’s name', ({ rig }) => rig),
      column('outlet', 'counted from 1', ({ number }) => number),
      ...outletColumns(0).map((one) => exported<OutletRow>(one)),
    ],
  }
}

export function makeTodayTable({ queries }: Database, companyId: string, names: Names) {
  const rows = queries
    .select()
    .from(rigDays)
    .where(eq(rigDays.companyId, companyId))
    .orderBy(asc(rigDays.localDate), asc(rigDays.rigId))
    .all()
  return {
    name: 'todays_picks.csv',
    about:
      'What each rig had on a day; empty is its usual compressor or site. Of a deleted record the id is shown.',
    rows,
    columns: [
      column('local_date', 'the day where the rig was', ({ localDate }) => localDate),
      column('rig', 'the rig’s name', ({ rigId }) => names.rig(rigId)),
      column('compressor', 'its name', ({ compressorId }) => names.compressor(compressorId)),
      column('site', 'its name', ({ siteId }) => names.site(siteId)),
      column('picked_by', 'who picked it', ({ pickedBy }) => pickedBy),
      column('picked_at', 'UTC', ({ pickedAt }) => pickedAt),
    ],
  } satisfies ExportTable<(typeof rows)[number]>
}
