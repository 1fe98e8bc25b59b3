import {
  mediumChangeSchema,
  mediumPageSchema,
  mediumRecordSchema,
  newMediumSchema,
} from '#shared/contracts/media.ts'
import { pageQuerySchema } from '#shared/contracts/records.ts'
import { defineRoute } from '../routing/route.ts'
import { mediumKind } from '../services/media.ts'
import { listPage } from '../services/records.ts'
import { recordRoutes } from './recordRoutes.ts'

export const mediaRoutes = [
  defineRoute({
    method: 'get',
    path: '/api/v1/media',
    access: 'see-rigs',
    operationId: 'listMedia',
    summary: 'The blasting media by name, a page at a time',
    query: pageQuerySchema,
    answer: mediumPageSchema,
    handle: ({ context, caller, query }) => listPage(mediumKind, context, caller, query),
  }),
  ...recordRoutes({
    kind: mediumKind,
    createAccess: 'write-fleet',
    newSchema: newMediumSchema,
    changeSchema: mediumChangeSchema,
    recordSchema: mediumRecordSchema,
  }),
]
