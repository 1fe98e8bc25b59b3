import { z } from 'zod'
import { curvePointSchema, checkCompressorRules } from './check.ts'
import { checkLimits, fleetLimits, maxCurvePoints } from './limits.ts'
import {
  idSchema,
  localDateSchema,
  nameSchema,
  pageOf,
  ruleBroken,
  versionSchema,
  within,
} from './records.ts'

/** A compressor as its plate and its keeper say; null stands for the default of the check. Pressures are gauge. */
const compressorFields = {
  name: nameSchema,
  ratedFreeAirM3Min: within(checkLimits.freeAirM3Min),
  /** with points the plate's free air is not used; empty: flat by the plate */
  curve: z.array(curvePointSchema).max(maxCurvePoints),
  setPressureKpa: within(checkLimits.setPressureKpa),
  /** null: set + 20 psi */
  unloadPressureKpa: within(checkLimits.unloadPressureKpa).nullable(),
  cooling: z.enum(['aftercooled', 'bare']),
  engine: z.enum(['natural', 'turbo']).nullable(),
  /** how much of its plate it delivers; null: all */
  conditionFactor: within(checkLimits.conditionFactor).nullable(),
  fullLoadFuelLPerH: within(fleetLimits.fullLoadFuelLPerH).nullable(),
  ownership: z.enum(['owned', 'rented']),
  /** days of the rental, both included; null where it is owned or not known */
  rentedFrom: localDateSchema.nullable(),
  rentedUntil: localDateSchema.nullable(),
}

function refineCompressor(
  compressor: z.infer<z.ZodObject<typeof compressorFields>>,
  context: z.RefinementCtx,
): void {
  checkCompressorRules(compressor, context)
  const { ownership, rentedFrom, rentedUntil } = compressor
  if (ownership === 'owned' && (rentedFrom !== null || rentedUntil !== null)) {
    const path = [rentedFrom !== null ? 'rentedFrom' : 'rentedUntil']
    context.addIssue(ruleBroken('invalid', 'A compressor that is owned has no rental dates.', path))
  }
  if (rentedFrom !== null && rentedUntil !== null && rentedUntil < rentedFrom) {
    context.addIssue(ruleBroken('dates-reversed', 'The rental ends before it begins.', ['rentedUntil']))
  }
}

export const compressorProfileSchema = z.strictObject(compressorFields).superRefine(refineCompressor)
export const newCompressorSchema = z
  .strictObject({ ...compressorFields, id: idSchema })
  .superRefine(refineCompressor)
export const compressorChangeSchema = z
  .strictObject({ ...compressorFields, version: versionSchema })
  .superRefine(refineCompressor)

/** What every saved record of the fleet carries beside its own fields. */
export const recordFields = {
  id: z.string(),
  version: z.number().int(),
  isArchived: z.boolean(),
  createdAt: z.string(),
  updatedAt: z.string(),
  updatedBy: z.string(),
}
export const compressorRecordSchema = z.strictObject({ ...compressorFields, ...recordFields })
export const compressorPageSchema = pageOf(compressorRecordSchema)

export type CompressorProfile = z.infer<typeof compressorProfileSchema>
export type NewCompressor = z.infer<typeof newCompressorSchema>
export type CompressorChange = z.infer<typeof compressorChangeSchema>
export type CompressorRecord = z.infer<typeof compressorRecordSchema>
