import { randomUUID } from 'node:crypto'
import type { AppContext } from '../context.ts'
import type { Writer } from '../db/client.ts'
import { emails } from '../db/schema/index.ts'

export interface Mail {
  to: string
  subject: string
  text: string
  html: string
}

/** Lays a mail in the queue, in the transaction of the change that causes it. Call mailIsWaiting after the commit. */
export function queueMail(writer: Writer, { now }: Pick<AppContext, 'now'>, mail: Mail): void {
  const at = now().toISOString()
  writer
    .insert(emails)
    .values({
      id: randomUUID(),
      ...mail,
      state: 'waiting',
      attempts: 0,
      nextAttemptAt: at,
      createdAt: at,
    })
    .run()
}
