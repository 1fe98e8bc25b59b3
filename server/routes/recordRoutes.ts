import { z } from 'zod'
import { idSchema, versionedSchema, versionQuerySchema } from '#shared/contracts/records.ts'
import type { Permission } from '#shared/contracts/permissions.ts'
import { defineRoute } from '../routing/route.ts'
import type { RouteSpec } from '../routing/route.ts'
import { archiveRecord, deleteRecord, restoreRecord, unarchiveRecord } from '../services/recordLifecycle.ts'
import type { RecordRow } from '../services/recordQueries.ts'
import { changeRecord, createRecord, readRecord } from '../services/records.ts'
import type { RecordKind } from '../services/records.ts'

interface Options<Profile extends { name: string }, Row extends RecordRow> {
  kind: RecordKind<Profile, Row>
  createAccess: Permission
  newSchema: z.ZodType<Profile & { id: string }>
  changeSchema: z.ZodType<Profile & { version: number }>
  recordSchema: z.ZodType
}

/** What can be asked of one saved record, and how a new one is made: the same for every kind. */
export function recordRoutes<Profile extends { name: string }, Row extends RecordRow>({
  kind,
  createAccess,
  newSchema,
  changeSchema,
  recordSchema,
}: Options<Profile, Row>): RouteSpec[] {
  const { noun, plural = `${noun}s` } = kind
  const title = noun.charAt(0).toUpperCase() + noun.slice(1)
  const path = `/api/v1/${plural}`
  const params = z.strictObject({ [`${noun}Id`]: idSchema }).transform((given) => String(given[`${noun}Id`]))
  const atRecord = { path: `${path}/:${noun}Id`, params }

  const transitionRoute = (verb: string, summary: string, move: typeof archiveRecord) =>
    defineRoute({
      ...atRecord,
      method: 'post',
      path: `${atRecord.path}/${verb}`,
      access: 'write-fleet',
      operationId: `${verb}${title}`,
      summary,
      body: versionedSchema,
      answer: recordSchema,
      problems: ['version-conflict', 'in-use'],
      handle: ({ context, caller, params: id, body }) => move(kind, context, caller, { id, ...body }),
    })

  return [
    defineRoute({
      method: 'post',
      path,
      access: createAccess,
      operationId: `create${title}`,
      summary: `Save a new ${noun}; the same one sent twice is one`,
      body: newSchema,
      status: 201,
      answer: recordSchema,
      problems: ['id-in-use', 'too-many-records'],
      handle: ({ context, caller, body: { id, ...profile } }) =>
        createRecord(kind, context, caller, id, profile as unknown as Profile),
    }),
    defineRoute({
      ...atRecord,
      method: 'get',
      access: 'see-rigs',
      operationId: `read${title}`,
      summary: `One ${noun}`,
      answer: recordSchema,
      handle: ({ context, caller, params: id }) => readRecord(kind, context, caller, id),
    }),
    defineRoute({
      ...atRecord,
      method: 'put',
      access: 'write-fleet',
      operationId: `change${title}`,
      summary: `Change a ${noun}, from the version that was read`,
      body: changeSchema,
      answer: recordSchema,
      problems: ['version-conflict'],
      handle: ({ context, caller, params: id, body: { version, ...profile } }) =>
        changeRecord(kind, context, caller, { id, version }, profile as unknown as Profile),
    }),
    defineRoute({
      ...atRecord,
      method: 'delete',
      access: 'write-fleet',
      operationId: `delete${title}`,
      summary: `Delete a ${noun}; it can be restored`,
      query: versionQuerySchema,
      status: 204,
      problems: ['version-conflict', 'in-use'],
      handle: ({ context, caller, params: id, query }) =>
        deleteRecord(kind, context, caller, { id, ...query }),
    }),
    transitionRoute('archive', `Take a ${noun} out of daily use`, archiveRecord),
    transitionRoute('unarchive', `Bring an archived ${noun} back into use`, unarchiveRecord),
    transitionRoute('restore', `Undo the deletion of a ${noun}`, restoreRecord),
  ]
}
