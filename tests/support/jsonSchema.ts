import { randomUUID } from 'node:crypto'

/** As much of JSON Schema as the description of the API is written in. */
export interface Schema {
  $ref?: string
  type?: string | string[]
  enum?: unknown[]
  const?: unknown
  anyOf?: Schema[]
  oneOf?: Schema[]
  allOf?: Schema[]
  properties?: Record<string, Schema>
  required?: string[]
  items?: Schema | false
  minItems?: number
  minimum?: number
  maximum?: number
  minLength?: number
  maxLength?: number
  format?: string
}

export interface SchemaSource {
  schemas: Record<string, Schema>
  random: () => number
  /** values for fields that must name something real, by the field's name */
  known: Record<string, unknown>
}

export function pick<Item>(items: readonly Item[], random: () => number): Item {
  const item = items[Math.floor(random() * items.length)]
  if (item === undefined && items.length === 0) throw new Error('Nothing to pick from.')
  return item as Item
}

const textsByFormat: Record<string, () => string> = {
  uuid: randomUUID,
  date: () => '2026-05-03',
  'date-time': () => '2026-05-03T10:00:00Z',
}

function makeNumber({ minimum = 0, maximum = 1000, type }: Schema, random: () => number): number {
  const value = minimum + (Math.min(maximum, minimum + 1000) - minimum) * random()
  return type === 'integer' ? Math.ceil(value) : value
}

/** A value that the schema lets through; rules between fields it knows nothing of. */
export function makeValue(schema: Schema, source: SchemaSource, name = ''): unknown {
  const { random, known, schemas } = source
  if (schema.$ref) return makeValue(schemas[schema.$ref.split('/').at(-1) ?? ''] ?? {}, source, name)
  if (name in known && random() < 0.8) return known[name]
  if (schema.const !== undefined) return schema.const
  if (schema.enum) return pick(schema.enum, random)
  const choices = schema.anyOf ?? schema.oneOf
  if (choices) return makeValue(pick(choices, random), source, name)
  if (schema.allOf?.[0]) return makeValue(schema.allOf[0], source, name)
  switch (schema.type) {
    case 'object': {
      const { properties = {}, required = [] } = schema
      const fields = Object.entries(properties).filter(([key]) => required.includes(key) || random() < 0.5)
      return Object.fromEntries(fields.map(([key, field]) => [key, makeValue(field, source, key)]))
    }
    case 'array': {
      const { items } = schema
      const count = (schema.minItems ?? 0) + Math.floor(random() * 2)
      return items ? Array.from({ length: count }, () => makeValue(items, source)) : []
    }
    case 'number':
    case 'integer':
      return makeNumber(schema, random)
    case 'boolean':
      return random() < 0.5
    case 'null':
      return null
    default:
      return textsByFormat[schema.format ?? '']?.() ?? 'x'.repeat(Math.max(schema.minLength ?? 0, 3))
  }
}
