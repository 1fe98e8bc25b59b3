import type { RouteSpec } from '../routing/route.ts'
import { describeApi } from '../routing/describeApi.ts'
import { defineRoute } from '../routing/route.ts'
import { z } from 'zod'
import { checkRoutes } from './check.ts'
import { healthRoutes } from './health.ts'

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
export const routes: readonly RouteSpec[] = [...healthRoutes, ...checkRoutes, openapiRoute]
