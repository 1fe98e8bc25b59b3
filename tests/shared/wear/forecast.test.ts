import { describe, expect, it } from 'vitest'
import { forecastWear, wearPosterior } from '#shared/wear/index.ts'
import type { BoreCheck, Quantiles, WearQuestion } from '#shared/wear/index.ts'
import { forecastByForce } from './bruteForce.ts'
import { feelBore, limitBoreMm, makeChance, newBoreMm, rate, simulateNozzle } from './simulate.ts'

const bits = (equivalentHours: number, passedMm: number | null, refusedMm: number | null): BoreCheck => ({
  equivalentHours,
  kind: 'bits',
  passedMm,
  refusedMm,
})
const gauge = (equivalentHours: number, boreMm: number, accuracyMm = 0.1): BoreCheck => ({
  equivalentHours,
  kind: 'gauge',
  boreMm,
  accuracyMm,
})

function ask(overrides: Partial<WearQuestion> = {}): WearQuestion {
  return {
    newBoreMm,
    rate,
    checks: [],
    equivalentHoursNow: 120,
    equivalentHoursPerWeek: 20,
    limitBoreMm,
    ...overrides,
  }
}

const inOrder = ({ p10, p50, p90 }: Quantiles) => p10 <= p50 && p50 <= p90
const numbersOf = (question: WearQuestion) => {
  const { boreNowMm, hoursToLimit } = forecastWear(question)
  return [...Object.values(boreNowMm), ...Object.values(hoursToLimit)] as number[]
}

const tenChecks = simulateNozzle(10, makeChance(3)).checks
const wide = { medianMmPerHour: rate.medianMmPerHour, logSigma: 1 }
const near = [bits(40, 9.525, 9.921875), bits(110, 9.921875, 10.31875)]
const cases: Record<string, WearQuestion> = {
  'without checks': ask(),
  'without checks, drifting': ask({ drift: 0.15 }),
  'without data on the liner, drifting': ask({ rate: wide, drift: 0.15 }),
  'two bit checks': ask({ checks: near }),
  'two bit checks a while ago, drifting': ask({ checks: near, drift: 0.15, equivalentHoursNow: 160 }),
  'near the limit, some of it past, drifting': ask({ checks: near, drift: 0.15, equivalentHoursNow: 225 }),
  'long past the limit, drifting': ask({ drift: 0.15, equivalentHoursNow: 600, limitBoreMm: 9.8 }),
  'a limit under the new bore, drifting': ask({ drift: 0.15, limitBoreMm: 9.4 }),
  'a limit at the new bore, drifting': ask({ drift: 0.15, limitBoreMm: newBoreMm, checks: near }),
  'ten checks, drifting': ask({ checks: tenChecks, equivalentHoursNow: 300, drift: 0.15 }),
  'a sharp gauge, drifting': ask({ checks: [gauge(100, 10.05, 0.02)], drift: 0.15 }),
  'a sharp gauge just now, drifting': ask({ checks: [gauge(119, 10.05, 0.02)], drift: 0.15 }),
  'the last check reads smaller, drifting': ask({ checks: [gauge(60, 9.9), gauge(118, 9.85)], drift: 0.15 }),
  'a gauge that may have slipped': ask({ checks: [gauge(100, 10.9, 0.1)], drift: 0.15, slip: 0.1 }),
  'two gauges that disagree': ask({ checks: [gauge(100, 9.8, 0.05), gauge(100, 10.3, 0.05)] }),
  'a gauge out of the range of slips': ask({
    checks: [gauge(300, 19, 3)],
    rate: wide,
    drift: 0.15,
    equivalentHoursNow: 340,
    limitBoreMm: 20,
  }),
  'bits and gauges, strong drift': ask({ checks: [...near, gauge(90, 9.9)], drift: 0.5, bitFeelMm: 0.1 }),
}

describe('the forecast beside brute force', () => {
  it.each(Object.keys(cases))('agrees to 1 %%: %s', { timeout: 60_000 }, (name) => {
    const question = cases[name]!
    const { boreNowMm, hoursToLimit } = forecastWear(question)
    const forced = forecastByForce(question)
    const boreWidth = forced.boreNowMm.p90 - forced.boreNowMm.p10
    const hoursWidth = forced.hoursToLimit.p90 - forced.hoursToLimit.p10
    for (const p of ['p10', 'p50', 'p90'] as const) {
      expect(Math.abs(boreNowMm[p] - forced.boreNowMm[p])).toBeLessThan(0.01 * boreWidth)
      expect(Math.abs(hoursToLimit[p] - forced.hoursToLimit[p])).toBeLessThan(0.01 * hoursWidth)
    }
    const { states } = wearPosterior(question)
    const mean = states.reduce((sum, state) => sum + state.weight * state.boreNowMm, 0)
    expect(Math.abs(mean - forced.meanBoreMm)).toBeLessThan(0.01 * boreWidth)
  })

  it.each(Object.keys(cases))('the distribution behind it is whole and the same: %s', (name) => {
    const question = cases[name]!
    const { states, rates, aheadFactors, boreMmAt } = wearPosterior(question)
    for (const list of [states, rates, aheadFactors]) {
      expect(list.reduce((sum, { weight }) => sum + weight, 0)).toBeCloseTo(1, 12)
    }
    expect(boreMmAt(question.equivalentHoursNow)).toEqual(forecastWear(question).boreNowMm)
  })
})

describe('the forecast by hand', () => {
  it('without checks is the log-normal of the table', () => {
    const { boreNowMm, hoursToLimit, weeksToLimit } = forecastWear(ask())
    // 1.2815515655446 standard deviations hold 80 %
    const factor = Math.exp(1.2815515655446 * 0.35)
    const middle = rate.medianMmPerHour * 120
    expect(boreNowMm.p10).toBeCloseTo(newBoreMm + middle / factor, 5)
    expect(boreNowMm.p50).toBeCloseTo(newBoreMm + middle, 5)
    expect(boreNowMm.p90).toBeCloseTo(newBoreMm + middle * factor, 5)
    const hours = (limitBoreMm - newBoreMm) / rate.medianMmPerHour
    expect(hoursToLimit.p10).toBeCloseTo(hours / factor - 120, 3)
    expect(hoursToLimit.p90).toBeCloseTo(hours * factor - 120, 3)
    expect(weeksToLimit!.p50).toBeCloseTo((hours - 120) / 20, 3)
  })

  it('drift widens new nozzles as one more normal would, √(σ² + τ²)', () => {
    const { boreNowMm } = forecastWear(ask({ drift: 0.2 }))
    const factor = Math.exp(1.2815515655446 * Math.hypot(0.35, 0.2))
    expect(boreNowMm.p90).toBeCloseTo(newBoreMm + rate.medianMmPerHour * 120 * factor, 4)
    // a new nozzle's hours: (limit − new bore)/w/exp(τ z)
    const { hoursToLimit } = forecastWear(ask({ drift: 0.2, equivalentHoursNow: 0 }))
    expect(hoursToLimit.p90).toBeCloseTo(((limitBoreMm - newBoreMm) / rate.medianMmPerHour) * factor, 2)
  })

  it('a new nozzle has its new bore for certain', () => {
    expect(forecastWear(ask({ equivalentHoursNow: 0, drift: 0.15 })).boreNowMm).toEqual({
      p10: newBoreMm,
      p50: newBoreMm,
      p90: newBoreMm,
    })
  })

  it('a limit at the new bore was passed when the nozzle was mounted', () => {
    const { hoursToLimit } = forecastWear(ask({ limitBoreMm: newBoreMm }))
    expect(hoursToLimit).toEqual({ p10: -120, p50: -120, p90: -120 })
    const fresh = forecastWear(ask({ limitBoreMm: newBoreMm, equivalentHoursNow: 0, drift: 0.15 }))
    for (const hours of Object.values(fresh.hoursToLimit)) expect(Math.abs(hours as number)).toBe(0)
  })

  it('past the limit the hours are negative, and the weeks with them', () => {
    const { hoursToLimit, weeksToLimit } = forecastWear(ask({ equivalentHoursNow: 900, drift: 0.15 }))
    expect(hoursToLimit.p90).toBeLessThan(0)
    expect(weeksToLimit!.p50).toBeCloseTo(hoursToLimit.p50 / 20, 12)
  })

  it('gives no weeks at no hours a week', () => {
    expect(forecastWear(ask({ equivalentHoursPerWeek: 0 })).weeksToLimit).toBeNull()
  })

  it('a bit that was not tried says nothing, and is no check to count from', () => {
    const silent = ask({ checks: [bits(100, null, null)], drift: 0.15 })
    expect(forecastWear(silent)).toEqual(forecastWear(ask({ drift: 0.15 })))
  })

  it('a check later than now speaks of the rate alone', () => {
    const { boreNowMm } = forecastWear(ask({ checks: [gauge(240, 10.525, 0.01)], drift: 0.15 }))
    expect(boreNowMm.p50).toBeCloseTo(10.025, 2)
    expect(boreNowMm.p90 - boreNowMm.p10).toBeLessThan(0.01)
  })

  it('refuses what is no number, and names it', () => {
    expect(() => forecastWear(ask({ limitBoreMm: NaN }))).toThrow('limitBoreMm is NaN')
    expect(() => forecastWear(ask({ checks: [gauge(10, Infinity)] }))).toThrow('mm is Infinity')
  })
})

describe('the laws of the forecast', () => {
  it('the order of the checks does not matter', () => {
    const chance = makeChance(11)
    const checks = [...tenChecks, gauge(50, 9.7), gauge(50, 9.75), ...near]
    const expected = numbersOf(ask({ checks, equivalentHoursNow: 300, drift: 0.15 }))
    for (let i = 0; i < 20; i++) {
      const keys = new Map(checks.map((check) => [check, chance.uniform()]))
      const shuffled = checks.toSorted((a, b) => keys.get(a)! - keys.get(b)!)
      const found = numbersOf(ask({ checks: shuffled, equivalentHoursNow: 300, drift: 0.15 }))
      found.forEach((value, j) => expect(Math.abs(value - expected[j]!)).toBeLessThanOrEqual(1e-12))
    }
  })

  it('a bit that goes through never makes the bore smaller, one that does not never larger', () => {
    const plain = forecastWear(ask()).boreNowMm
    for (let mm = 9.2; mm < 12; mm += 0.1) {
      const passed = forecastWear(ask({ checks: [bits(120, mm, null)] })).boreNowMm
      const refused = forecastWear(ask({ checks: [bits(120, null, mm)] })).boreNowMm
      expect(passed.p50).toBeGreaterThanOrEqual(plain.p50 - 1e-6)
      expect(refused.p50).toBeLessThanOrEqual(plain.p50 + 1e-6)
    }
    expect(forecastWear(ask({ checks: [bits(120, 10.3, null)] })).boreNowMm.p50).toBeGreaterThan(
      plain.p50 + 0.1,
    )
    expect(forecastWear(ask({ checks: [bits(120, null, 9.9)] })).boreNowMm.p50).toBeLessThan(plain.p50 - 0.1)
  })

  it('drift changes what is since the last check and ahead, and leaves a check just made its weight', () => {
    const checks = [gauge(120, 10.1, 0.02)]
    const still = forecastWear(ask({ checks }))
    const drifting = forecastWear(ask({ checks, drift: 0.15 }))
    expect(drifting.boreNowMm).toEqual(still.boreNowMm)
    expect(drifting.hoursToLimit.p90).toBeGreaterThan(still.hoursToLimit.p90 + 1)
  })

  it('stands up to anything finite', { timeout: 60_000 }, () => {
    const chance = makeChance(17)
    const pick = <T>(...items: T[]): T => items[Math.floor(chance.uniform() * items.length)]!
    for (let i = 0; i < 1500; i++) {
      const checks = Array.from({ length: pick(0, 1, 2, 5) }, () =>
        pick(
          () => bits(pick(0, 1e-9, 50, 1e7), pick(null, -5, 9.6, 1e6), pick(null, 0, 9.525, 9.9, 1e5)),
          () => gauge(pick(0, 1e-6, 50, 51, 1e8), pick(-1e6, 9.525, 9.8, 18.6, 1e7), pick(0, 1e-9, 0.1, 1e4)),
        )(),
      )
      const question = ask({
        checks,
        rate: { medianMmPerHour: pick(0, 1e-9, 0.004, 1e3), logSigma: pick(0, 1e-8, 0.35, 1, 8) },
        bitFeelMm: pick(0, 1e-9, 0.05, 10),
        slip: pick(0, 0.02, 1),
        drift: pick(0, 1e-6, 0.15, 2),
        equivalentHoursNow: pick(0, 1e-9, 50, 120, 1e6),
        equivalentHoursPerWeek: pick(0, 1e-9, 20, 168),
        limitBoreMm: pick(0, 9.525, 9.6, 10.6, 1e4),
      })
      const { boreNowMm, hoursToLimit, weeksToLimit } = forecastWear(question)
      for (const range of [boreNowMm, hoursToLimit, weeksToLimit ?? hoursToLimit]) {
        const text = JSON.stringify(question)
        expect(Object.values(range).every(Number.isFinite), text).toBe(true)
        expect(inOrder(range), text).toBe(true)
      }
      expect(boreNowMm.p10).toBeGreaterThanOrEqual(newBoreMm)
    }
  })

  it('takes thousands of checks, and comes to the rate they were made with', { timeout: 60_000 }, () => {
    const chance = makeChance(23)
    const w = 1.3 * rate.medianMmPerHour
    const checks = Array.from({ length: 5000 }, (_, i) => {
      const hours = 30 + i / 20
      return feelBore(newBoreMm + w * hours, hours, chance)
    })
    const { boreNowMm } = forecastWear(ask({ checks, equivalentHoursNow: 280 }))
    expect(Math.abs(boreNowMm.p50 - (newBoreMm + w * 280))).toBeLessThan(0.01)
    expect(boreNowMm.p90 - boreNowMm.p10).toBeLessThan(0.02)
  })
})
