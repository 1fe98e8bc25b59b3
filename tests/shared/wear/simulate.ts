import type { BoreCheck } from '#shared/wear/index.ts'
import { makeRandom } from '../../support/random.ts'

export interface Chance {
  uniform: () => number
  normal: () => number
}

export function makeChance(seed: number): Chance {
  const uniform = makeRandom(seed)
  const normal = () => Math.sqrt(-2 * Math.log(1 - uniform())) * Math.cos(2 * Math.PI * uniform())
  return { uniform, normal }
}

/** erf by Abramowitz and Stegun 7.1.26, good to 1.5e-7: not the one the application uses. */
export function plainNormalCdf(z: number): number {
  const x = Math.abs(z) / Math.SQRT2
  const t = 1 / (1 + 0.3275911 * x)
  const series =
    ((((1.061405429 * t - 1.453152027) * t + 1.421413741) * t - 0.284496736) * t + 0.254829592) * t
  const erf = 1 - series * Math.exp(-x * x)
  return z > 0 ? (1 + erf) / 2 : (1 - erf) / 2
}

export const sixtyFourthMm = 25.4 / 64
export const feelMm = 0.05
export const slip = 0.02

/** Whether a bit goes through, as the model says. */
export function feelBit(boreMm: number, bitMm: number, { uniform, normal }: Chance): boolean {
  return uniform() < slip ? uniform() < 0.5 : boreMm + feelMm * normal() > bitMm
}

/** A bit near the bore is tried, and if it goes through the next one: which bit comes first is no result. */
export function feelBore(boreMm: number, equivalentHours: number, chance: Chance): BoreCheck {
  const firstMm = Math.round((boreMm + 0.5 * chance.normal()) / sixtyFourthMm) * sixtyFourthMm
  const nextMm = firstMm + sixtyFourthMm
  const kind = 'bits'
  if (!feelBit(boreMm, firstMm, chance)) return { equivalentHours, kind, passedMm: null, refusedMm: firstMm }
  return feelBit(boreMm, nextMm, chance)
    ? { equivalentHours, kind, passedMm: nextMm, refusedMm: null }
    : { equivalentHours, kind, passedMm: firstMm, refusedMm: nextMm }
}

export const newBoreMm = 9.525
export const limitBoreMm = 10.6
/** Tungsten carbide on slag, the middle of 300 to 400 h for a sixteenth of an inch. */
export const rate = { medianMmPerHour: 25.4 / 16 / Math.sqrt(300 * 400), logSigma: 0.35 }

export interface World {
  /** ln of the true rate is drawn with so many times the table's spread */
  spread: number
  /** when new the rate was this part higher or lower than it is now, with a straight line between */
  rateChange: number
  /** a bit meets a bore so much smaller than the air does, mm for each mm of growth */
  ovalShare: number
  /** standard deviation of ln of the growth's factor since the last check and from now on */
  drift: number
}

export const modelWorld: World = { spread: 1, rateChange: 0, ovalShare: 0, drift: 0 }

export interface SimulatedNozzle {
  checks: BoreCheck[]
  hoursNow: number
  boreMm: number
  hoursToLimit: number
}

/** A nozzle somewhere in its life, with its checks at any hours before now. */
export function simulateNozzle(
  checkCount: number,
  chance: Chance,
  world: World = modelWorld,
): SimulatedNozzle {
  const { uniform, normal } = chance
  const rateMmPerHour = rate.medianMmPerHour * Math.exp(world.spread * rate.logSigma * normal())
  const hoursNow = 40 + 260 * uniform()
  const change = (uniform() < 0.5 ? -1 : 1) * world.rateChange
  // w(h) = rate · (1 + change · (h/hoursNow − 1)), integrated
  const growthAt = (hours: number) => rateMmPerHour * hours * (1 + change * (hours / (2 * hoursNow) - 1))
  const hours = Array.from({ length: checkCount }, () => hoursNow * (0.1 + 0.85 * uniform()))
  const lastCheck = Math.max(0, ...hours)
  const checks = hours.map((at) => feelBore(newBoreMm + growthAt(at) * (1 - world.ovalShare), at, chance))
  const since = Math.exp(world.drift * normal())
  const boreMm = newBoreMm + growthAt(lastCheck) + (growthAt(hoursNow) - growthAt(lastCheck)) * since
  const rateNow = rateMmPerHour * Math.exp(world.drift * normal())
  return { checks, hoursNow, boreMm, hoursToLimit: (limitBoreMm - boreMm) / rateNow }
}
