import { readFileSync } from 'node:fs'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { z } from 'zod'
import { healthSchema } from '#shared/contracts/health.ts'
import { makeCheckRequest } from '../support/checkRequest.ts'
import { postCheck, readProblem } from '../support/requests.ts'
import { startServer } from '../support/server.ts'
import type { RunningServer } from '../support/server.ts'

let server: RunningServer
beforeAll(async () => {
  server = await startServer()
})
afterAll(() => server.stop())

interface Description {
  openapi: string
  paths: Record<string, Record<string, { responses: Record<string, unknown> }>>
  components: { schemas: Record<string, z.core.JSONSchema.JSONSchema> }
}

async function readDescription(): Promise<Description> {
  const response = await fetch(`${server.address}/api/openapi.json`)
  expect(response.status).toBe(200)
  return (await response.json()) as Description
}

describe('health', () => {
  it('says that the database is reachable, and which version runs', async () => {
    const response = await fetch(`${server.address}/api/v1/health`)
    expect(response.status).toBe(200)
    const { version } = JSON.parse(readFileSync('package.json', 'utf8')) as { version: string }
    expect(healthSchema.parse(await response.json())).toEqual({
      status: 'ok',
      database: 'reachable',
      version,
    })
  })
})

describe('an address or a method that is not there', () => {
  it.each([
    '/api',
    '/api/v1',
    '/api/v1/nothing',
    '/api/v2/check',
    '/nothing.js',
    '/assets/none-1a2b3c4d.css',
  ])('%s is not found', async (path) => {
    const response = await fetch(server.address + path)
    expect(response.status).toBe(404)
    expect((await readProblem(response)).code).toBe('not-found')
  })

  it.each([
    ['GET', '/api/v1/check', 'POST'],
    ['DELETE', '/api/v1/check', 'POST'],
    ['POST', '/api/v1/health', 'GET, HEAD'],
    ['PUT', '/api/openapi.json', 'GET, HEAD'],
  ])('%s %s is told which methods are', async (method, path, allowed) => {
    const response = await fetch(server.address + path, { method })
    expect(response.status).toBe(405)
    expect(response.headers.get('allow')).toBe(allowed)
    expect((await readProblem(response)).code).toBe('method-not-allowed')
  })

  it('a broken escape in the address is a bad request', async () => {
    const response = await fetch(`${server.address}/api/v1/%E0%A4%A`)
    expect(response.status).toBeGreaterThanOrEqual(400)
    expect(response.status).toBeLessThan(500)
    await readProblem(response)
  })
})

describe('the description of the API', () => {
  it('lists every route that answers, with its refusals', async () => {
    const { openapi, paths } = await readDescription()
    expect(openapi).toBe('3.1.0')
    const described = Object.entries(paths).flatMap(([path, methods]) =>
      Object.keys(methods).map((method) => `${method} ${path}`),
    )
    expect(described).toContain('post /api/v1/check')
    for (const route of described) {
      const [method = '', path = ''] = route.split(' ')
      const address = server.address + path.replace(/\{\w+\}/g, crypto.randomUUID())
      const response = await fetch(address, { method: method.toUpperCase() })
      expect(response.status, route).not.toBe(405)
      if (!path.includes('{')) expect(response.status, route).not.toBe(404)
    }
    expect(Object.keys(paths['/api/v1/check']?.['post']?.responses ?? {})).toEqual([
      '200',
      '400',
      '403',
      '413',
      '415',
      '422',
      '429',
    ])
  })

  it('points only at schemas that it holds', async () => {
    const description = await readDescription()
    const references = [...JSON.stringify(description).matchAll(/"\$ref":"#\/components\/schemas\/(\w+)"/g)]
    expect(references.length).toBeGreaterThan(5)
    for (const [, name = ''] of references) expect(description.components.schemas).toHaveProperty(name)
  })

  it('holds a schema of the check that takes what the server takes and refuses what it refuses', async () => {
    const { components } = await readDescription()
    const schema = z.fromJSONSchema(components.schemas['CheckRequest'] ?? false)
    const good = makeCheckRequest()
    expect(schema.safeParse(good).success).toBe(true)
    const wrong = [
      { ...good, colour: 'red' },
      { ...good, airLine: undefined },
      { ...good, outlets: null },
      { ...good, bitSet: null },
      makeCheckRequest({ site: { altitudeM: 5001, airTemperatureC: 20 } }),
      makeCheckRequest({ outlets: [{ line: [], nozzle: { boreMm: 61 } }] }),
    ]
    for (const body of wrong) {
      expect(schema.safeParse(JSON.parse(JSON.stringify(body))).success).toBe(false)
      expect((await postCheck(server.address, body)).status).toBe(422)
    }
  })
})

describe('the headers of every answer', () => {
  it.each(['/', '/api/v1/health', '/api/nothing'])(
    'on %s keep other people’s scripts and frames out',
    async (path) => {
      const { headers } = await fetch(server.address + path)
      const policy = headers.get('content-security-policy') ?? ''
      expect(policy).toContain("default-src 'self'")
      expect(policy).toContain("frame-ancestors 'none'")
      expect(policy).not.toMatch(/script-src[^;]*unsafe/)
      expect(policy).not.toContain('upgrade-insecure-requests')
      expect(headers.get('x-content-type-options')).toBe('nosniff')
      expect(headers.get('x-powered-by')).toBeNull()
    },
  )
})
