import type { RouteSpec } from '../routing/route.ts'
import { describeApi } from '../routing/describeApi.ts'
import { defineRoute } from '../routing/route.ts'
import { z } from 'zod'
import { accountRoutes } from './accounts.ts'
import { auditRoutes } from './audit.ts'
import { checkRoutes } from './check.ts'
import { companyRoutes } from './companies.ts'
import { compressorRoutes } from './compressors.ts'
import { exportRoutes } from './exports.ts'
import { healthRoutes } from './health.ts'
import { importRoutes } from './imports.ts'
import { invitationRoutes } from './invitations.ts'
import { mailRoutes } from './mails.ts'
import { mediaRoutes } from './media.ts'
import { nozzleRoutes } from './nozzles.ts'
import { peopleRoutes } from './people.ts'
import { photoRoutes } from './photos.ts'
import { rigRoutes } from './rigs.ts'
import { siteRoutes } from './sites.ts'
import { workRoutes } from './work.ts'

let description: object | undefined

const openapiRoute = defineRoute({
  method: 'get',
  path: '/api/openapi.json',
  access: 'anyone',
  operationId: 'describeApi',
  summary: 'This description',
  answer: z.record(z.string(), z.unknown()),
  handle: ({ context }) => (description ??= describeApi(routes, context.config.version)),
})

/** Every route there is. */
export const routes: readonly RouteSpec[] = [
  ...healthRoutes,
  ...checkRoutes,
  ...accountRoutes,
  ...companyRoutes,
  ...importRoutes,
  ...compressorRoutes,
  ...siteRoutes,
  ...rigRoutes,
  ...nozzleRoutes,
  ...mediaRoutes,
  ...workRoutes,
  ...photoRoutes,
  ...exportRoutes,
  ...auditRoutes,
  ...invitationRoutes,
  ...mailRoutes,
  ...peopleRoutes,
  openapiRoute,
]
