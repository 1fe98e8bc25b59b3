import { isDeepStrictEqual } from 'node:util'
import type { AuditAction, AuditEntry } from '#shared/contracts/people.ts'
import type { Actor } from '../actor.ts'
import type { Writer } from '../db/client.ts'
import { auditEntries } from '../db/schema/index.ts'

export interface AuditEvent {
  action: AuditAction
  /** what it was done to, as people name it */
  subject: string
  subjectId?: string | null
  changes?: AuditEntry['changes']
}

/** Notes what was done, in the transaction of the change itself. */
export function writeAudit(
  writer: Writer,
  actor: Pick<Actor, 'accountId' | 'name' | 'companyId'>,
  at: Date,
  { action, subject, subjectId = null, changes = {} }: AuditEvent,
): void {
  writer
    .insert(auditEntries)
    .values({
      companyId: actor.companyId,
      at: at.toISOString(),
      actorId: actor.accountId,
      actorName: actor.name,
      action,
      subject,
      subjectId,
      changes,
    })
    .run()
}

/** The fields that differ, each as it was and as it became. */
export function changesBetween(before: object, after: object): AuditEntry['changes'] {
  const old = before as Record<string, unknown>
  return Object.fromEntries(
    Object.entries(after)
      .filter(([field, to]) => field in old && !isDeepStrictEqual(old[field], to))
      .map(([field, to]) => [field, { from: old[field], to }]),
  )
}
