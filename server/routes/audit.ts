import { Readable } from 'node:stream'
import { pipeline } from 'node:stream/promises'
import { auditFilterSchema, auditPageSchema, auditQuerySchema } from '#shared/contracts/people.ts'
import { defineRoute } from '../routing/route.ts'
import { readAuditPage, writeAuditCsv } from '../services/auditLog.ts'

export const auditRoutes = [
  defineRoute({
    method: 'get',
    path: '/api/v1/audit',
    access: 'read-audit',
    operationId: 'readAudit',
    summary: 'Who did what, when; newest first',
    query: auditQuerySchema,
    answer: auditPageSchema,
    handle: ({ context, caller, query }) => readAuditPage(context.database, caller, query),
  }),
  defineRoute({
    method: 'get',
    path: '/api/v1/audit.csv',
    access: 'read-audit',
    operationId: 'exportAudit',
    summary: 'Who did what, when, as a table',
    query: auditFilterSchema,
    file: 'text/csv',
    handle: async ({ context, caller, query, response }) => {
      const name = `sixteenth-audit-${context.now().toISOString().slice(0, 10)}.csv`
      response.attachment(name).type('text/csv; charset=utf-8')
      const lines = Readable.from(writeAuditCsv(context.database, caller, query))
      await pipeline(lines, response).catch((error: NodeJS.ErrnoException) => {
        // Whoever asked has gone: nobody is left to be told.
        if (error.code !== 'ERR_STREAM_PREMATURE_CLOSE') throw error
      })
    },
  }),
]
