import { z } from 'zod'
import { cautionCodes } from './cautions.ts'
import {
  checkLimits,
  maxCurvePoints,
  maxDraws,
  maxElements,
  maxNameLength,
  maxOutlets,
  minCurvePoints,
  minUnloadAboveSetKpa,
  snapTo64ths,
} from './limits.ts'
import { ruleBroken, within } from './records.ts'

const nozzleLength = () => within(checkLimits.boreMm).overwrite(snapTo64ths)
const name = () => z.string().max(maxNameLength)

export const siteSchema = z.strictObject({
  altitudeM: within(checkLimits.altitudeM),
  airTemperatureC: within(checkLimits.airTemperatureC),
  relativeHumidityPct: within(checkLimits.relativeHumidityPct).optional(),
  barometerKpa: within(checkLimits.barometerKpa).optional(),
})

export const curvePointSchema = z.strictObject({
  pressureKpa: within(checkLimits.curvePressureKpa),
  freeAirM3Min: within(checkLimits.freeAirM3Min),
})

export const compressorSchema = z
  .strictObject({
    ratedFreeAirM3Min: within(checkLimits.freeAirM3Min).optional(),
    curve: z.array(curvePointSchema).min(minCurvePoints).max(maxCurvePoints).optional(),
    setPressureKpa: within(checkLimits.setPressureKpa),
    unloadPressureKpa: within(checkLimits.unloadPressureKpa),
    conditionFactor: within(checkLimits.conditionFactor).optional(),
    lineTemperatureRiseK: within(checkLimits.lineTemperatureRiseK).optional(),
    engine: z.enum(['natural', 'turbo']).optional(),
  })
  .superRefine((compressor, context) => {
    if ((compressor.ratedFreeAirM3Min === undefined) === (compressor.curve === undefined)) {
      context.addIssue(
        ruleBroken('one-of-two', 'Give either ratedFreeAirM3Min or a curve, not both and not neither.', [
          compressor.curve === undefined ? 'ratedFreeAirM3Min' : 'curve',
        ]),
      )
    }
    checkCompressorRules(compressor, context)
  })

/** What must hold between the fields of a compressor, asked about or saved. */
export function checkCompressorRules(
  compressor: {
    setPressureKpa: number
    unloadPressureKpa: number | null
    curve?: { pressureKpa: number; freeAirM3Min: number }[] | undefined
  },
  context: z.RefinementCtx,
): void {
  const { setPressureKpa, unloadPressureKpa, curve = [] } = compressor
  if (unloadPressureKpa !== null && unloadPressureKpa < setPressureKpa + minUnloadAboveSetKpa) {
    const message = `unloadPressureKpa must be at least ${minUnloadAboveSetKpa} kPa above setPressureKpa.`
    context.addIssue(ruleBroken('unload-too-near-set', message, ['unloadPressureKpa']))
  }
  curve.forEach((point, index) => {
    const before = curve[index - 1]
    if (before === undefined) return
    if (point.pressureKpa <= before.pressureKpa) {
      const message = 'Each point of the curve must be at a higher pressure than the one before it.'
      context.addIssue(ruleBroken('curve-pressure-not-rising', message, ['curve', index, 'pressureKpa']))
    }
    if (point.freeAirM3Min > before.freeAirM3Min) {
      const message = 'Free air may not rise with pressure along the curve.'
      context.addIssue(ruleBroken('curve-free-air-rising', message, ['curve', index, 'freeAirM3Min']))
    }
  })
}

export const elementSchema = z.strictObject({
  name: name().optional(),
  insideDiameterMm: within(checkLimits.insideDiameterMm),
  lengthM: within(checkLimits.lengthM).optional(),
  roughnessMm: within(checkLimits.roughnessMm).optional(),
  lossK: within(checkLimits.lossK).optional(),
  mediaFactor: within(checkLimits.mediaFactor).optional(),
})

export const nozzleSchema = z.strictObject({
  boreMm: nozzleLength(),
  newBoreMm: nozzleLength().optional(),
  dischargeCoefficient: within(checkLimits.dischargeCoefficient).optional(),
})

export const outletSchema = z.strictObject({
  line: z.array(elementSchema).max(maxElements),
  regulatorKpa: within(checkLimits.regulatorKpa).optional(),
  nozzle: nozzleSchema,
})

export const airDrawSchema = z.strictObject({
  name: name(),
  freeAirM3Min: within(checkLimits.airTakenFirstM3Min),
})

export const bitSetNameSchema = z.enum([
  'fractional-64',
  'fractional-32',
  'metric-0.5',
  'metric-0.1',
  'number-letter',
])

export const checkRequestSchema = z.strictObject({
  site: siteSchema,
  compressor: compressorSchema,
  airLine: z.array(elementSchema).max(maxElements),
  outlets: z.array(outletSchema).max(maxOutlets),
  airTakenFirst: z.array(airDrawSchema).max(maxDraws),
  targetNozzlePressureKpa: within(checkLimits.targetNozzlePressureKpa),
  bitSet: bitSetNameSchema.optional(),
})

export const verdictSchema = z.enum(['holds', 'barely-holds', 'falls-short', 'cannot-run'])

export const bitSchema = z.strictObject({ name: z.string(), mm: z.number() })

export const cautionSchema = z.strictObject({
  code: z.enum(cautionCodes),
  sizePct: z.number(),
  text: z.string(),
})

export const operatingPointSchema = z.strictObject({
  compressorPressureKpa: z.number(),
  freeAirM3Min: z.number(),
  outlets: z.array(
    z.strictObject({
      nozzlePressureKpa: z.number(),
      freeAirM3Min: z.number(),
      massFlowKgS: z.number(),
      choked: z.boolean(),
    }),
  ),
})

export const atTargetSchema = z.strictObject({
  requiredFreeAirM3Min: z.number(),
  requiredCompressorPressureKpa: z.number(),
  deliveredFreeAirM3Min: z.number(),
  airMarginPct: z.number(),
})

export const outletAnswerSchema = z.strictObject({
  limitBoreMm: z.number().nullable(),
  limitedBy: z.enum(['air', 'line', 'regulator', 'air-line']).nullable(),
  reason: z.string().nullable(),
  noGoBit: bitSchema.nullable(),
  orderBit: bitSchema.nullable(),
})

export const checkAnswerSchema = z.strictObject({
  verdict: verdictSchema,
  reason: z.string().nullable(),
  operatingPoint: operatingPointSchema.nullable(),
  atTarget: atTargetSchema.nullable(),
  outlets: z.array(outletAnswerSchema),
  waterToDrainLPerHour: z.number().nullable(),
  cautions: z.array(cautionSchema),
})

export type CheckRequest = z.infer<typeof checkRequestSchema>
export type CheckSite = z.infer<typeof siteSchema>
export type CheckCompressor = z.infer<typeof compressorSchema>
export type CheckElement = z.infer<typeof elementSchema>
export type CheckOutlet = z.infer<typeof outletSchema>
export type CheckNozzle = z.infer<typeof nozzleSchema>
export type CheckAirDraw = z.infer<typeof airDrawSchema>
export type BitSetName = z.infer<typeof bitSetNameSchema>
export type CheckAnswer = z.infer<typeof checkAnswerSchema>
export type Verdict = z.infer<typeof verdictSchema>
export type CheckBit = z.infer<typeof bitSchema>
export type CheckCaution = z.infer<typeof cautionSchema>
export type OutletAnswer = z.infer<typeof outletAnswerSchema>
