import { z } from 'zod'
import { ABRASIVES } from '../catalogue/media.ts'
import { recordFields } from './compressors.ts'
import { workLimits } from './limits.ts'
import { idSchema, nameSchema, pageOf, versionSchema, within } from './records.ts'

/** A blasting medium of the company's list, from a generic type. */
const mediumFields = {
  name: nameSchema,
  abrasive: z.enum(ABRASIVES.map(({ id }) => id)),
  /** null: that of its type */
  bulkDensityKgM3: within(workLimits.bulkDensityKgM3).nullable(),
  mohsHardness: within(workLimits.mohsHardness).nullable(),
  /** blasting with it needs the rules on crystalline silica */
  hasFreeSilica: z.boolean(),
}

export const newMediumSchema = z.strictObject({ ...mediumFields, id: idSchema })
export const mediumChangeSchema = z.strictObject({ ...mediumFields, version: versionSchema })
export const mediumRecordSchema = z.strictObject({ ...mediumFields, ...recordFields })
export const mediumPageSchema = pageOf(mediumRecordSchema)

export type NewMedium = z.infer<typeof newMediumSchema>
export type MediumChange = z.infer<typeof mediumChangeSchema>
export type MediumRecord = z.infer<typeof mediumRecordSchema>
