import { z } from 'zod'
import { recordFields } from './compressors.ts'
import { checkLimits, maxOutlets, snapTo64ths, workLimits } from './limits.ts'
import { idSchema, instantSchema, lineOfText, pageOf, ruleBroken, versionSchema, within } from './records.ts'

export const nozzleShapes = ['straight', 'venturi', 'double-venturi', 'fan', 'angle'] as const
export const liners = [
  'tungsten-carbide',
  'silicon-carbide',
  'silicon-nitride',
  'boron-carbide',
  'alumina',
  'steel',
] as const

const nozzleLength = () => within(checkLimits.boreMm).overwrite(snapTo64ths)

/** A nozzle as a thing. What nobody knows of it is null: a tag that cannot be read, a new bore nobody remembers. */
const nozzleFields = {
  /** a number, notches or paint marks; one of a kind among the company's nozzles that are not archived */
  tag: lineOfText(workLimits.tagLength).nullable(),
  numberSixteenths: z.number().int().min(1).max(37).nullable(),
  newBoreMm: nozzleLength().nullable(),
  shape: z.enum(nozzleShapes),
  liner: z.enum(liners).nullable(),
  dischargeCoefficient: within(checkLimits.dischargeCoefficient).nullable(),
  thread: lineOfText(workLimits.threadLength).nullable(),
  entryMm: within(checkLimits.insideDiameterMm).nullable(),
  /** equivalent hours that it had blasted before the first shift written down here; null: not known */
  hoursBefore: within(workLimits.hours).nullable(),
  /** the rig whose box it lies in; null: the shop */
  boxRigId: idSchema.nullable(),
}

/** minor units of the company's currency, for one nozzle; only for who may see prices */
const priceMinor = z.number().int().min(0).max(100_000_000).nullable()

function refineNozzle(
  { numberSixteenths, newBoreMm }: { numberSixteenths: number | null; newBoreMm: number | null },
  context: z.RefinementCtx,
): void {
  if (numberSixteenths === null || newBoreMm === null) return
  if (Math.abs((numberSixteenths * 25.4) / 16 - newBoreMm) <= 0.0005) return
  const message = 'The nozzle number and the new bore do not say the same.'
  context.addIssue(ruleBroken('number-and-bore-differ', message, ['newBoreMm']))
}

export const newNozzleSchema = z
  .strictObject({ ...nozzleFields, priceMinor, id: idSchema })
  .superRefine(refineNozzle)
export const nozzleChangeSchema = z
  .strictObject({ ...nozzleFields, priceMinor, version: versionSchema })
  .superRefine(refineNozzle)
/** "can't read it": all that the blaster can tell of a nozzle found on a rig */
export const unknownNozzleSchema = z.strictObject({
  id: idSchema,
  shape: z.enum(nozzleShapes),
  boxRigId: idSchema.nullable(),
  photoId: idSchema.nullable(),
})
export const nozzleRecordSchema = z.strictObject({
  ...nozzleFields,
  ...recordFields,
  /** the tag, or what stands in for one that cannot be read: “unknown 3” */
  name: z.string(),
  photoId: z.string().nullable(),
  /** absent for who may not see prices */
  priceMinor: priceMinor.optional(),
})
export const nozzlePageSchema = pageOf(nozzleRecordSchema)

/** What happens to a nozzle. The later event closes the earlier; nothing is refused for what another phone said. */
export const nozzleEventKinds = ['mounted', 'taken-off', 'broken', 'retired', 'put-back'] as const
export const breakages = ['cracked', 'chipped', 'worn-through', 'jacket', 'other'] as const

/** Made by whoever stands there, perhaps long before it arrives: its own time, with the offset of the clock it was read from. */
export const madeSchema = z.strictObject({ id: idSchema, at: instantSchema })

export const newNozzleEventSchema = madeSchema
  .extend({
    nozzleId: idSchema,
    kind: z.enum(nozzleEventKinds),
    /** where it is mounted, or was; null away from any rig */
    rigId: idSchema.nullable(),
    outletIndex: z
      .number()
      .int()
      .min(0)
      .max(maxOutlets - 1)
      .nullable(),
    breakage: z.enum(breakages).nullable(),
    note: lineOfText(workLimits.noteLength).nullable(),
  })
  .superRefine(({ kind, rigId, outletIndex, breakage }, context) => {
    if (kind === 'mounted' && (rigId === null || outletIndex === null)) {
      context.addIssue(ruleBroken('required', 'A nozzle is mounted on an outlet of a rig.', ['rigId']))
    }
    if (kind !== 'broken' && breakage !== null) {
      context.addIssue(ruleBroken('invalid', 'Only a broken nozzle has a breakage.', ['breakage']))
    }
  })
/** what the server adds to a record as it comes in */
export const receivedFields = { by: z.string(), receivedAt: z.string() }
export const nozzleEventSchema = z.strictObject({ ...newNozzleEventSchema.shape, ...receivedFields })

export type NozzleShape = (typeof nozzleShapes)[number]
export type Liner = (typeof liners)[number]
export type NozzleEventKind = (typeof nozzleEventKinds)[number]
export type Breakage = (typeof breakages)[number]
export type NewNozzle = z.infer<typeof newNozzleSchema>
export type NozzleChange = z.infer<typeof nozzleChangeSchema>
export type UnknownNozzle = z.infer<typeof unknownNozzleSchema>
export type NozzleRecord = z.infer<typeof nozzleRecordSchema>
export type NewNozzleEvent = z.infer<typeof newNozzleEventSchema>
export type NozzleEvent = z.infer<typeof nozzleEventSchema>
