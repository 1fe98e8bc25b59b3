import { normalCdf, normalNodes } from './normal.ts'
import { integrateOver, probabilityBelow, quantileOf } from './gridDistribution.ts'
import type { GridDistribution } from './gridDistribution.ts'

export interface Quantiles {
  p10: number
  p50: number
  p90: number
}

/** What the distribution of ln w is carried forward with; hours are equivalent, bores mm. */
export interface Course {
  grid: GridDistribution
  newBoreMm: number
  /** hours of the last check, or 0; never after the hours asked about */
  hoursToLastCheck: number
  /** hours from the last check to now */
  hoursSince: number
  drift: number
}

/** A normal is as good as ended here: 1 in 10¹³. */
const reach = 7.5
const nodes = normalNodes(0.9, 4.5)
const shares = { p10: 0.1, p50: 0.5, p90: 0.9 } as const

export function eachQuantile(find: (share: number) => number): Quantiles {
  return { p10: find(shares.p10), p50: find(shares.p50), p90: find(shares.p90) }
}

/**
 * Quantiles of the bore now.
 *
 *   b = new bore + w (h₁ + g exp(τ z))        mm
 *   P(b ≤ x) = ∫ p(ln w) Φ(ln(((x − new bore)/w − h₁)/g)/τ) d ln w
 *
 * Inputs   w mm per equivalent hour on its grid · h₁ hours to the last check, g hours since · τ – · z standard normal
 * Valid    any; exact to the grid where τ g is 0
 * Source   a model of our own
 * Checked  tests/shared/wear/forecast.test.ts
 */
export function boreQuantiles({ grid, newBoreMm, hoursToLastCheck, hoursSince, drift }: Course): Quantiles {
  const boreAt = (logGrowth: number) => newBoreMm + Math.exp(logGrowth)
  const hours = hoursToLastCheck + hoursSince
  if (hours === 0) return eachQuantile(() => newBoreMm)
  if (drift * hoursSince === 0)
    return eachQuantile((share) => boreAt(quantileOf(grid, share) + Math.log(hours)))
  const most = Math.log(hoursToLastCheck + hoursSince * Math.exp(reach * drift))
  const least = Math.log(hoursToLastCheck + hoursSince * Math.exp(-reach * drift))
  const scale = (drift * hoursSince) / hours
  const probability = (logGrowth: number) =>
    probabilityBelow(grid, logGrowth - most) +
    integrateOver(grid, logGrowth - most, logGrowth - least, scale, (x) => {
      const ratio = (Math.exp(logGrowth - x) - hoursToLastCheck) / hoursSince
      return ratio > 0 ? normalCdf(Math.log(ratio) / drift) : 0
    })
  const low = grid.edges[0]! + least
  const high = grid.edges.at(-1)! + most
  return eachQuantile((share) =>
    boreAt(solveQuantile(probability, share, low, high, quantileOf(grid, share) + Math.log(hours))),
  )
}

/**
 * Quantiles of the hours until the limit bore, negative where it is past: then the hours since, at the same rate.
 *
 *   h = ((L − new bore)/w − h₁ − g exp(τ z₁)) / exp(τ z₂)        equivalent hours
 *   P(h ≤ x) = P((L − new bore)/w − h₁ ≤ x exp(τ z₂) + g exp(τ z₁))
 *
 * The wider of the two normals is integrated by its distribution function, the narrower on nodes, w on its grid.
 *
 * Inputs   L limit bore mm · the others as for `boreQuantiles`
 * Valid    any; a limit under the new bore counts from where the same rate would have crossed it
 * Source   a model of our own
 * Checked  tests/shared/wear/forecast.test.ts
 */
export function hourQuantiles(course: Course, limitBoreMm: number): Quantiles {
  const { grid, newBoreMm, hoursToLastCheck, hoursSince, drift } = course
  const growthMm = limitBoreMm - newBoreMm
  const hours = hoursToLastCheck + hoursSince
  const undrifted = (share: number) =>
    growthMm / Math.exp(quantileOf(grid, growthMm > 0 ? 1 - share : share)) - hours
  if (drift === 0 || (growthMm === 0 && hours === 0)) return eachQuantile(undrifted)

  const spread = Math.exp(reach * drift)
  const ends = [grid.edges[0]!, grid.edges.at(-1)!].map((x) => growthMm / Math.exp(x) - hoursToLastCheck)
  const soonest = Math.min(...ends) - hoursSince * spread
  const latest = Math.max(...ends) - hoursSince / spread
  const scale = 0.1 * (hours + Math.abs(growthMm) / Math.exp(quantileOf(grid, 0.5)))
  const factors = nodes.z.map((z) => Math.exp(drift * z))
  const probability = (y: number) => hourProbability(course, factors, growthMm, scale * Math.sinh(y))
  const low = Math.asinh((soonest < 0 ? soonest * spread : soonest / spread) / scale)
  const high = Math.asinh((latest < 0 ? latest / spread : latest * spread) / scale)
  return eachQuantile(
    (share) =>
      scale * Math.sinh(solveQuantile(probability, share, low, high, Math.asinh(undrifted(share) / scale))),
  )
}

function hourProbability(course: Course, factors: readonly number[], growthMm: number, x: number): number {
  const { grid, hoursToLastCheck, hoursSince, drift } = course
  const spread = Math.exp(reach * drift)
  const isAheadWider = Math.abs(x) >= hoursSince
  const wide = isAheadWider ? x : hoursSince
  const narrow = isAheadWider ? hoursSince : x
  /** P(wide exp(τ z) + narrow exp(τ z′) ≥ y) */
  const exceeds = (y: number) => {
    if (narrow === 0) return exceedsAlone(wide, y, drift)
    let sum = 0
    for (let i = 0; i < factors.length; i++) {
      sum += nodes.weights[i]! * exceedsAlone(wide, y - narrow * factors[i]!, drift)
    }
    return sum
  }
  if (growthMm === 0) return exceeds(-hoursToLastCheck)
  const most = hoursSince * spread + (x < 0 ? x / spread : x * spread)
  const least = hoursSince / spread + (x < 0 ? x * spread : x / spread)
  /** ln of the rate at which the growth takes so many hours from new */
  const logRateOver = (hours: number) => (hours * growthMm > 0 ? Math.log(growthMm / hours) : Infinity)
  const atMost = logRateOver(most + hoursToLastCheck)
  const atLeast = logRateOver(least + hoursToLastCheck)
  const deviation = drift * Math.hypot(x, hoursSince)
  const scale = deviation / (Math.abs(x + hoursSince + hoursToLastCheck) + 2 * deviation)
  const value = (logRate: number) => exceeds(growthMm / Math.exp(logRate) - hoursToLastCheck)
  return growthMm > 0
    ? 1 - probabilityBelow(grid, atLeast) + integrateOver(grid, atMost, atLeast, scale, value)
    : probabilityBelow(grid, atLeast) + integrateOver(grid, atLeast, atMost, scale, value)
}

/** P(a exp(τ z) ≥ y) */
function exceedsAlone(a: number, y: number, drift: number): number {
  if (a > 0) return y <= 0 ? 1 : normalCdf(-Math.log(y / a) / drift)
  if (a < 0) return y >= 0 ? 0 : normalCdf(Math.log(y / a) / drift)
  return y <= 0 ? 1 : 0
}

const mostSteps = 100

/** Where a rising probability reaches the share: on the logit, nearly straight; bisection where that goes wrong. */
function solveQuantile(
  probability: (x: number) => number,
  share: number,
  from: number,
  to: number,
  guess: number,
): number {
  const logit = (p: number) => Math.log(Math.max(p, 1e-15) / Math.max(1 - p, 1e-15))
  const target = logit(share)
  let low = from
  let high = to
  let x = guess > low && guess < high ? guess : (low + high) / 2
  let previousX = NaN
  let previousExcess = NaN
  let slope = NaN
  for (let i = 0; i < mostSteps; i++) {
    const p = probability(x)
    const excess = logit(p) - target
    if (excess > 0) high = x
    else low = x
    if (Math.abs(p - share) < 1e-7 || high - low < 1e-12 * Math.max(1, Math.abs(x))) break
    const found = (excess - previousExcess) / (x - previousX)
    if (found > 0 && Number.isFinite(found)) slope = found
    previousX = x
    previousExcess = excess
    // The first step has no slope yet: a short one towards the root.
    const step = Number.isNaN(slope)
      ? -0.05 * Math.sign(excess) * Math.min(1, Math.abs(excess))
      : -excess / slope
    const next = x + step
    x = next > low && next < high && i < 40 ? next : (low + high) / 2
  }
  return x
}
