import autocannon from 'autocannon'
import type { RigRecord } from '#shared/contracts/rigs.ts'
import { makeCheckRequest } from '../support/checkRequest.ts'
import { changeOf } from '../support/fleet.ts'
import { askWith } from '../support/people.ts'
import { listLength, password } from './apiData.ts'
import type { BenchData } from './apiData.ts'

export const loads = ['check', 'list', 'write', 'sign-in'] as const
export type LoadName = (typeof loads)[number]

type Options = Omit<autocannon.Options, 'url'> & { path?: string }
export interface Target {
  address: string
  data: BenchData
}

const json = { 'content-type': 'application/json' }
const listPath = `/api/v1/rigs?limit=${listLength}`

/** As many as keep one process busy; a thread that hashes passwords is busy with one. */
const connectionsOf: Record<LoadName, number> = { check: 10, list: 10, write: 10, 'sign-in': 2 }

/** What is answered once, to be answered again by the floor. */
export async function readAnswers({ address, data }: Target) {
  const ask = askWith(address, data.cookie)
  const [rigId = ''] = data.rigIds
  const rig = (await (await ask('GET', `/api/v1/rigs/${rigId}`)).json()) as RigRecord
  const calls = [
    ['post', '/api/v1/check', makeCheckRequest()],
    ['get', listPath, undefined],
    ['put', `/api/v1/rigs/${rigId}`, changeOf(rig, { name: 'Rig in the bench' })],
    ['post', '/api/v1/session', { email: data.email, password }],
  ] as const
  const answers = []
  for (const [method, path, body] of calls) {
    // Signing in ends the session that one signs in from.
    const asker = path === '/api/v1/session' ? askWith(address) : ask
    const response = await asker(method.toUpperCase(), path, body)
    if (response.status !== 200) throw new Error(`${path}: ${response.status} ${await response.text()}`)
    const mounted = path.replace(/\?.*/, '').replace(rigId, ':rigId')
    answers.push({ method, path: mounted, answer: (await response.json()) as unknown })
  }
  return answers
}

/** Each connection changes a rig of its own, from the version it was told last. */
async function prepareWrite({ address, data }: Target, firstRig: number): Promise<Options> {
  const ask = askWith(address, data.cookie)
  const records: RigRecord[] = []
  for (const id of data.rigIds.slice(firstRig, firstRig + connectionsOf.write)) {
    const response = await ask('GET', `/api/v1/rigs/${id}`)
    // The floor has no rig to tell: any body will do there.
    records.push(response.ok ? ((await response.json()) as RigRecord) : ({ id, version: 1 } as RigRecord))
  }
  let next = 0
  return {
    setupClient(client) {
      const record = records[next++ % records.length]
      if (!record) return
      let { version } = record
      let count = 0
      client.setRequests([
        {
          method: 'PUT',
          path: `/api/v1/rigs/${record.id}`,
          headers: { ...json, cookie: data.cookie },
          setupRequest(request) {
            count += 1
            const body = changeOf(
              { ...record, version },
              { name: `Rig, change ${count} of ${record.id.slice(0, 8)}` },
            )
            return { ...request, body: JSON.stringify(body) }
          },
          onResponse(status, body) {
            if (status === 200) version = (JSON.parse(body) as RigRecord).version
          },
        },
      ])
    },
  }
}

async function prepareLoad(name: LoadName, target: Target, firstRig: number): Promise<Options> {
  const { cookie, email } = target.data
  switch (name) {
    case 'check': {
      const body = JSON.stringify(makeCheckRequest())
      return { path: '/api/v1/check', method: 'POST', headers: { ...json, cookie }, body }
    }
    case 'list':
      return { path: listPath, headers: { cookie } }
    case 'write':
      return prepareWrite(target, firstRig)
    case 'sign-in': {
      const body = JSON.stringify({ email, password })
      return { path: '/api/v1/session', method: 'POST', headers: json, body }
    }
  }
}

export interface LoadOptions {
  /** a second; absent: as many as it takes */
  rate?: number
  connections?: number
  firstRig?: number
}

export interface Measured {
  perSecond: number
  p99Ms: number
}

/** Loads one thing for so long, as fast as it goes or at a rate. Two writers at once need rigs of their own. */
export async function load(
  name: LoadName,
  target: Target,
  seconds: number,
  { rate, connections = connectionsOf[name], firstRig = 0 }: LoadOptions = {},
): Promise<Measured> {
  const { path = '', ...options } = await prepareLoad(name, target, firstRig)
  const result = await autocannon({
    ...options,
    url: target.address + path,
    connections,
    duration: seconds,
    ...(rate !== undefined && { overallRate: rate }),
  })
  const refused = result.non2xx + result.errors + result.timeouts
  if (refused > 0)
    console.log(`  ${name}: ${refused} of ${result.requests.total} were not answered as they should`)
  return { perSecond: result.requests.average, p99Ms: result.latency.p99 }
}
