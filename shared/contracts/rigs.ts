import { z } from 'zod'
import { ABRASIVES } from '../catalogue/media.ts'
import { bitSetNameSchema } from './check.ts'
import { compressorRecordSchema, recordFields } from './compressors.ts'
import { checkLimits, fleetLimits, maxOutlets, snapTo64ths } from './limits.ts'
import {
  idSchema,
  localDateSchema,
  nameSchema,
  pageOf,
  ruleBroken,
  versionSchema,
  within,
} from './records.ts'
import { siteRecordSchema } from './sites.ts'

/** A rig in the trade's parts. Pressures are gauge; null stands for the default of the check or for "none". */
const nozzleLength = () => within(checkLimits.boreMm).overwrite(snapTo64ths)

export const hoseProfileSchema = z
  .strictObject({
    insideDiameterMm: within(checkLimits.insideDiameterMm),
    /** null only where the loss was measured */
    lengthM: within(checkLimits.lengthM).nullable(),
    couplings: within(fleetLimits.couplings).int(),
    /** "5 psi at 185 cfm" takes the place of length and couplings */
    measured: z
      .strictObject({
        dropKpa: within(fleetLimits.dropKpa),
        freeAirM3Min: within(checkLimits.freeAirM3Min),
      })
      .nullable(),
    roughnessMm: within(checkLimits.roughnessMm).nullable(),
  })
  .superRefine(({ lengthM, measured }, context) => {
    if (lengthM !== null || measured !== null) return
    context.addIssue(ruleBroken('required', 'A hose has a length or a measured loss.', ['lengthM']))
  })

export const potProfileSchema = z.strictObject({
  insideDiameterMm: within(checkLimits.insideDiameterMm),
  lossK: within(checkLimits.lossK).nullable(),
  /** one pot feeds every outlet */
  isShared: z.boolean(),
})

export const nozzleProfileSchema = z
  .strictObject({
    /** the nozzle's number, its bore in sixteenths of an inch; null where the bore is no whole number of them */
    numberSixteenths: z.number().int().min(1).max(37).nullable(),
    newBoreMm: nozzleLength(),
    /** null: as new */
    boreNowMm: nozzleLength().nullable(),
    shape: z.enum(['venturi', 'straight']),
    loading: z.enum(['clean', 'lean', 'normal', 'heavy-or-wet']),
    /** null: from loading and shape */
    dischargeCoefficient: within(checkLimits.dischargeCoefficient).nullable(),
  })
  .superRefine(({ numberSixteenths, newBoreMm, boreNowMm }, context) => {
    if (boreNowMm !== null && boreNowMm < newBoreMm - 0.0005) {
      const message = 'A bore now is never under the new bore.'
      context.addIssue(ruleBroken('bore-now-under-new', message, ['boreNowMm']))
    }
    if (numberSixteenths !== null && Math.abs((numberSixteenths * 25.4) / 16 - newBoreMm) > 0.0005) {
      const message = 'The nozzle number and the new bore do not say the same.'
      context.addIssue(ruleBroken('number-and-bore-differ', message, ['newBoreMm']))
    }
  })

export const outletProfileSchema = z.strictObject({
  regulatorKpa: within(checkLimits.regulatorKpa).nullable(),
  hose: hoseProfileSchema.nullable(),
  whip: hoseProfileSchema.nullable(),
  nozzle: nozzleProfileSchema,
})

const rigFields = {
  name: nameSchema,
  airLine: hoseProfileSchema.nullable(),
  pot: potProfileSchema.nullable(),
  outlets: z.array(outletProfileSchema).min(1).max(maxOutlets),
  hoods: z.strictObject({
    count: within(fleetLimits.hoods).int(),
    freeAirEachM3Min: within(checkLimits.airTakenFirstM3Min),
  }),
  toolsFreeAirM3Min: within(checkLimits.airTakenFirstM3Min).nullable(),
  targetNozzlePressureKpa: within(checkLimits.targetNozzlePressureKpa),
  /** the bits in its box */
  bitSet: bitSetNameSchema,
  /** what it is usually hitched to and where it usually stands */
  compressorId: idSchema.nullable(),
  siteId: idSchema.nullable(),
  hour: z.strictObject({
    abrasive: z.enum(ABRASIVES.map(({ id }) => id)),
    mediaRateKgPerH: within(fleetLimits.mediaRateKgPerH).nullable(),
    bagMassKg: within(fleetLimits.bagMassKg).nullable(),
    isWet: z.boolean(),
    waterRateLPerMin: within(fleetLimits.waterRateLPerMin).nullable(),
    tankL: within(fleetLimits.tankL).nullable(),
  }),
}

export const rigProfileSchema = z.strictObject(rigFields)
export const newRigSchema = z.strictObject({ ...rigFields, id: idSchema })
export const rigChangeSchema = z.strictObject({ ...rigFields, version: versionSchema })
export const rigRecordSchema = z.strictObject({ ...rigFields, ...recordFields })

/** One line of the list, kept short: a page of a hundred loads at once on a bad connection. */
export const rigSummarySchema = z.strictObject({
  id: z.string(),
  name: z.string(),
  version: z.number().int(),
  isArchived: z.boolean(),
  updatedAt: z.string(),
})
export const rigPageSchema = pageOf(rigSummarySchema)

/** Machines are rented and swapped: what a rig has on one day, picked by whoever stands at it. */
export const todayInputSchema = z.strictObject({
  localDate: localDateSchema,
  compressorId: idSchema.nullable(),
  siteId: idSchema.nullable(),
})
export const todaySchema = z.strictObject({
  rigId: z.string(),
  localDate: z.string(),
  compressorId: z.string().nullable(),
  siteId: z.string().nullable(),
  pickedBy: z.string(),
  pickedAt: z.string(),
})

/** All that a company's people look at, whole: what the screens compute verdicts from. */
export const fleetSchema = z.strictObject({
  rigs: z.array(rigRecordSchema),
  compressors: z.array(compressorRecordSchema),
  sites: z.array(siteRecordSchema),
  /** the picks of the last two days anywhere on the globe */
  today: z.array(todaySchema),
})

export type HoseProfile = z.infer<typeof hoseProfileSchema>
export type PotProfile = z.infer<typeof potProfileSchema>
export type NozzleProfile = z.infer<typeof nozzleProfileSchema>
export type OutletProfile = z.infer<typeof outletProfileSchema>
export type RigProfile = z.infer<typeof rigProfileSchema>
export type NewRig = z.infer<typeof newRigSchema>
export type RigChange = z.infer<typeof rigChangeSchema>
export type RigRecord = z.infer<typeof rigRecordSchema>
export type RigSummary = z.infer<typeof rigSummarySchema>
export type TodayInput = z.infer<typeof todayInputSchema>
export type Today = z.infer<typeof todaySchema>
export type Fleet = z.infer<typeof fleetSchema>
