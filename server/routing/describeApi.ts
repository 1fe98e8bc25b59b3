import { z } from 'zod'
import { isPermission } from '#shared/contracts/permissions.ts'
import { problemSchema } from '#shared/contracts/problems.ts'
import type { ProblemCode } from '#shared/contracts/problems.ts'
import { statusOf } from '../problems.ts'
import type { RouteSpec } from './route.ts'

const description =
  'Air and nozzles for blasters. Pressures are gauge, except the barometer, which is absolute. ' +
  'Whoever signs in is known by a cookie.'

const refusalWords: Partial<Record<number, string>> = {
  400: 'The request is not valid JSON, or could not be read',
  401: 'Nobody is signed in, or not with these words',
  403: 'Not allowed to whoever asks',
  404: 'Nothing is at this address, or it is of another company',
  409: 'Somebody changed it meanwhile, or a rule forbids it',
  410: 'The link is used, withdrawn or too old',
  413: 'The body is too large',
  415: 'The body is not of the content type that is read here',
  422: 'Fields are unknown, missing, of the wrong type or out of range',
  429: 'Too many requests',
  503: 'Not possible just now',
}

function pascal(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1)
}

/** OpenAPI 3.1 speaks JSON Schema 2020-12, which zod writes by itself: what may be sent, not what comes out of it. */
function describeSchemas(named: ReadonlyMap<z.ZodType, string>): Record<string, object> {
  const registry = z.registry<{ id: string }>()
  for (const [schema, id] of named) registry.add(schema, { id })
  const { schemas } = z.toJSONSchema(registry, {
    io: 'input',
    target: 'draft-2020-12',
    uri: (id) => `#/components/schemas/${id}`,
  })
  return Object.fromEntries(
    Object.entries(schemas).map(([id, { $schema: _dialect, $id: _address, ...schema }]) => [id, schema]),
  )
}

/** Every refusal that a route of its kind may give, and its own. */
function refusalsOf(spec: RouteSpec): number[] {
  // Whatever stands in a query that a route does not know is refused.
  const codes: ProblemCode[] = ['invalid-fields', ...(spec.problems ?? [])]
  if (spec.access !== 'anyone' && spec.access !== 'visitor') codes.push('not-signed-in')
  if (isPermission(spec.access)) codes.push('forbidden', 'other-company')
  if (spec.method !== 'get') codes.push('cross-origin')
  if (spec.params) codes.push('not-found')
  if (spec.body || spec.upload) codes.push('bad-json', 'body-too-large', 'wrong-content-type')
  return [...new Set(codes.map(statusOf))].sort((one, other) => one - other)
}

/** A file as it is, or as the one part of a form. */
function describeUpload({ types }: NonNullable<RouteSpec['upload']>): object {
  const binary = { schema: { type: 'string', format: 'binary' } }
  const form = { type: 'object', properties: { file: binary.schema }, required: ['file'] }
  return {
    required: true,
    content: {
      ...Object.fromEntries(types.map((type) => [type, binary])),
      'multipart/form-data': { schema: form },
    },
  }
}

function parametersOf(spec: RouteSpec): object[] {
  const lists = [
    ['path', spec.params],
    ['query', spec.query],
  ] as const
  return lists.flatMap(([place, schema]) => {
    if (!schema) return []
    const { properties = {}, required = [] } = z.toJSONSchema(schema, { io: 'input' })
    return Object.entries(properties).map(([name, property]) => ({
      name,
      in: place,
      required: place === 'path' || required.includes(name),
      schema: property,
    }))
  })
}

/** The API's description, written from the routes themselves: what is not mounted cannot stand in it, and the reverse. */
export function describeApi(specs: readonly RouteSpec[], version: string): object {
  const named = new Map<z.ZodType, string>([[problemSchema, 'Problem']])
  const reference = (schema: z.ZodType, name: string, type = 'application/json') => {
    if (!named.has(schema)) named.set(schema, name)
    return { content: { [type]: { schema: { $ref: `#/components/schemas/${named.get(schema)}` } } } }
  }
  const paths: Record<string, Record<string, object>> = {}
  for (const spec of specs) {
    const path = spec.path.replace(/:(\w+)/g, '{$1}')
    const name = pascal(spec.operationId)
    const refusals = refusalsOf(spec).map((status) => [
      status,
      {
        description: refusalWords[status] ?? 'Refused',
        ...reference(problemSchema, 'Problem', 'application/problem+json'),
      },
    ])
    const content = spec.file
      ? { content: { [spec.file]: {} } }
      : spec.answer && reference(spec.answer, `${name}Answer`)
    const parameters = parametersOf(spec)
    paths[path] = {
      ...paths[path],
      [spec.method]: {
        operationId: spec.operationId,
        summary: spec.summary,
        'x-access': spec.access,
        ...(parameters.length > 0 && { parameters }),
        ...(spec.body && { requestBody: { required: true, ...reference(spec.body, `${name}Request`) } }),
        ...(spec.upload && { requestBody: describeUpload(spec.upload) }),
        responses: {
          [spec.status ?? 200]: { description: 'Done', ...content },
          ...Object.fromEntries(refusals),
        },
      },
    }
  }
  return {
    openapi: '3.1.0',
    info: { title: 'Sixteenth', version, description },
    servers: [{ url: '/' }],
    paths,
    components: { schemas: describeSchemas(named) },
  }
}
