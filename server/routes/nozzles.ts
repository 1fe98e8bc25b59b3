import {
  newNozzleSchema,
  nozzleChangeSchema,
  nozzlePageSchema,
  nozzleRecordSchema,
  unknownNozzleSchema,
} from '#shared/contracts/nozzles.ts'
import { pageQuerySchema } from '#shared/contracts/records.ts'
import { defineRoute } from '../routing/route.ts'
import { nozzleKind, registerUnknown, toNozzleProfile } from '../services/nozzles.ts'
import { listPage } from '../services/records.ts'
import { recordRoutes } from './recordRoutes.ts'

export const nozzleRoutes = [
  defineRoute({
    method: 'get',
    path: '/api/v1/nozzles',
    access: 'see-rigs',
    operationId: 'listNozzles',
    summary: 'The nozzles by tag, a page at a time; prices only for who may see them',
    query: pageQuerySchema,
    answer: nozzlePageSchema,
    handle: ({ context, caller, query }) => listPage(nozzleKind, context, caller, query),
  }),
  defineRoute({
    method: 'post',
    path: '/api/v1/nozzles/unknown',
    access: 'log-work',
    operationId: 'registerUnknownNozzle',
    summary: 'A nozzle whose tag cannot be read; the same one sent twice is one',
    body: unknownNozzleSchema,
    status: 201,
    answer: nozzleRecordSchema,
    problems: ['id-in-use', 'too-many-records'],
    handle: ({ context, caller, body }) => registerUnknown(context, caller, body),
  }),
  ...recordRoutes({
    kind: nozzleKind,
    createAccess: 'write-fleet',
    newSchema: newNozzleSchema.transform(toNozzleProfile),
    changeSchema: nozzleChangeSchema.transform(toNozzleProfile),
    recordSchema: nozzleRecordSchema,
  }),
]
