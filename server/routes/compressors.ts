import {
  compressorChangeSchema,
  compressorPageSchema,
  compressorRecordSchema,
  newCompressorSchema,
} from '#shared/contracts/compressors.ts'
import { pageQuerySchema } from '#shared/contracts/records.ts'
import { defineRoute } from '../routing/route.ts'
import { compressorKind } from '../services/compressors.ts'
import { listPage } from '../services/records.ts'
import { recordRoutes } from './recordRoutes.ts'

export const compressorRoutes = [
  defineRoute({
    method: 'get',
    path: '/api/v1/compressors',
    access: 'see-rigs',
    operationId: 'listCompressors',
    summary: 'The compressors by name, a page at a time',
    query: pageQuerySchema,
    answer: compressorPageSchema,
    handle: ({ context, caller, query }) => listPage(compressorKind, context, caller, query),
  }),
  ...recordRoutes({
    kind: compressorKind,
    createAccess: 'write-fleet',
    newSchema: newCompressorSchema,
    changeSchema: compressorChangeSchema,
    recordSchema: compressorRecordSchema,
  }),
]
