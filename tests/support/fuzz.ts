import {
  hostileHeaders,
  hostileQueries,
  hostileSegments,
  hostileTexts,
  hostileValues,
  prototypeNames,
  toJson,
} from './hostileValues.ts'
import { makeValue, pick } from './jsonSchema.ts'
import type { Schema, SchemaSource } from './jsonSchema.ts'

export interface Operation {
  parameters?: { name: string; in: 'path' | 'query'; required: boolean; schema: Schema }[]
  requestBody?: { content: Record<string, { schema: Schema }> }
  responses: Record<string, { content?: Record<string, unknown> }>
}

export interface Description {
  paths: Record<string, Record<string, Operation>>
  components: { schemas: Record<string, Schema> }
}

export interface FuzzRequest {
  method: string
  path: string
  headers: Record<string, string>
  body?: string
}

interface Honest {
  segments: Record<string, string>
  query: string
  headers: Record<string, string>
  body: unknown
  text?: string
}

type Container = Record<string, unknown> | unknown[]
const isContainer = (value: unknown): value is Container => typeof value === 'object' && value !== null

/** Every place within a value that can be written to. */
function listPlaces(value: unknown): [Container, string][] {
  if (!isContainer(value)) return []
  return Object.keys(value).flatMap((key) => [
    [value, key] as [Container, string],
    ...listPlaces((value as Record<string, unknown>)[key]),
  ])
}

/** A copy, since what is put somewhere may be spoilt again. */
const pickHostile = (random: () => number): unknown => structuredClone(pick(hostileValues, random))

type Spoil = (honest: Honest, random: () => number) => void

function put(container: Container, key: string, value: unknown): void {
  Object.defineProperty(container, key, { value, enumerable: true, configurable: true, writable: true })
}

const spoilField: Spoil = (honest, random) => {
  const places = listPlaces(honest.body)
  if (places.length === 0) honest.body = pickHostile(random)
  else put(...pick(places, random), pickHostile(random))
}

const spoilTwoFields: Spoil = (honest, random) => {
  spoilField(honest, random)
  spoilField(honest, random)
}

const dropField: Spoil = (honest, random) => {
  const places = listPlaces(honest.body)
  if (places.length === 0) return
  const [container, key] = pick(places, random)
  delete (container as Record<string, unknown>)[key]
}

const addField: Spoil = (honest, random) => {
  const objects = [honest.body, ...listPlaces(honest.body).map(([container]) => container)]
  const target = pick(objects, random)
  if (isContainer(target)) put(target, pick(prototypeNames, random), pickHostile(random))
}

const growList: Spoil = (honest, random) => {
  const lists = listPlaces(honest.body)
    .map(([container, key]) => (container as Record<string, unknown>)[key])
    .filter((value) => Array.isArray(value))
  if (lists.length === 0) return spoilField(honest, random)
  const list = pick(lists, random)
  list.push(...Array.from({ length: pick([1, 30, 500], random) }, () => list[0] ?? pickHostile(random)))
}

const repeatKey: Spoil = (honest, random) => {
  const text = toJson(honest.body)
  const key = isContainer(honest.body) ? (Object.keys(honest.body)[0] ?? 'id') : 'id'
  const value = toJson(pickHostile(random))
  honest.text = text.replace('{', `{${JSON.stringify(key)}:${value},`)
}

const cutText: Spoil = (honest, random) => {
  const text = toJson(honest.body)
  honest.text = text.slice(0, Math.floor(random() * text.length))
}

const replaceText: Spoil = (honest, random) => {
  honest.text = pick(hostileTexts, random)
}

/** Nobody reads it, so that a large one would be cut off, and the answer perhaps with it. */
const addText: Spoil = (honest, random) => {
  honest.text = pick(
    hostileTexts.filter(({ length }) => length < 10_000),
    random,
  )
}

const spoilSegment: Spoil = ({ segments }, random) => {
  const names = Object.keys(segments)
  if (names.length > 0) segments[pick(names, random)] = pick(hostileSegments, random)
}

const spoilQuery: Spoil = (honest, random) => {
  const hostile = pick(hostileQueries, random)
  honest.query = random() < 0.5 ? hostile : `${honest.query}&${hostile}`
}

const spoilHeaders: Spoil = (honest, random) => {
  Object.assign(honest.headers, pick(hostileHeaders, random))
}

const leaveAlone: Spoil = () => {}

const bodySpoils = [
  spoilField,
  spoilField,
  spoilField,
  spoilTwoFields,
  dropField,
  addField,
  growList,
  repeatKey,
  cutText,
  replaceText,
]

/** Which ways there are to spoil a request of this kind. */
function spoilsFor({ parameters = [], requestBody }: Operation): Spoil[] {
  return [
    spoilHeaders,
    spoilHeaders,
    spoilQuery,
    leaveAlone,
    // A body where none belongs.
    ...(requestBody ? [...bodySpoils, ...bodySpoils] : [addText]),
    ...(parameters.some((parameter) => parameter.in === 'path') ? [spoilSegment, spoilSegment] : []),
    ...(parameters.some((parameter) => parameter.in === 'query') ? [spoilQuery, spoilQuery, spoilQuery] : []),
  ]
}

function makeHonest({ parameters = [], requestBody }: Operation, source: SchemaSource): Honest {
  const asText = (value: unknown) => encodeURIComponent(String(value))
  const valueOf = ({ name, schema }: { name: string; schema: Schema }) =>
    asText(makeValue(schema, source, name))
  const inQuery = parameters.filter((parameter) => parameter.in === 'query')
  const schema = requestBody?.content['application/json']?.schema
  return {
    segments: Object.fromEntries(
      parameters
        .filter((parameter) => parameter.in === 'path')
        .map((parameter) => [parameter.name, valueOf(parameter)]),
    ),
    query: inQuery
      .filter(({ required }) => required || source.random() < 0.4)
      .map((parameter) => `${parameter.name}=${valueOf(parameter)}`)
      .join('&'),
    headers: schema ? { 'content-type': 'application/json' } : {},
    body: schema ? structuredClone(makeValue(schema, source)) : undefined,
  }
}

/** A request as the description has it, and then something wrong with it, mostly. */
export function makeFuzzRequest(
  method: string,
  path: string,
  operation: Operation,
  source: SchemaSource,
): FuzzRequest {
  const { random } = source
  const honest = makeHonest(operation, source)
  pick(spoilsFor(operation), random)(honest, random)
  const { segments, query, headers, body } = honest
  const text = honest.text ?? (body === undefined ? undefined : toJson(body))
  const address = path.replace(/\{(\w+)\}/g, (_whole, name: string) => segments[name] ?? '')
  return {
    method: method.toUpperCase(),
    path: query ? `${address}?${query}` : address,
    headers,
    ...(text !== undefined && { body: text }),
  }
}
