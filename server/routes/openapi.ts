import { Router } from 'express'
import { z } from 'zod'
import { checkAnswerSchema, checkRequestSchema } from '#shared/contracts/check.ts'
import { healthSchema } from '#shared/contracts/health.ts'
import { problemSchema } from '#shared/contracts/problems.ts'
import type { AppContext } from '../app.ts'
import { methodNotAllowed } from '../middleware/methodNotAllowed.ts'

const contracts = {
  Health: healthSchema,
  CheckRequest: checkRequestSchema,
  CheckAnswer: checkAnswerSchema,
  Problem: problemSchema,
}

/** OpenAPI 3.1 speaks JSON Schema 2020-12, which zod writes by itself: what may be sent, not what comes out of it. */
function describeSchemas(): Record<string, object> {
  const registry = z.registry<{ id: string }>()
  for (const [id, schema] of Object.entries(contracts)) registry.add(schema, { id })
  const { schemas } = z.toJSONSchema(registry, {
    io: 'input',
    target: 'draft-2020-12',
    uri: (id) => `#/components/schemas/${id}`,
  })
  return Object.fromEntries(
    Object.entries(schemas).map(([id, { $schema: _dialect, $id: _address, ...schema }]) => [id, schema]),
  )
}

function content(contract: keyof typeof contracts, type = 'application/json') {
  return { content: { [type]: { schema: { $ref: `#/components/schemas/${contract}` } } } }
}

function refusal(description: string) {
  return { description, ...content('Problem', 'application/problem+json') }
}

function describeApi(version: string) {
  return {
    openapi: '3.1.0',
    info: {
      title: 'Sixteenth',
      version,
      description:
        'Air and nozzles for blasters. Pressures are gauge, except the barometer, which is absolute.',
    },
    servers: [{ url: '/' }],
    paths: {
      '/api/v1/health': {
        get: {
          operationId: 'readHealth',
          summary: 'Whether the service and its database are there',
          responses: {
            200: { description: 'They are', ...content('Health') },
            503: { description: 'The database cannot be reached', ...content('Health') },
          },
        },
      },
      '/api/v1/check': {
        post: {
          operationId: 'checkPressure',
          summary: 'Whether a rig at a site holds a nozzle pressure; nothing is stored',
          requestBody: { required: true, ...content('CheckRequest') },
          responses: {
            200: { description: 'The verdict and what it rests on', ...content('CheckAnswer') },
            400: refusal('The body is not valid JSON'),
            413: refusal('The body is too large'),
            415: refusal('The body is not sent as application/json'),
            422: refusal('Fields are unknown, missing, of the wrong type or out of range'),
            429: refusal('Too many checks from this address'),
          },
        },
      },
    },
    components: { schemas: describeSchemas() },
  }
}

export function openapiRoutes({ config }: AppContext): Router {
  const description = describeApi(config.version)
  const router = Router()
  router
    .route('/')
    .get((_request, response) => {
      response.json(description)
    })
    .all(methodNotAllowed('GET', 'HEAD'))
  return router
}
