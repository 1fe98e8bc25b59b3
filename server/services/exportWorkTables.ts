import type { MediumRecord } from '#shared/contracts/media.ts'
import type { NozzleEvent, NozzleRecord } from '#shared/contracts/nozzles.ts'
import type { BoreCheck, GaugeReading, Shift } from '#shared/contracts/work.ts'
import type { ExportColumn, ExportTable } from '../tables/exportTable.ts'
import { column, recordColumns } from './exportTables.ts'
import type { Names } from './exportTables.ts'

const yesOrNo = (is: boolean) => (is ? 'yes' : 'no')

/** When something was made where the work is done, when it arrived, and what it corrects. */
function madeColumns<
  Row extends { id: string; at: string; by: string; receivedAt: string },
>(): ExportColumn<Row>[] {
  return [
    column('at', 'when it was made, by the maker’s clock', ({ at }) => at),
    column('by', 'who made it', ({ by }) => by),
    column('received_at', 'when it arrived, UTC', ({ receivedAt }) => receivedAt),
    column('id', 'the record’s own id', ({ id }) => id),
  ]
}

function correctionColumn<Row extends { supersedesId: string | null }>(): ExportColumn<Row> {
  return column(
    'supersedes_id',
    'the id of the record that this one corrects',
    ({ supersedesId }) => supersedesId,
  )
}

export function makeNozzleTable(rows: NozzleRecord[], names: Names): ExportTable<NozzleRecord> {
  return {
    name: 'nozzles.csv',
    about: 'The nozzles, each as a thing; what happened to them is in nozzle_events.csv.',
    rows,
    columns: [
      column('name', 'the tag, or what stands in for one that cannot be read', ({ name }) => name),
      column('tag', 'text', ({ tag }) => tag),
      column('number', 'the new bore in sixteenths of an inch', ({ numberSixteenths }) => numberSixteenths),
      column('new_bore_mm', 'mm', ({ newBoreMm }) => newBoreMm),
      column('shape', 'one word', ({ shape }) => shape),
      column('liner', 'one word', ({ liner }) => liner),
      column('coefficient', 'discharge coefficient', ({ dischargeCoefficient }) => dischargeCoefficient),
      column('thread', 'text', ({ thread }) => thread),
      column('entry_mm', 'mm', ({ entryMm }) => entryMm),
      column('hours_before', 'h, before the first shift written down here', ({ hoursBefore }) => hoursBefore),
      column('box', 'the rig whose box it lies in; empty is the shop', ({ boxRigId }) => names.rig(boxRigId)),
      {
        ...column<NozzleRecord>(
          'price_minor',
          'of one, in hundredths or whatever the currency’s smallest unit is',
          ({ priceMinor }) => priceMinor ?? null,
        ),
        isPrice: true,
      },
      column('is_archived', 'yes or no', ({ isArchived }) => yesOrNo(isArchived)),
      ...recordColumns<NozzleRecord>(),
    ],
  }
}

export function makeMediaTable(rows: MediumRecord[]): ExportTable<MediumRecord> {
  return {
    name: 'media.csv',
    about: 'The blasting media.',
    rows,
    columns: [
      column('name', 'text', ({ name }) => name),
      column('abrasive', 'its generic type', ({ abrasive }) => abrasive),
      column(
        'bulk_density_kg_m3',
        'kg/m³; empty is that of its type',
        ({ bulkDensityKgM3 }) => bulkDensityKgM3,
      ),
      column(
        'mohs_hardness',
        'on the scale of Mohs; empty is that of its type',
        ({ mohsHardness }) => mohsHardness,
      ),
      column('has_free_silica', 'yes or no', ({ hasFreeSilica }) => yesOrNo(hasFreeSilica)),
      column('is_archived', 'yes or no', ({ isArchived }) => yesOrNo(isArchived)),
      ...recordColumns<MediumRecord>(),
    ],
  }
}

const outletOf = ({ outletIndex }: { outletIndex: number | null }) =>
  outletIndex === null ? null : outletIndex + 1

export function makeEventTable(rows: NozzleEvent[], names: Names): ExportTable<NozzleEvent> {
  return {
    name: 'nozzle_events.csv',
    about: 'What happened to the nozzles, in the order in which it arrived.',
    rows,
    columns: [
      column('nozzle', 'its name', ({ nozzleId }) => names.nozzle(nozzleId)),
      column('event', 'one word', ({ kind }) => kind),
      column('rig', 'the rig’s name', ({ rigId }) => names.rig(rigId)),
      column('outlet', 'counted from 1', outletOf),
      column('breakage', 'one word', ({ breakage }) => breakage),
      column('note', 'text', ({ note }) => note),
      ...madeColumns<NozzleEvent>(),
    ],
  }
}

export function makeShiftTable(rows: Shift[], names: Names): ExportTable<Shift> {
  return {
    name: 'shifts.csv',
    about: 'The hours that were blasted; one that another supersedes no longer counts.',
    rows,
    columns: [
      column('date', 'the day where the rig was', ({ localDate }) => localDate),
      column('rig', 'the rig’s name', ({ rigId }) => names.rig(rigId)),
      column('hours', 'h of blasting', ({ blastHours }) => blastHours),
      column('medium', 'its name', ({ mediumId }) => names.medium(mediumId)),
      column('is_wet', 'yes or no', ({ isWet }) => yesOrNo(isWet)),
      column('nozzle_pressure_kpa', 'kPa', ({ nozzlePressureKpa }) => nozzlePressureKpa),
      column('area_m2', 'm² cleaned', ({ areaM2 }) => areaM2),
      column('note', 'text', ({ note }) => note),
      correctionColumn<Shift>(),
      ...madeColumns<Shift>(),
    ],
  }
}

export function makeBoreCheckTable(rows: BoreCheck[], names: Names): ExportTable<BoreCheck> {
  return {
    name: 'bore_checks.csv',
    about: 'What the bores measured; one that another supersedes no longer counts.',
    rows,
    columns: [
      column('nozzle', 'its name', ({ nozzleId }) => names.nozzle(nozzleId)),
      column('rig', 'the rig it was on', ({ rigId }) => names.rig(rigId)),
      column('method', 'one word', ({ method }) => method),
      column('bit_set', 'which bits', ({ bitSet }) => bitSet),
      column('passed_mm', 'mm of the biggest bit that went through', ({ passedMm }) => passedMm),
      column('refused_mm', 'mm of the next one, that did not', ({ refusedMm }) => refusedMm),
      column('bore_mm', 'mm by a gauge', ({ boreMm }) => boreMm),
      column('accuracy_mm', 'mm more or less, 19 times out of 20', ({ accuracyMm }) => accuracyMm),
      column('looks_oval', 'yes or no', ({ looksOval }) => yesOrNo(looksOval)),
      column('is_cracked', 'yes or no', ({ isCracked }) => yesOrNo(isCracked)),
      correctionColumn<BoreCheck>(),
      ...madeColumns<BoreCheck>(),
    ],
  }
}

export function makeGaugeTable(rows: GaugeReading[], names: Names): ExportTable<GaugeReading> {
  return {
    name: 'gauge_readings.csv',
    about: 'Gauges read while one outlet blasted; one that is superseded or set aside no longer counts.',
    rows,
    columns: [
      column('rig', 'the rig’s name', ({ rigId }) => names.rig(rigId)),
      column('outlet', 'counted from 1', outletOf),
      column('compressor', 'its name', ({ compressorId }) => names.compressor(compressorId)),
      column('site', 'its name', ({ siteId }) => names.site(siteId)),
      column('nozzle', 'its name', ({ nozzleId }) => names.nozzle(nozzleId)),
      column('compressor_pressure_kpa', 'kPa', ({ compressorPressureKpa }) => compressorPressureKpa),
      column(
        'compressor_accuracy_kpa',
        'kPa more or less',
        ({ compressorAccuracyKpa }) => compressorAccuracyKpa,
      ),
      column('nozzle_pressure_kpa', 'kPa', ({ nozzlePressureKpa }) => nozzlePressureKpa),
      column('nozzle_accuracy_kpa', 'kPa more or less', ({ nozzleAccuracyKpa }) => nozzleAccuracyKpa),
      column('bore_mm', 'mm', ({ boreMm }) => boreMm),
      column('set_aside_by', 'who set it aside', ({ setAsideBy }) => setAsideBy),
      column('set_aside_at', 'UTC', ({ setAsideAt }) => setAsideAt),
      correctionColumn<GaugeReading>(),
      ...madeColumns<GaugeReading>(),
    ],
  }
}
