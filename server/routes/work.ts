import { z } from 'zod'
import { newNozzleEventSchema, nozzleEventSchema } from '#shared/contracts/nozzles.ts'
import { idSchema, pageQuerySchema } from '#shared/contracts/records.ts'
import {
  boreCheckSchema,
  gaugeReadingSchema,
  newBoreCheckSchema,
  newGaugeReadingSchema,
  newShiftSchema,
  setAsideSchema,
  shiftPageSchema,
  shiftSchema,
  workSchema,
} from '#shared/contracts/work.ts'
import { defineRoute } from '../routing/route.ts'
import { logMade } from '../services/madeRecords.ts'
import { listShifts, readWork, setGaugesAside } from '../services/work.ts'
import { boreCheckKind, gaugeReadingKind, nozzleEventKind, shiftKind } from '../services/workKinds.ts'

/** Made where the work is done, perhaps long before it arrives. */
const logged = {
  method: 'post',
  access: 'log-work',
  status: 201,
  problems: ['id-in-use', 'too-many-records'],
} as const

export const workRoutes = [
  defineRoute({
    method: 'get',
    path: '/api/v1/work',
    access: 'see-rigs',
    operationId: 'readWork',
    summary: 'Every nozzle and medium, and all that was written down: what forecasts are computed from',
    answer: workSchema,
    handle: ({ context, caller }) => readWork(context, caller),
  }),
  defineRoute({
    ...logged,
    path: '/api/v1/nozzle-events',
    operationId: 'logNozzleEvent',
    summary: 'A nozzle was mounted, taken off, broken, retired or put back; the same one sent twice is one',
    body: newNozzleEventSchema,
    answer: nozzleEventSchema,
    handle: ({ context, caller, body }) => logMade(nozzleEventKind, context, caller, body),
  }),
  defineRoute({
    method: 'get',
    path: '/api/v1/shifts',
    access: 'see-rigs',
    operationId: 'listShifts',
    summary: 'The shifts, newest first, a page at a time',
    query: pageQuerySchema,
    answer: shiftPageSchema,
    handle: ({ context, caller, query }) => listShifts(context, caller, query),
  }),
  defineRoute({
    ...logged,
    path: '/api/v1/shifts',
    operationId: 'logShift',
    summary: 'Hours that a rig blasted on a day, or a correction of them; the same one sent twice is one',
    body: newShiftSchema,
    answer: shiftSchema,
    handle: ({ context, caller, body }) => logMade(shiftKind, context, caller, body),
  }),
  defineRoute({
    ...logged,
    path: '/api/v1/bore-checks',
    operationId: 'logBoreCheck',
    summary: 'What a nozzle’s bore measured, or a correction of it; the same one sent twice is one',
    body: newBoreCheckSchema,
    answer: boreCheckSchema,
    handle: ({ context, caller, body }) => logMade(boreCheckKind, context, caller, body),
  }),
  defineRoute({
    ...logged,
    path: '/api/v1/gauge-readings',
    operationId: 'logGaugeReading',
    summary: 'Two gauges read while one outlet blasts; used at once; the same one sent twice is one',
    body: newGaugeReadingSchema,
    answer: gaugeReadingSchema,
    handle: ({ context, caller, body }) => logMade(gaugeReadingKind, context, caller, body),
  }),
  defineRoute({
    method: 'put',
    path: '/api/v1/gauge-readings/:readingId/set-aside',
    access: 'set-calibration-aside',
    operationId: 'setGaugesAside',
    summary: 'Whether a reading of gauges is kept without being used',
    params: z.strictObject({ readingId: idSchema }),
    body: setAsideSchema,
    answer: gaugeReadingSchema,
    handle: ({ context, caller, params: { readingId }, body }) =>
      setGaugesAside(context, caller, readingId, body),
  }),
]
