import type { CompressorProfile } from '#shared/contracts/compressors.ts'
import { compressors } from '../db/schema/index.ts'
import { queriesOf } from './recordQueries.ts'
import type { RecordKind } from './records.ts'
import { findRigsWith } from './rigUses.ts'

type CompressorRow = typeof compressors.$inferSelect

export const compressorKind: RecordKind<CompressorProfile, CompressorRow> = {
  noun: 'compressor',
  queriesIn: queriesOf(compressors),
  toColumns: (profile) => profile,
  toProfile: ({
    name,
    ratedFreeAirM3Min,
    curve,
    setPressureKpa,
    unloadPressureKpa,
    cooling,
    engine,
    conditionFactor,
    fullLoadFuelLPerH,
    ownership,
    rentedFrom,
    rentedUntil,
  }) => ({
    name,
    ratedFreeAirM3Min,
    curve,
    setPressureKpa,
    unloadPressureKpa,
    cooling,
    engine,
    conditionFactor,
    fullLoadFuelLPerH,
    ownership,
    rentedFrom,
    rentedUntil,
  }),
  findUse: (database, row, intent) => findRigsWith(database, 'compressor', row, intent),
}
