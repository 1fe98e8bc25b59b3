import { z } from 'zod'

export const healthSchema = z.strictObject({
  status: z.enum(['ok', 'unavailable']),
  version: z.string(),
  database: z.enum(['reachable', 'unreachable']),
})

export type Health = z.infer<typeof healthSchema>
