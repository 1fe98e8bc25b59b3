import { pageQuerySchema } from '#shared/contracts/records.ts'
import { newSiteSchema, siteChangeSchema, sitePageSchema, siteRecordSchema } from '#shared/contracts/sites.ts'
import { defineRoute } from '../routing/route.ts'
import { listPage } from '../services/records.ts'
import { siteKind } from '../services/sites.ts'
import { recordRoutes } from './recordRoutes.ts'

export const siteRoutes = [
  defineRoute({
    method: 'get',
    path: '/api/v1/sites',
    access: 'see-rigs',
    operationId: 'listSites',
    summary: 'The sites by name, a page at a time',
    query: pageQuerySchema,
    answer: sitePageSchema,
    handle: ({ context, caller, query }) => listPage(siteKind, context, caller, query),
  }),
  ...recordRoutes({
    kind: siteKind,
    createAccess: 'add-sites',
    newSchema: newSiteSchema,
    changeSchema: siteChangeSchema,
    recordSchema: siteRecordSchema,
  }),
]
