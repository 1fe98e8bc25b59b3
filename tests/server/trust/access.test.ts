import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { createApp } from '../../../server/app.ts'
import { roles } from '#shared/contracts/permissions.ts'
import { listMountedRoutes } from '../../support/mountedRoutes.ts'
import { readProblem } from '../../support/requests.ts'
import { accessTable } from './accessTable.ts'
import type { AccessRow } from './accessTable.ts'
import { AccessWorld, callers, oursMark } from './accessWorld.ts'
import type { Caller } from './accessWorld.ts'

let world: AccessWorld
beforeAll(async () => {
  world = await AccessWorld.make()
  // The first request of each notes the visit; from then on what is refused writes nothing at all.
  for (const caller of callers) await world.askAs(caller)('GET', '/api/v1/visit')
}, 60_000)
afterAll(() => world.server.stop())

/** The table's word on one caller. */
function statusFor({ may, status, isOurs }: AccessRow, caller: Caller): number {
  if (may === 'anyone') return status
  if (caller === 'nobody') return 401
  if (caller === 'let-go') return may === 'signed-in' ? (isOurs ? 404 : status) : 403
  if (caller === 'stranger') return isOurs ? 404 : status
  if (may === 'signed-in') return status
  const held = caller === 'all' ? roles : [caller]
  return held.some((role) => may.includes(role)) ? status : 403
}

const problemOf: Record<number, string> = { 401: 'not-signed-in', 403: 'forbidden', 404: 'not-found' }

describe('who may do what', () => {
  it('is said in this table for each route that is mounted, and for no other', () => {
    const mounted = listMountedRoutes(createApp(world.server.context))
    expect(mounted.length).toBeGreaterThan(20)
    expect(accessTable.map(({ route }) => route).toSorted()).toEqual(mounted.toSorted())
  })

  const cases = accessTable.flatMap((row) => callers.map((caller) => [row.route, caller, row] as const))
  it.each(cases)('%s: %s', async (_route, caller, row) => {
    const { path, body, file } = await row.ask(world, caller)
    const [method = ''] = row.route.split(' ')
    const ask = file ? world.sendAs(caller, file) : world.askAs(caller)
    const writes = world.countWrites()
    const response = await ask(method, path, body)
    const expected = statusFor(row, caller)
    expect(response.status, await response.clone().text()).toBe(expected)
    if (row.may !== 'anyone' && problemOf[expected]) {
      expect((await readProblem(response.clone())).code).toBe(problemOf[expected])
      expect(world.countWrites()).toBe(writes)
    }
    if (caller === 'stranger' || caller === 'let-go') {
      const text = await response.text()
      if (row.route !== 'GET /api/v1/mails') expect(text).not.toContain(oursMark)
    }
  })
})
