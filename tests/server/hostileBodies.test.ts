import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { maxFieldErrors } from '#shared/contracts/problems.ts'
import { makeCheckRequest } from '../support/checkRequest.ts'
import { listErrors, postCheck, postText, readProblem } from '../support/requests.ts'
import { startServer } from '../support/server.ts'
import type { RunningServer } from '../support/server.ts'

let server: RunningServer
beforeAll(async () => {
  server = await startServer()
})
afterAll(() => server.stop())

describe('a body that nobody sends by accident', () => {
  it('with 10,000 elements is told that they are too many', async () => {
    const airLine = Array.from({ length: 10_000 }, () => ({}))
    const response = await postCheck(server.address, { ...makeCheckRequest(), airLine })
    expect(response.status).toBe(422)
    const problem = await readProblem(response)
    expect(listErrors(problem)).toEqual(['too-many /airLine'])
  })

  it('with 6,000 unknown fields gets a short answer', async () => {
    const fields = Object.fromEntries(Array.from({ length: 6_000 }, (_, index) => [`field${index}`, 0]))
    const response = await postCheck(server.address, { ...makeCheckRequest(), ...fields })
    expect(response.status).toBe(422)
    expect((await readProblem(response)).errors).toHaveLength(maxFieldErrors)
  })

  it('nested 40,000 deep is refused for its depth', async () => {
    const response = await postText(server.address, '['.repeat(40_000) + ']'.repeat(40_000))
    expect(response.status).toBe(422)
    expect((await readProblem(response)).code).toBe('body-too-deep')
  })

  it('nested deep inside a field is refused for its depth', async () => {
    const text = JSON.stringify(makeCheckRequest()).replace(
      '{',
      `{"a":${'{"a":'.repeat(30)}1${'}'.repeat(30)},`,
    )
    const response = await postText(server.address, text)
    expect((await readProblem(response)).code).toBe('body-too-deep')
  })

  it('of over 100,000 bytes is refused for its size', async () => {
    const response = await postText(server.address, JSON.stringify({ a: 'x'.repeat(100_000) }))
    expect(response.status).toBe(413)
    expect((await readProblem(response)).code).toBe('body-too-large')
  })

  it.each(['{"site":', '', 'undefined', "{'site':1}", '\u0000'])(
    'reading %j is called bad JSON',
    async (text) => {
      const response = await postText(server.address, text)
      expect(response.status).toBe(400)
      expect((await readProblem(response)).code).toBe('bad-json')
    },
  )

  it.each([
    'text/plain',
    'application/x-www-form-urlencoded',
    'application/jsonp',
    'application/json; charset=koi8-r',
  ])('sent as %s is refused for its type', async (contentType) => {
    const response = await postText(server.address, JSON.stringify(makeCheckRequest()), contentType)
    expect(response.status).toBe(415)
    expect((await readProblem(response)).code).toBe('wrong-content-type')
  })

  it('that claims to be compressed and is not, is refused', async () => {
    const response = await fetch(`${server.address}/api/v1/check`, {
      method: 'POST',
      headers: { 'content-type': 'application/json', 'content-encoding': 'gzip' },
      body: '{}',
    })
    expect(response.status).toBe(400)
    expect((await readProblem(response)).code).toBe('bad-request')
  })
})
