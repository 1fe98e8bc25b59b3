import { foreignKey, index, integer, primaryKey, real, sqliteTable, text } from 'drizzle-orm/sqlite-core'
import type { CompressorProfile } from '#shared/contracts/compressors.ts'
import type { RigProfile } from '#shared/contracts/rigs.ts'
import { instant, recordColumns } from '../columns.ts'
import { accounts, companies } from './accounts.ts'

export const compressors = sqliteTable(
  'compressors',
  {
    ...recordColumns(),
    name: text('name').notNull(),
    ratedFreeAirM3Min: real('rated_free_air_m3_min').notNull(),
    curve: text('curve', { mode: 'json' }).$type<CompressorProfile['curve']>().notNull(),
    setPressureKpa: real('set_pressure_kpa').notNull(),
    unloadPressureKpa: real('unload_pressure_kpa'),
    cooling: text('cooling', { enum: ['aftercooled', 'bare'] }).notNull(),
    engine: text('engine', { enum: ['natural', 'turbo'] }),
    conditionFactor: real('condition_factor'),
    fullLoadFuelLPerH: real('full_load_fuel_l_per_h'),
    ownership: text('ownership', { enum: ['owned', 'rented'] }).notNull(),
    rentedFrom: text('rented_from'),
    rentedUntil: text('rented_until'),
  },
  (table) => [
    primaryKey({ columns: [table.companyId, table.id] }),
    foreignKey({ columns: [table.companyId], foreignColumns: [companies.id] }),
    index('compressors_name').on(table.companyId, table.name, table.id),
  ],
)

export const sites = sqliteTable(
  'sites',
  {
    ...recordColumns(),
    name: text('name').notNull(),
    altitudeM: real('altitude_m').notNull(),
    airTemperatureC: real('air_temperature_c').notNull(),
    relativeHumidityPct: real('relative_humidity_pct'),
    timeZone: text('time_zone').notNull(),
  },
  (table) => [
    primaryKey({ columns: [table.companyId, table.id] }),
    foreignKey({ columns: [table.companyId], foreignColumns: [companies.id] }),
    index('sites_name').on(table.companyId, table.name, table.id),
  ],
)

/** A rig's lists are read and written whole, so they are kept whole; what is asked about has a column. */
export const rigs = sqliteTable(
  'rigs',
  {
    ...recordColumns(),
    name: text('name').notNull(),
    airLine: text('air_line', { mode: 'json' }).$type<RigProfile['airLine']>(),
    pot: text('pot', { mode: 'json' }).$type<RigProfile['pot']>(),
    outlets: text('outlets', { mode: 'json' }).$type<RigProfile['outlets']>().notNull(),
    hoodCount: integer('hood_count').notNull(),
    hoodFreeAirM3Min: real('hood_free_air_m3_min').notNull(),
    toolsFreeAirM3Min: real('tools_free_air_m3_min'),
    targetNozzlePressureKpa: real('target_nozzle_pressure_kpa').notNull(),
    bitSet: text('bit_set').$type<RigProfile['bitSet']>().notNull(),
    compressorId: text('compressor_id'),
    siteId: text('site_id'),
    hour: text('hour', { mode: 'json' }).$type<RigProfile['hour']>().notNull(),
  },
  (table) => [
    primaryKey({ columns: [table.companyId, table.id] }),
    foreignKey({ columns: [table.companyId], foreignColumns: [companies.id] }),
    foreignKey({
      columns: [table.companyId, table.compressorId],
      foreignColumns: [compressors.companyId, compressors.id],
    }),
    foreignKey({ columns: [table.companyId, table.siteId], foreignColumns: [sites.companyId, sites.id] }),
    index('rigs_name').on(table.companyId, table.name, table.id),
  ],
)

/** What a rig has on one day; the last pick of the day counts. */
export const rigDays = sqliteTable(
  'rig_days',
  {
    companyId: text('company_id').notNull(),
    rigId: text('rig_id').notNull(),
    localDate: text('local_date').notNull(),
    compressorId: text('compressor_id'),
    siteId: text('site_id'),
    pickedById: text('picked_by_id')
      .notNull()
      .references(() => accounts.id),
    pickedBy: text('picked_by').notNull(),
    pickedAt: instant('picked_at').notNull(),
  },
  (table) => [
    primaryKey({ columns: [table.companyId, table.rigId, table.localDate] }),
    foreignKey({ columns: [table.companyId, table.rigId], foreignColumns: [rigs.companyId, rigs.id] }),
    foreignKey({
      columns: [table.companyId, table.compressorId],
      foreignColumns: [compressors.companyId, compressors.id],
    }),
    foreignKey({ columns: [table.companyId, table.siteId], foreignColumns: [sites.companyId, sites.id] }),
    index('rig_days_date').on(table.companyId, table.localDate),
  ],
)
