import { z } from 'zod'
import { idSchema, pageQuerySchema } from '#shared/contracts/records.ts'
import {
  fleetSchema,
  newRigSchema,
  rigChangeSchema,
  rigPageSchema,
  rigRecordSchema,
  todayInputSchema,
  todaySchema,
} from '#shared/contracts/rigs.ts'
import { defineRoute, JsonText } from '../routing/route.ts'
import { readFleet } from '../services/fleet.ts'
import { rigKind, writeRigList } from '../services/rigs.ts'
import { pickToday } from '../services/today.ts'
import { recordRoutes } from './recordRoutes.ts'

export const rigRoutes = [
  defineRoute({
    method: 'get',
    path: '/api/v1/fleet',
    access: 'see-rigs',
    operationId: 'readFleet',
    summary:
      'Every rig, compressor and site with the picks of these days; archived ones too, deleted ones not',
    answer: fleetSchema,
    handle: ({ context, caller }) => readFleet(context, caller),
  }),
  defineRoute({
    method: 'get',
    path: '/api/v1/rigs',
    access: 'see-rigs',
    operationId: 'listRigs',
    summary: 'The rigs by name in short, a page at a time',
    query: pageQuerySchema,
    answer: rigPageSchema,
    handle: ({ context, caller, query }) => new JsonText(writeRigList(context, caller, query)),
  }),
  ...recordRoutes({
    kind: rigKind,
    createAccess: 'write-fleet',
    newSchema: newRigSchema,
    changeSchema: rigChangeSchema,
    recordSchema: rigRecordSchema,
  }),
  defineRoute({
    method: 'put',
    path: '/api/v1/rigs/:rigId/today',
    access: 'pick-today',
    operationId: 'pickToday',
    summary: 'Which compressor and site a rig has on one day; null is the usual one',
    params: z.strictObject({ rigId: idSchema }),
    body: todayInputSchema,
    answer: todaySchema,
    handle: ({ context, caller, params: { rigId }, body }) => pickToday(context, caller, rigId, body),
  }),
]
