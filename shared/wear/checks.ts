import { logNormalCdf, logNormalDensity, normalCdf } from './normal.ts'

/** What was felt: the bit that went through, the one that did not; null for not tried. Bores in mm. */
export interface BitCheck {
  equivalentHours: number
  kind: 'bits'
  passedMm: number | null
  refusedMm: number | null
}

/** What was read: a taper gauge, a caliper, a pin, with its accuracy as a 95 % half-width. Bores in mm. */
export interface GaugeCheck {
  equivalentHours: number
  kind: 'gauge'
  boreMm: number
  accuracyMm: number
}

export type BoreCheck = BitCheck | GaugeCheck

export interface CheckErrors {
  newBoreMm: number
  bitFeelMm: number
  slip: number
}

/** One thing that was felt or read, ready to be weighed against a bore. */
export interface Finding {
  hours: number
  kind: 'passed' | 'refused' | 'read'
  /** mm */
  mm: number
  /** one standard deviation, mm */
  deviationMm: number
}

/** A 95 % half-width is so many standard deviations. */
const halfWidth95 = 1.96
/** A gauge or a feel is never better than this, so that no likelihood is a needle that no grid can find. */
const leastDeviationMm = 1e-5
/** A slip of a gauge reads anything from 1 mm under the new bore to 9 mm over it. */
const slipUnderMm = 1
const slipOverMm = 9

/** In one order whatever order they came in, so that sums round alike. What was not tried is left out. */
export function listFindings(checks: readonly BoreCheck[], bitFeelMm: number): Finding[] {
  const findings: Finding[] = []
  for (const check of checks) {
    const hours = Math.max(0, check.equivalentHours)
    if (check.kind === 'gauge') {
      const deviationMm = Math.max(leastDeviationMm, check.accuracyMm / halfWidth95)
      findings.push({ hours, kind: 'read', mm: check.boreMm, deviationMm })
      continue
    }
    const deviationMm = Math.max(leastDeviationMm, bitFeelMm)
    if (check.passedMm !== null) findings.push({ hours, kind: 'passed', mm: check.passedMm, deviationMm })
    if (check.refusedMm !== null) findings.push({ hours, kind: 'refused', mm: check.refusedMm, deviationMm })
  }
  return findings.sort(
    (a, b) =>
      a.hours - b.hours || a.mm - b.mm || a.deviationMm - b.deviationMm || a.kind.localeCompare(b.kind, 'en'),
  )
}

/**
 * Natural logarithm of the likelihood of one finding at a bore b.
 *
 *   a bit goes through    (1 − ε) Φ((b − bit)/s) + ε/2        –
 *   a bit does not        (1 − ε) Φ((bit − b)/s) + ε/2        –
 *   a gauge reads y       (1 − ε) N(y; b, accuracy/1.96) + ε/10 for y from new bore − 1 to + 9        1/mm
 *
 * Inputs   b, bit, s, y, accuracy mm · ε the share of findings that say nothing, 0 to under 1
 * Valid    any bore; never minus infinity, also where ε is 0
 * Ignores  an oval bore; that the bits of one check are felt by one hand
 * Source   a model of our own: common practice, no source
 * Checked  tests/shared/wear/forecast.test.ts
 */
export function logLikelihood(finding: Finding, boreMm: number, errors: CheckErrors): number {
  const { kind, mm, deviationMm } = finding
  const { slip, newBoreMm } = errors
  if (kind === 'read') {
    const read = Math.log(1 - slip) + logNormalDensity(mm - boreMm, deviationMm)
    const canSlip = slip > 0 && mm >= newBoreMm - slipUnderMm && mm <= newBoreMm + slipOverMm
    if (!canSlip) return read
    const slipped = Math.log(slip / (slipUnderMm + slipOverMm))
    return Math.max(read, slipped) + Math.log1p(Math.exp(-Math.abs(read - slipped)))
  }
  const z = (kind === 'passed' ? boreMm - mm : mm - boreMm) / deviationMm
  return slip > 0 ? Math.log((1 - slip) * normalCdf(z) + slip / 2) : logNormalCdf(z)
}
