import { z } from 'zod'
import { rolesSchema } from './accounts.ts'
import { roles } from './permissions.ts'
import { emailSchema, idSchema, languageSchema, pageOf, pageQuerySchema, versionSchema } from './records.ts'

export const personStates = ['active', 'deactivated'] as const

export const personSchema = z.strictObject({
  /** of the membership: one account may be a person of several companies */
  id: z.string(),
  name: z.string(),
  email: z.string(),
  roles: z.array(z.enum(roles)),
  state: z.enum(personStates),
  lastSeenAt: z.string().nullable(),
  joinedAt: z.string(),
  version: z.number(),
})
export const personChangeSchema = z.strictObject({
  version: versionSchema,
  roles: rolesSchema.optional(),
  state: z.enum(personStates).optional(),
})

export const invitationStates = ['pending', 'accepted', 'withdrawn', 'expired'] as const
export const invitationInputSchema = z.strictObject({
  id: idSchema,
  email: emailSchema,
  roles: rolesSchema,
  language: languageSchema,
})
export const invitationSchema = z.strictObject({
  id: z.string(),
  email: z.string(),
  roles: z.array(z.enum(roles)),
  language: languageSchema,
  invitedBy: z.string(),
  state: z.enum(invitationStates),
  createdAt: z.string(),
  expiresAt: z.string(),
  version: z.number(),
})

export const peopleSchema = z.strictObject({
  people: z.array(personSchema),
  invitations: z.array(invitationSchema),
})

/** What can be done that somebody may later ask about. */
export const auditActions = [
  'company.created',
  'company.changed',
  'account.signed-in',
  'account.sign-in-failed',
  'account.signed-out',
  'account.password-changed',
  'account.password-reset',
  'account.renamed',
  'person.joined',
  'person.roles-changed',
  'person.deactivated',
  'person.reactivated',
  'invitation.sent',
  'invitation.resent',
  'invitation.withdrawn',
  'compressor.created',
  'compressor.changed',
  'compressor.archived',
  'compressor.unarchived',
  'compressor.deleted',
  'compressor.restored',
  'site.created',
  'site.changed',
  'site.archived',
  'site.unarchived',
  'site.deleted',
  'site.restored',
  'rig.created',
  'rig.changed',
  'rig.archived',
  'rig.unarchived',
  'rig.deleted',
  'rig.restored',
  'rig.today-picked',
  'nozzle.created',
  'nozzle.changed',
  'nozzle.archived',
  'nozzle.unarchived',
  'nozzle.deleted',
  'nozzle.restored',
  'nozzle.event',
  'medium.created',
  'medium.changed',
  'medium.archived',
  'medium.unarchived',
  'medium.deleted',
  'medium.restored',
  'shift.logged',
  'shift.corrected',
  'bore-check.logged',
  'bore-check.corrected',
  'gauges.logged',
  'gauges.set-aside',
  'gauges.used-again',
  'photo.added',
  'history.imported',
  'fleet.imported',
  'data.exported',
] as const

export const auditEntrySchema = z.strictObject({
  id: z.number().int(),
  at: z.string(),
  /** as they called themselves then */
  actorName: z.string(),
  /** who that is: a name can be changed, the confirmed address not */
  actorEmail: z.string().nullable(),
  action: z.enum(auditActions),
  /** what it was done to: a rig's name, a person's address */
  subject: z.string(),
  subjectId: z.string().nullable(),
  /** field by field: how it was and how it became; never a price, a password or a token */
  changes: z.record(z.string(), z.strictObject({ from: z.unknown(), to: z.unknown() })),
})
export const auditPageSchema = pageOf(auditEntrySchema)

export const auditFilterSchema = z.strictObject({
  action: z.enum(auditActions).optional(),
  /** part of the name of who did it or of what it was done to */
  search: z.string().max(100).optional(),
  from: z.iso.datetime({ offset: true }).optional(),
  until: z.iso.datetime({ offset: true }).optional(),
})
export const auditQuerySchema = auditFilterSchema.extend(pageQuerySchema.shape)

export type Person = z.infer<typeof personSchema>
export type PersonChange = z.infer<typeof personChangeSchema>
export type PersonState = (typeof personStates)[number]
export type Invitation = z.infer<typeof invitationSchema>
export type InvitationInput = z.infer<typeof invitationInputSchema>
export type InvitationState = (typeof invitationStates)[number]
export type People = z.infer<typeof peopleSchema>
export type AuditAction = (typeof auditActions)[number]
export type AuditEntry = z.infer<typeof auditEntrySchema>
export type AuditFilter = z.infer<typeof auditFilterSchema>
export type AuditQuery = z.infer<typeof auditQuerySchema>
