import { foreignKey, index, integer, primaryKey, real, sqliteTable, text } from 'drizzle-orm/sqlite-core'
import type { AbrasiveId } from '#shared/catalogue/media.ts'
import type { BitSetName } from '#shared/contracts/check.ts'
import type { BoreCheckMethod } from '#shared/contracts/work.ts'
import type { Breakage, Liner, NozzleEventKind, NozzleShape } from '#shared/contracts/nozzles.ts'
import { instant, recordColumns } from '../columns.ts'
import { accounts, companies } from './accounts.ts'
import { compressors, rigs, sites } from './fleet.ts'

export const nozzles = sqliteTable(
  'nozzles',
  {
    ...recordColumns(),
    /** the tag, or what stands in for one that cannot be read: names are unique, tags are not asked of everybody */
    name: text('name').notNull(),
    tag: text('tag'),
    numberSixteenths: integer('number_sixteenths'),
    newBoreMm: real('new_bore_mm'),
    shape: text('shape').$type<NozzleShape>().notNull(),
    liner: text('liner').$type<Liner>(),
    dischargeCoefficient: real('discharge_coefficient'),
    thread: text('thread'),
    entryMm: real('entry_mm'),
    hoursBefore: real('hours_before'),
    boxRigId: text('box_rig_id'),
    photoId: text('photo_id'),
    priceMinor: integer('price_minor'),
  },
  (table) => [
    primaryKey({ columns: [table.companyId, table.id] }),
    foreignKey({ columns: [table.companyId], foreignColumns: [companies.id] }),
    foreignKey({ columns: [table.companyId, table.boxRigId], foreignColumns: [rigs.companyId, rigs.id] }),
    index('nozzles_name').on(table.companyId, table.name, table.id),
  ],
)

export const media = sqliteTable(
  'media',
  {
    ...recordColumns(),
    name: text('name').notNull(),
    abrasive: text('abrasive').$type<AbrasiveId>().notNull(),
    bulkDensityKgM3: real('bulk_density_kg_m3'),
    mohsHardness: real('mohs_hardness'),
    hasFreeSilica: integer('has_free_silica', { mode: 'boolean' }).notNull(),
  },
  (table) => [
    primaryKey({ columns: [table.companyId, table.id] }),
    foreignKey({ columns: [table.companyId], foreignColumns: [companies.id] }),
    index('media_name').on(table.companyId, table.name, table.id),
  ],
)

/** A record made where the work is done: its own id and time, kept as it came. */
const madeColumns = () => ({
  companyId: text('company_id').notNull(),
  id: text('id').notNull(),
  creationHash: text('creation_hash').notNull(),
  /** as the maker's clock had it, with its offset */
  at: text('at').notNull(),
  byId: text('by_id')
    .notNull()
    .references(() => accounts.id),
  by: text('by').notNull(),
  receivedAt: instant('received_at').notNull(),
  supersedesId: text('supersedes_id'),
})

export const nozzleEvents = sqliteTable(
  'nozzle_events',
  {
    ...madeColumns(),
    nozzleId: text('nozzle_id').notNull(),
    kind: text('kind').$type<NozzleEventKind>().notNull(),
    rigId: text('rig_id'),
    outletIndex: integer('outlet_index'),
    breakage: text('breakage').$type<Breakage>(),
    note: text('note'),
  },
  (table) => [
    primaryKey({ columns: [table.companyId, table.id] }),
    foreignKey({
      columns: [table.companyId, table.nozzleId],
      foreignColumns: [nozzles.companyId, nozzles.id],
    }),
    foreignKey({ columns: [table.companyId, table.rigId], foreignColumns: [rigs.companyId, rigs.id] }),
    index('nozzle_events_nozzle').on(table.companyId, table.nozzleId),
  ],
)

export const shifts = sqliteTable(
  'shifts',
  {
    ...madeColumns(),
    rigId: text('rig_id').notNull(),
    localDate: text('local_date').notNull(),
    blastHours: real('blast_hours').notNull(),
    mediumId: text('medium_id'),
    isWet: integer('is_wet', { mode: 'boolean' }).notNull(),
    nozzlePressureKpa: real('nozzle_pressure_kpa'),
    areaM2: real('area_m2'),
    note: text('note'),
  },
  (table) => [
    primaryKey({ columns: [table.companyId, table.id] }),
    foreignKey({ columns: [table.companyId, table.rigId], foreignColumns: [rigs.companyId, rigs.id] }),
    foreignKey({ columns: [table.companyId, table.mediumId], foreignColumns: [media.companyId, media.id] }),
    index('shifts_newest').on(table.companyId, table.localDate, table.receivedAt, table.id),
  ],
)

export const boreChecks = sqliteTable(
  'bore_checks',
  {
    ...madeColumns(),
    nozzleId: text('nozzle_id').notNull(),
    rigId: text('rig_id'),
    method: text('method').$type<BoreCheckMethod>().notNull(),
    bitSet: text('bit_set').$type<BitSetName>(),
    passedMm: real('passed_mm'),
    refusedMm: real('refused_mm'),
    boreMm: real('bore_mm'),
    accuracyMm: real('accuracy_mm'),
    looksOval: integer('looks_oval', { mode: 'boolean' }).notNull(),
    isCracked: integer('is_cracked', { mode: 'boolean' }).notNull(),
    photoId: text('photo_id'),
  },
  (table) => [
    primaryKey({ columns: [table.companyId, table.id] }),
    foreignKey({
      columns: [table.companyId, table.nozzleId],
      foreignColumns: [nozzles.companyId, nozzles.id],
    }),
    foreignKey({ columns: [table.companyId, table.rigId], foreignColumns: [rigs.companyId, rigs.id] }),
    index('bore_checks_nozzle').on(table.companyId, table.nozzleId),
  ],
)

export const gaugeReadings = sqliteTable(
  'gauge_readings',
  {
    ...madeColumns(),
    rigId: text('rig_id').notNull(),
    outletIndex: integer('outlet_index').notNull(),
    compressorId: text('compressor_id').notNull(),
    siteId: text('site_id').notNull(),
    nozzleId: text('nozzle_id'),
    compressorPressureKpa: real('compressor_pressure_kpa').notNull(),
    nozzlePressureKpa: real('nozzle_pressure_kpa').notNull(),
    boreMm: real('bore_mm').notNull(),
    compressorAccuracyKpa: real('compressor_accuracy_kpa'),
    nozzleAccuracyKpa: real('nozzle_accuracy_kpa'),
    setAsideBy: text('set_aside_by'),
    setAsideAt: instant('set_aside_at'),
  },
  (table) => [
    primaryKey({ columns: [table.companyId, table.id] }),
    foreignKey({ columns: [table.companyId, table.rigId], foreignColumns: [rigs.companyId, rigs.id] }),
    foreignKey({
      columns: [table.companyId, table.compressorId],
      foreignColumns: [compressors.companyId, compressors.id],
    }),
    foreignKey({ columns: [table.companyId, table.siteId], foreignColumns: [sites.companyId, sites.id] }),
  ],
)

/** What is known of a photo; the picture itself lies under uploads, by a name nobody can guess. */
export const photos = sqliteTable(
  'photos',
  {
    companyId: text('company_id')
      .notNull()
      .references(() => companies.id),
    id: text('id').notNull(),
    fileName: text('file_name').notNull(),
    /** of what was sent, so that sending it again is the same photo */
    contentHash: text('content_hash').notNull(),
    bytes: integer('bytes').notNull(),
    widthPx: integer('width_px').notNull(),
    heightPx: integer('height_px').notNull(),
    byId: text('by_id')
      .notNull()
      .references(() => accounts.id),
    by: text('by').notNull(),
    receivedAt: instant('received_at').notNull(),
  },
  (table) => [primaryKey({ columns: [table.companyId, table.id] })],
)
