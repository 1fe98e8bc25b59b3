import { listFindings, logLikelihood } from './checks.ts'
import type { BoreCheck, Finding } from './checks.ts'
import { contradicts } from './contradiction.ts'
import type { RatePrior } from './contradiction.ts'
import { boreQuantiles, hourQuantiles } from './drift.ts'
import type { Course, Quantiles } from './drift.ts'
import { makeGrid } from './makeGrid.ts'

export interface WearHistory {
  newBoreMm: number
  rate: RatePrior
  /** in any order */
  checks: readonly BoreCheck[]
  /** standard deviation of a bit's feel, mm; absent 0.05 */
  bitFeelMm?: number
  /** share of checks that say nothing; absent 0.02 */
  slip?: number
  /** τ, standard deviation of ln of what the growth since the last check, and from now on, is multiplied by; absent 0 */
  drift?: number
  equivalentHoursNow: number
}

export interface WearQuestion extends WearHistory {
  equivalentHoursPerWeek: number
  limitBoreMm: number
}

export interface WearForecast {
  boreNowMm: Quantiles
  /** equivalent hours, negative where the limit is past */
  hoursToLimit: Quantiles
  /** null at no hours a week */
  weeksToLimit: Quantiles | null
  contradictsPrior: boolean
}

/** Common practice, no source: how sharply a bit is felt, and how often a check is of another nozzle or misread. */
export const defaultBitFeelMm = 0.05
export const defaultSlip = 0.02
/** τ in the application; a choice of our own, no source. */
export const applicationDrift = 0.15

const leastMedianMmPerHour = 1e-12
const sigmaRange = { least: 1e-6, most: 10 }
const mostSlip = 0.999
const mostDrift = 3

function requireFinite(values: Record<string, number>) {
  for (const [name, value] of Object.entries(values)) {
    if (!Number.isFinite(value)) throw new RangeError(`${name} is ${value}; any finite number would do`)
  }
}

interface Prepared {
  findings: Finding[]
  prior: RatePrior
  course: Course
}

function prepare(history: WearHistory): Prepared {
  const { newBoreMm, checks, bitFeelMm = defaultBitFeelMm, equivalentHoursNow } = history
  requireFinite({ newBoreMm, bitFeelMm, equivalentHoursNow, ...history.rate })
  const findings = listFindings(checks, bitFeelMm)
  for (const { hours, mm, deviationMm } of findings) requireFinite({ hours, mm, deviationMm })
  const prior = {
    medianMmPerHour: Math.max(leastMedianMmPerHour, history.rate.medianMmPerHour),
    logSigma: clamp(history.rate.logSigma, sigmaRange.least, sigmaRange.most),
  }
  const errors = { newBoreMm, bitFeelMm, slip: clamp(history.slip ?? defaultSlip, 0, mostSlip) }
  const middle = Math.log(prior.medianMmPerHour)
  const worn = findings.filter(({ hours }) => hours > 0)
  const logDensity = (logRate: number) => {
    const z = (logRate - middle) / prior.logSigma
    const rate = Math.exp(logRate)
    let sum = (-z * z) / 2
    for (const finding of worn) sum += logLikelihood(finding, newBoreMm + rate * finding.hours, errors)
    return sum
  }
  const seeds = worn
    .filter(({ mm }) => mm > newBoreMm)
    .map(({ mm, hours }) => Math.log((mm - newBoreMm) / hours))
  const grid = makeGrid(logDensity, middle, prior.logSigma, seeds)
  const hoursNow = Math.max(0, equivalentHoursNow)
  const hoursToLastCheck = Math.min(hoursNow, findings.at(-1)?.hours ?? 0)
  const drift = clamp(history.drift ?? 0, 0, mostDrift)
  const course = { grid, newBoreMm, hoursToLastCheck, hoursSince: hoursNow - hoursToLastCheck, drift }
  return { findings, prior, course }
}

function clamp(value: number, least: number, most: number): number {
  return Math.min(most, Math.max(least, value))
}

/**
 * How worn a nozzle is and how long still, from its liner's rate and what bits and gauges have said.
 *
 *   bore(h) = new bore + w h · ln w normal(ln median, σ) before the checks, weighed by their likelihoods after        mm
 *   τ       the growth since the last check, and the growth from now on, are each × exp(τ z), z independent normals
 *
 * Inputs   bores mm · w mm per equivalent hour · equivalent hours, those under 0 taken as 0 · accuracy a 95 %
 *          half-width · σ, slip, drift –
 * Result   10, 50 and 90 % of the bore now, and of the hours and weeks until the limit bore. Past it they are negative:
 *          the hours since, at the same rate. A limit under the new bore counts from where that rate would have
 *          crossed it. The order of the checks does not matter, not even in the last digit.
 * Valid    any finite numbers; σ, slip and τ are held to 1e-6 to 10, 0 to 0.999 and 0 to 3; a check later than now
 *          speaks of the rate alone
 * Ignores  a rate that changes over the checks; an oval bore, which bits read small
 * Source   a model of our own: common practice, no source
 * Checked  tests/shared/wear/forecast.test.ts, tests/shared/wear/coverage.test.ts
 */
export function forecastWear(question: WearQuestion): WearForecast {
  const { limitBoreMm, equivalentHoursPerWeek, newBoreMm } = question
  requireFinite({ limitBoreMm, equivalentHoursPerWeek })
  const { findings, prior, course } = prepare(question)
  const hoursToLimit = hourQuantiles(course, limitBoreMm)
  const isUsed = equivalentHoursPerWeek > 0
  return {
    boreNowMm: boreQuantiles(course),
    hoursToLimit,
    weeksToLimit: isUsed
      ? {
          p10: hoursToLimit.p10 / equivalentHoursPerWeek,
          p50: hoursToLimit.p50 / equivalentHoursPerWeek,
          p90: hoursToLimit.p90 / equivalentHoursPerWeek,
        }
      : null,
    contradictsPrior: contradicts(findings, newBoreMm, prior),
  }
}

/** One of the states that the nozzle may be in, with its probability. */
export interface WearState {
  rateMmPerHour: number
  boreNowMm: number
  weight: number
}

export interface WearPosterior {
  /** the grid of the rate; the weights sum to 1 */
  rates: { rateMmPerHour: number; weight: number }[]
  /** rate and bore now together: an expectation is the weighted sum over them */
  states: WearState[]
  /** what the growth from now on is multiplied by, with its probability; independent of the states */
  aheadFactors: { factor: number; weight: number }[]
  /** the range of the bore at any equivalent hours, for drawing */
  boreMmAt: (equivalentHours: number) => Quantiles
}

/** Gauss and Hermite for a standard normal, five points. */
const hermite = [
  { z: -2.8569700138728056, weight: 0.011257411327720689 },
  { z: -1.355626179974266, weight: 0.2220759220056126 },
  { z: 0, weight: 0.5333333333333333 },
  { z: 1.355626179974266, weight: 0.2220759220056126 },
  { z: 2.8569700138728056, weight: 0.011257411327720689 },
]

/**
 * The distribution behind `forecastWear`, for what is not a quantile: costs as a ratio of expectations, and curves.
 *
 * Result   weights of the rate, and of rate and bore now together, on the grid. A bore at later hours h is, in state i
 *          and with factor j, boreNowMm + rateMmPerHour · (h − now) · factor, with weight i · weight j. `boreMmAt` after
 *          the last check is the range with the drift of one growth since then; before it, the rate's alone.
 * Valid    expectations of functions that are smooth over τ: five points for each normal
 * Checked  tests/shared/wear/forecast.test.ts
 */
export function wearPosterior(history: WearHistory): WearPosterior {
  const { course, findings } = prepare(history)
  const { grid, newBoreMm, hoursToLastCheck, hoursSince, drift } = course
  const factors = drift > 0 ? hermite.map(({ z, weight }) => ({ factor: Math.exp(drift * z), weight })) : sure
  const rates = grid.points.map(({ x, weight }) => ({ rateMmPerHour: Math.exp(x), weight }))
  const states = rates.flatMap(({ rateMmPerHour, weight }) =>
    (hoursSince > 0 ? factors : sure).map((since) => ({
      rateMmPerHour,
      boreNowMm: newBoreMm + rateMmPerHour * (hoursToLastCheck + hoursSince * since.factor),
      weight: weight * since.weight,
    })),
  )
  const lastCheck = findings.at(-1)?.hours ?? 0
  const boreMmAt = (equivalentHours: number) => {
    const hours = Math.max(0, equivalentHours)
    const known = Math.min(hours, lastCheck)
    return boreQuantiles({ ...course, hoursToLastCheck: known, hoursSince: hours - known })
  }
  return { rates, states, aheadFactors: factors, boreMmAt }
}

const sure = [{ factor: 1, weight: 1 }]
