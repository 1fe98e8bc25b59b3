import { z } from 'zod'
import { recordLimits } from './limits.ts'
import { fieldErrorSchema } from './problems.ts'

export const importKinds = ['compressors', 'rigs'] as const

/** A file is looked at first, each row with its errors; written whole or not at all. */
export const importRequestSchema = z.strictObject({
  csv: z.string().min(1).max(recordLimits.importBytes),
  isPreview: z.boolean(),
})
export const importRowSchema = z.strictObject({
  /** of the file, counted from 1 with the heading */
  line: z.number().int(),
  name: z.string(),
  /** path: the column's heading */
  errors: z.array(fieldErrorSchema),
})
export const importAnswerSchema = z.strictObject({
  rows: z.array(importRowSchema),
  /** of the file as a whole: an unknown or a missing column */
  errors: z.array(fieldErrorSchema),
  /** how many were written: none of a preview, all or none of an import */
  written: z.number().int(),
})

export type ImportKind = (typeof importKinds)[number]
export type ImportRequest = z.infer<typeof importRequestSchema>
export type ImportRow = z.infer<typeof importRowSchema>
export type ImportAnswer = z.infer<typeof importAnswerSchema>
