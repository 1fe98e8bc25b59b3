import type { BoreCheck, Quantiles, WearQuestion } from '#shared/wear/index.ts'
import { plainNormalCdf } from './simulate.ts'

const samples = 300_000

/** Likelihood of a check as DESIGN words it, as a plain number. */
function likelihood(
  check: BoreCheck,
  boreMm: number,
  newBoreMm: number,
  feelMm: number,
  slip: number,
): number {
  if (check.kind === 'gauge') {
    const deviation = check.accuracyMm / 1.96
    const z = (check.boreMm - boreMm) / deviation
    const isInSlipRange = check.boreMm >= newBoreMm - 1 && check.boreMm <= newBoreMm + 9
    const read = Math.exp((-z * z) / 2) / (deviation * Math.sqrt(2 * Math.PI))
    return (1 - slip) * read + (isInSlipRange ? slip / 10 : 0)
  }
  const passes = (bitMm: number) => (1 - slip) * plainNormalCdf((boreMm - bitMm) / feelMm) + slip / 2
  const passed = check.passedMm === null ? 1 : passes(check.passedMm)
  const refused = check.refusedMm === null ? 1 : 1 - passes(check.refusedMm)
  return passed * refused
}

function weightedQuantiles(values: Float64Array, weights: Float64Array): Quantiles {
  const order = Array.from(values.keys())
    .filter((i) => weights[i]! > 0)
    .sort((a, b) => values[a]! - values[b]!)
  const total = order.reduce((sum, i) => sum + weights[i]!, 0)
  const at = (share: number) => {
    let sum = 0
    for (const i of order) {
      sum += weights[i]!
      if (sum >= share * total) return values[i]!
    }
    return NaN
  }
  return { p10: at(0.1), p50: at(0.5), p90: at(0.9) }
}

/**
 * The same forecast by weighing 300,000 points of rate and both drifts: the rate evenly spread in ∛w, the normals
 * from an evenly spread sequence (Roberts) by Box and Muller.
 */
export function forecastByForce(question: WearQuestion): {
  boreNowMm: Quantiles
  hoursToLimit: Quantiles
  meanBoreMm: number
} {
  const { newBoreMm, rate, checks, bitFeelMm = 0.05, slip = 0.02, drift = 0, limitBoreMm } = question
  const lastCheck = Math.max(0, ...checks.map(({ equivalentHours }) => equivalentHours))
  const since = question.equivalentHoursNow - lastCheck
  const lowest = Math.cbrt(rate.medianMmPerHour * Math.exp(-4.5 * rate.logSigma))
  const highest = Math.cbrt(rate.medianMmPerHour * Math.exp(4.5 * rate.logSigma))
  const bores = new Float64Array(samples)
  const hours = new Float64Array(samples)
  const weights = new Float64Array(samples)
  let most = 0
  for (let i = 0; i < samples; i++) {
    const root = lowest + ((highest - lowest) * (i + 0.5)) / samples
    const w = root ** 3
    const z = Math.log(w / rate.medianMmPerHour) / rate.logSigma
    // density of w, 1/w · exp(−z²/2), times dw = 3 root² d root
    let weight = Math.exp((-z * z) / 2) / root
    for (const check of checks) {
      weight *= likelihood(check, newBoreMm + w * check.equivalentHours, newBoreMm, bitFeelMm, slip)
    }
    weights[i] = weight
    most = Math.max(most, weight)
    const radius = Math.sqrt(-2 * Math.log(1 - ((0.5 + i * 0.7548776662466927) % 1)))
    const angle = 2 * Math.PI * ((0.5 + i * 0.5698402909980532) % 1)
    const bore = newBoreMm + w * (lastCheck + since * Math.exp(drift * radius * Math.cos(angle)))
    bores[i] = bore
    hours[i] = (limitBoreMm - bore) / (w * Math.exp(drift * radius * Math.sin(angle)))
  }
  let total = 0
  let sum = 0
  for (let i = 0; i < samples; i++) {
    if (weights[i]! < 1e-9 * most) weights[i] = 0
    total += weights[i]!
    sum += weights[i]! * bores[i]!
  }
  return {
    boreNowMm: weightedQuantiles(bores, weights),
    hoursToLimit: weightedQuantiles(hours, weights),
    meanBoreMm: sum / total,
  }
}
