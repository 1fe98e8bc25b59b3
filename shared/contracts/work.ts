import { z } from 'zod'
import { bitSetNameSchema } from './check.ts'
import { checkLimits, maxOutlets, snapTo64ths, workLimits } from './limits.ts'
import { mediumRecordSchema } from './media.ts'
import { madeSchema, nozzleEventSchema, nozzleRecordSchema, receivedFields } from './nozzles.ts'
import { idSchema, lineOfText, localDateSchema, pageOf, ruleBroken, within } from './records.ts'

/** What crews write down: shifts, bore checks, gauges. A correction supersedes the earlier record, which stays. */

const supersedesId = idSchema.nullable()
const outletIndex = z
  .number()
  .int()
  .min(0)
  .max(maxOutlets - 1)
const nozzleLength = () => within(checkLimits.boreMm).overwrite(snapTo64ths)

export const newShiftSchema = madeSchema.extend({
  rigId: idSchema,
  localDate: localDateSchema,
  /** of blasting, at each outlet */
  blastHours: within(workLimits.shiftHours),
  mediumId: idSchema.nullable(),
  isWet: z.boolean(),
  /** by the needle gauge; null: what the check expects there */
  nozzlePressureKpa: within(checkLimits.targetNozzlePressureKpa).nullable(),
  areaM2: within(workLimits.areaM2).nullable(),
  note: lineOfText(workLimits.noteLength).nullable(),
  supersedesId,
})
export const shiftSchema = z.strictObject({ ...newShiftSchema.shape, ...receivedFields })
export const shiftPageSchema = pageOf(shiftSchema)

export const boreCheckMethods = ['bits', 'taper-gauge', 'caliper', 'pin'] as const
export const newBoreCheckSchema = madeSchema
  .extend({
    nozzleId: idSchema,
    /** the rig it was mounted on, where it was on one */
    rigId: idSchema.nullable(),
    method: z.enum(boreCheckMethods),
    /** bits: which set; the biggest that goes all the way through; the next one, that does not */
    bitSet: bitSetNameSchema.nullable(),
    passedMm: nozzleLength().nullable(),
    refusedMm: nozzleLength().nullable(),
    /** a gauge: what it reads, ± at 95 % */
    boreMm: nozzleLength().nullable(),
    accuracyMm: within(workLimits.accuracyMm).nullable(),
    looksOval: z.boolean(),
    isCracked: z.boolean(),
    photoId: idSchema.nullable(),
    supersedesId,
  })
  .superRefine(({ method, passedMm, refusedMm, boreMm, accuracyMm, isCracked }, context) => {
    if (method === 'bits') {
      // A crack is seen before any bit goes in, and none has to.
      if (passedMm === null && refusedMm === null && !isCracked) {
        context.addIssue(
          ruleBroken('required', 'A bit that went through, or one that did not.', ['passedMm']),
        )
      }
      if (passedMm !== null && refusedMm !== null && refusedMm <= passedMm) {
        const message = 'A bit that did not go through is bigger than one that did.'
        context.addIssue(ruleBroken('invalid', message, ['refusedMm']))
      }
    } else if (boreMm === null || accuracyMm === null) {
      const path = [boreMm === null ? 'boreMm' : 'accuracyMm']
      context.addIssue(ruleBroken('required', 'A gauge has a reading and an accuracy.', path))
    }
  })
export const boreCheckSchema = z.strictObject({ ...newBoreCheckSchema.shape, ...receivedFields })

/** Gauges read while one outlet blasts and every other is shut. Pressures are gauge. */
export const newGaugeReadingSchema = madeSchema.extend({
  rigId: idSchema,
  outletIndex,
  compressorId: idSchema,
  siteId: idSchema,
  nozzleId: idSchema.nullable(),
  compressorPressureKpa: within(checkLimits.setPressureKpa),
  nozzlePressureKpa: within(checkLimits.targetNozzlePressureKpa),
  boreMm: nozzleLength(),
  /** ± at 95 %; null: 3 % of the reading, no source */
  compressorAccuracyKpa: within(workLimits.gaugeAccuracyKpa).nullable(),
  nozzleAccuracyKpa: within(workLimits.gaugeAccuracyKpa).nullable(),
  supersedesId,
})
export const gaugeReadingSchema = z.strictObject({
  ...newGaugeReadingSchema.shape,
  ...receivedFields,
  /** set aside by the owner: kept, and not used */
  setAsideBy: z.string().nullable(),
  setAsideAt: z.string().nullable(),
})
export const setAsideSchema = z.strictObject({ isSetAside: z.boolean() })

/** The address of an upload carries the id; its body is the picture. */
export const photoQuerySchema = z.strictObject({ id: idSchema })
export const photoSchema = z.strictObject({
  id: z.string(),
  widthPx: z.number(),
  heightPx: z.number(),
  bytes: z.number(),
  by: z.string(),
  receivedAt: z.string(),
})

/** All of a company's nozzles and what was written down of them: what forecasts are computed from. */
export const workSchema = z.strictObject({
  nozzles: z.array(nozzleRecordSchema),
  events: z.array(nozzleEventSchema),
  media: z.array(mediumRecordSchema),
  shifts: z.array(shiftSchema),
  boreChecks: z.array(boreCheckSchema),
  gaugeReadings: z.array(gaugeReadingSchema),
})

export type NewShift = z.infer<typeof newShiftSchema>
export type Shift = z.infer<typeof shiftSchema>
export type NewBoreCheck = z.infer<typeof newBoreCheckSchema>
export type BoreCheck = z.infer<typeof boreCheckSchema>
export type BoreCheckMethod = (typeof boreCheckMethods)[number]
export type NewGaugeReading = z.infer<typeof newGaugeReadingSchema>
export type GaugeReading = z.infer<typeof gaugeReadingSchema>
export type Photo = z.infer<typeof photoSchema>
export type Work = z.infer<typeof workSchema>
