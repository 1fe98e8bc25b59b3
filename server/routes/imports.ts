import { importAnswerSchema, importRequestSchema } from '#shared/contracts/imports.ts'
import { defineRoute } from '../routing/route.ts'
import { importHistory } from '../services/historyImport.ts'
import { importCompressors, importRigs } from '../services/imports.ts'

/** A text may take twice its bytes in JSON: quotation marks and line ends are written with a backslash. */
const maxBodyBytes = 2_200_000

/** Before the routes of one record: `import` is no id. */
export const importRoutes = [
  defineRoute({
    method: 'post',
    path: '/api/v1/compressors/import',
    access: 'write-fleet',
    operationId: 'importCompressors',
    summary: 'Look at a CSV file of compressors, or save all of them',
    body: importRequestSchema,
    maxBodyBytes,
    answer: importAnswerSchema,
    handle: ({ context, caller, body }) => importCompressors(context, caller, body),
  }),
  defineRoute({
    method: 'post',
    path: '/api/v1/rigs/import',
    access: 'write-fleet',
    operationId: 'importRigs',
    summary: 'Look at a CSV file of rigs, or save all of them; compressors and sites are named',
    body: importRequestSchema,
    maxBodyBytes,
    answer: importAnswerSchema,
    handle: ({ context, caller, body }) => importRigs(context, caller, body),
  }),
  defineRoute({
    method: 'post',
    path: '/api/v1/history/import',
    access: 'write-fleet',
    operationId: 'importHistory',
    summary: 'Look at a CSV file of hours and checks, or save all of it; rigs, nozzles and media are named',
    body: importRequestSchema,
    maxBodyBytes,
    answer: importAnswerSchema,
    problems: ['too-many-records'],
    handle: ({ context, caller, body }) => importHistory(context, caller, body),
  }),
]
