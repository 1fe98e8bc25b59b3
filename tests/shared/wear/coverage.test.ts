import { beforeAll, describe, expect, it } from 'vitest'
import { measureCoverage } from './coverage.ts'
import type { Coverage } from './coverage.ts'
import { modelWorld } from './simulate.ts'

const nozzles = 2000
const seed = 7
const counts = [0, 1, 3, 10]

describe.each([0, 0.15])('over 2,000 simulated nozzles whose world is the model, drift %f', (drift) => {
  const world = { ...modelWorld, drift }
  let found: Coverage[] = []
  beforeAll(() => {
    found = counts.map((count) => measureCoverage(nozzles, count, world, { seed, drift }))
  }, 120_000)

  it('the 80 % range of bore and of hours holds the truth in 77 to 84 %', () => {
    expect(found).toHaveLength(counts.length)
    for (const { bore, hours } of found) {
      for (const share of [bore, hours]) {
        expect(share).toBeGreaterThanOrEqual(0.77)
        expect(share).toBeLessThanOrEqual(0.84)
      }
    }
  })

  it('more checks narrow it on average', () => {
    for (let i = 1; i < found.length; i++) {
      expect(found[i]!.boreWidthMm).toBeLessThan(0.95 * found[i - 1]!.boreWidthMm)
      expect(found[i]!.hoursWidth).toBeLessThan(0.95 * found[i - 1]!.hoursWidth)
    }
  })

  it('few nozzles contradict a table they were drawn from', () => {
    expect(found[0]!.contradicted).toBe(0)
    expect(found[1]!.contradicted).toBeLessThan(0.03)
  })
})
