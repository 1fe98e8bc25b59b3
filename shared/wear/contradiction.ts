import type { Finding } from './checks.ts'
import { normalCdf, normalNodes } from './normal.ts'

export interface RatePrior {
  /** mm per equivalent hour */
  medianMmPerHour: number
  /** standard deviation of ln w */
  logSigma: number
}

const nodes = normalNodes(0.2, 6)
const leastProbability = 0.01
const mostShrinking = 3

/**
 * Probability, by the prior alone, of a bore that feels or reads as large as a limit or larger.
 *
 *   P(new bore + w h + s ζ ≥ limit)        –
 *
 * The wider of w and ζ is integrated by its distribution function, the other on nodes.
 *
 * Inputs   limit less new bore mm · h equivalent hours · s standard deviation mm · ln w and ζ normal
 */
function probabilityAbove(prior: RatePrior, overNewMm: number, hours: number, deviationMm: number): number {
  const { medianMmPerHour, logSigma } = prior
  const medianMm = medianMmPerHour * hours
  if (medianMm === 0) return normalCdf(-overNewMm / deviationMm)
  const isRateWider = deviationMm <= logSigma * Math.max(overNewMm, medianMm)
  let sum = 0
  for (let i = 0; i < nodes.z.length; i++) {
    const z = nodes.z[i]!
    const needed = overNewMm - deviationMm * z
    const part = isRateWider
      ? needed <= 0
        ? 1
        : normalCdf(Math.log(medianMm / needed) / logSigma)
      : normalCdf((medianMm * Math.exp(logSigma * z) - overNewMm) / deviationMm)
    sum += nodes.weights[i]! * part
  }
  return sum
}

/**
 * Whether the checks speak against the liner's table: a nozzle mistaken for another, a wrong media, a table that does
 * not fit.
 *
 * True when one finding at least as extreme as this (a bit so large going through, so small not going; a reading so
 * far out on its own side) has a probability under 0.01 by the prior alone and without slips; or when the bore
 * shrinks: what a check says it had at least, less what a later or equal one says it has at most, is over 3 s. Between
 * two bits s is the feel; a gauge brings its own deviation, s² = σ₁² + σ₂² with half the feel's square for a bit.
 *
 * Inputs   findings in order of hours · new bore mm
 * Source   the limits are a choice of our own: common practice, no source
 * Checked  tests/shared/wear/contradiction.test.ts
 */
export function contradicts(findings: readonly Finding[], newBoreMm: number, prior: RatePrior): boolean {
  const isUnlikely = findings.some(({ hours, kind, mm, deviationMm }) => {
    const above = probabilityAbove(prior, mm - newBoreMm, hours, deviationMm)
    const isTooLarge = kind !== 'refused' && above < leastProbability
    const isTooSmall = kind !== 'passed' && 1 - above < leastProbability
    return isTooLarge || isTooSmall
  })
  return isUnlikely || hasShrunk(findings)
}

function hasShrunk(findings: readonly Finding[]): boolean {
  const variance = ({ kind, deviationMm }: Finding) =>
    kind === 'read' ? deviationMm ** 2 : deviationMm ** 2 / 2
  /** the largest bore seen so far, for each accuracy it was seen with */
  const largest = new Map<number, number>()
  let next = 0
  for (const later of findings) {
    // All of the same hours, before or after in the list, are earlier ones too.
    for (; next < findings.length && findings[next]!.hours <= later.hours; next++) {
      const earlier = findings[next]!
      if (earlier.kind === 'refused') continue
      const key = variance(earlier)
      largest.set(key, Math.max(largest.get(key) ?? -Infinity, earlier.mm))
    }
    if (later.kind === 'passed') continue
    for (const [earlierVariance, mm] of largest) {
      if (mm - later.mm > mostShrinking * Math.sqrt(earlierVariance + variance(later))) return true
    }
  }
  return false
}
