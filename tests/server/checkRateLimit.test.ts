import { afterEach, describe, expect, it } from 'vitest'
import { makeCheckRequest } from '../support/checkRequest.ts'
import { postCheck, readProblem } from '../support/requests.ts'
import { startServer } from '../support/server.ts'
import type { RunningServer } from '../support/server.ts'

let server: RunningServer
afterEach(() => server.stop())

function postAs(client: string): Promise<Response> {
  return fetch(`${server.address}/api/v1/check`, {
    method: 'POST',
    headers: { 'content-type': 'application/json', 'x-forwarded-for': client },
    body: JSON.stringify(makeCheckRequest()),
  })
}

describe('too many checks from one address', () => {
  it('are refused until a minute has passed, and health still answers', async () => {
    server = await startServer({ checkRatePerMinute: 3 })
    for (let count = 0; count < 3; count += 1) {
      expect((await postCheck(server.address, makeCheckRequest())).status).toBe(200)
    }
    const response = await postCheck(server.address, makeCheckRequest())
    expect(response.status).toBe(429)
    expect(Number(response.headers.get('retry-after'))).toBeGreaterThan(0)
    expect((await readProblem(response)).code).toBe('too-many-requests')
    expect((await fetch(`${server.address}/api/v1/health`)).status).toBe(200)
  })

  it('count wrong bodies too', async () => {
    server = await startServer({ checkRatePerMinute: 1 })
    expect((await postCheck(server.address, {})).status).toBe(422)
    expect((await postCheck(server.address, {})).status).toBe(429)
  })

  it('cannot be passed off as another address unless a proxy is trusted', async () => {
    server = await startServer({ checkRatePerMinute: 1 })
    expect((await postAs('192.0.2.1')).status).toBe(200)
    expect((await postAs('192.0.2.2')).status).toBe(429)
  })

  it('are counted for each address behind a trusted proxy', async () => {
    server = await startServer({ checkRatePerMinute: 1, trustProxy: 1 })
    expect((await postAs('192.0.2.1')).status).toBe(200)
    expect((await postAs('192.0.2.2')).status).toBe(200)
    expect((await postAs('192.0.2.1')).status).toBe(429)
  })

  it('pass where the limit is off', async () => {
    server = await startServer({ checkRatePerMinute: null })
    const answers = await Promise.all(
      Array.from({ length: 300 }, () => postCheck(server.address, makeCheckRequest())),
    )
    expect(answers.filter(({ status }) => status !== 200)).toEqual([])
  })
})
