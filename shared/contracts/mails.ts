import { z } from 'zod'

/** A mail that went nowhere, to be read on the own machine. */
export const keptMailSchema = z.strictObject({
  id: z.string(),
  to: z.string(),
  subject: z.string(),
  text: z.string(),
  html: z.string(),
  createdAt: z.string(),
})
export const keptMailsSchema = z.strictObject({ mails: z.array(keptMailSchema) })

export type KeptMail = z.infer<typeof keptMailSchema>
export type KeptMails = z.infer<typeof keptMailsSchema>
