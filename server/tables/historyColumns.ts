import { z } from 'zod'
import { bitSetNameSchema } from '#shared/contracts/check.ts'
import { checkLimits, maxOutlets, snapTo64ths, workLimits } from '#shared/contracts/limits.ts'
import { idSchema, lineOfText, localDateSchema, ruleBroken, within } from '#shared/contracts/records.ts'
import { boreCheckMethods } from '#shared/contracts/work.ts'
import { choiceCell, dateCell, numberCell, quantityCell, textCell, yesNoCell } from './cells.ts'
import type { Column } from './columns.ts'

const bore = quantityCell('bore', checkLimits.boreMm)

/** One line of a paper log: hours of a rig on a day, a check of a nozzle, or both. */
export const historyColumns: readonly Column[] = [
  { field: 'date', path: ['localDate'], cell: dateCell, isRequired: true },
  { field: 'rig', path: ['rigId'], cell: textCell },
  { field: 'outlet', path: ['outlet'], cell: numberCell },
  { field: 'nozzle', path: ['nozzleId'], cell: textCell },
  { field: 'hours', path: ['blastHours'], cell: numberCell },
  { field: 'medium', path: ['mediumId'], cell: textCell },
  { field: 'is_wet', path: ['isWet'], cell: yesNoCell },
  {
    field: 'nozzle_pressure',
    path: ['nozzlePressureKpa'],
    cell: quantityCell('pressure', checkLimits.targetNozzlePressureKpa),
  },
  { field: 'passed', path: ['passedMm'], cell: bore },
  { field: 'refused', path: ['refusedMm'], cell: bore },
  { field: 'bit_set', path: ['bitSet'], cell: choiceCell(bitSetNameSchema.options) },
  { field: 'bore', path: ['boreMm'], cell: bore },
  { field: 'accuracy', path: ['accuracyMm'], cell: quantityCell('diameter', workLimits.accuracyMm) },
  {
    field: 'method',
    path: ['method'],
    cell: choiceCell(boreCheckMethods.filter((method) => method !== 'bits')),
  },
  { field: 'looks_oval', path: ['looksOval'], cell: yesNoCell },
  { field: 'is_cracked', path: ['isCracked'], cell: yesNoCell },
  { field: 'note', path: ['note'], cell: textCell },
]

export function makeHistoryDraft(): object {
  return {
    rigId: null,
    outlet: null,
    nozzleId: null,
    blastHours: null,
    mediumId: null,
    isWet: false,
    nozzlePressureKpa: null,
    passedMm: null,
    refusedMm: null,
    bitSet: null,
    boreMm: null,
    accuracyMm: null,
    method: null,
    looksOval: false,
    isCracked: false,
    note: null,
  }
}

const nozzleLength = () => within(checkLimits.boreMm).overwrite(snapTo64ths).nullable()

export const historyRowSchema = z
  .strictObject({
    localDate: localDateSchema,
    rigId: idSchema.nullable(),
    /** counted from 1; empty: the first */
    outlet: z.number().int().min(1).max(maxOutlets).nullable(),
    nozzleId: idSchema.nullable(),
    blastHours: within(workLimits.shiftHours).nullable(),
    mediumId: idSchema.nullable(),
    isWet: z.boolean(),
    nozzlePressureKpa: within(checkLimits.targetNozzlePressureKpa).nullable(),
    passedMm: nozzleLength(),
    refusedMm: nozzleLength(),
    bitSet: bitSetNameSchema.nullable(),
    boreMm: nozzleLength(),
    accuracyMm: within(workLimits.accuracyMm).nullable(),
    method: z.enum(boreCheckMethods).nullable(),
    looksOval: z.boolean(),
    isCracked: z.boolean(),
    note: lineOfText(workLimits.noteLength).nullable(),
  })
  .superRefine((row, context) => {
    const { rigId, nozzleId, blastHours, boreMm, accuracyMm, passedMm, refusedMm } = row
    const issue = (...args: Parameters<typeof ruleBroken>) => context.addIssue(ruleBroken(...args))
    const hasBits = passedMm !== null || refusedMm !== null
    const isCheck = hasBits || boreMm !== null || row.isCracked
    if (blastHours === null && !isCheck) {
      issue('required', 'A row says hours, a bit or a bore.', ['blastHours'])
    }
    if (blastHours !== null && rigId === null) issue('required', 'Hours are a rig’s.', ['rigId'])
    if (isCheck && nozzleId === null) issue('required', 'A check is of a nozzle.', ['nozzleId'])
    if (hasBits && boreMm !== null) issue('one-of-two', 'A check is by bits or by a gauge.', ['boreMm'])
    if (boreMm !== null && accuracyMm === null) {
      issue('required', 'A gauge has an accuracy.', ['accuracyMm'])
    }
    if (passedMm !== null && refusedMm !== null && refusedMm <= passedMm) {
      issue('invalid', 'A bit that did not go through is bigger than one that did.', ['refusedMm'])
    }
  })
export type HistoryRow = z.infer<typeof historyRowSchema>
