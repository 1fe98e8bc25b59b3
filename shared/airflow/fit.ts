import { engineShortfall } from './cautions.ts'
import { solveOperatingPoint } from './operatingPoint.ts'
import type { OperatingPointResult, Reason } from './operatingPoint.ts'
import { checkPrepared } from './pressureCheck.ts'
import type { PressureCheck, Verdict } from './pressureCheck.ts'
import { prepareRig } from './preparedRig.ts'
import type { Compressor, Rig, Site } from './rig.ts'

const sixteenthM = 0.0254 / 16
const sameBoreM = 0.5e-6

/** The rig with another nozzle bore at one outlet. */
export function withBore(rig: Rig, outletIndex: number, boreM: number): Rig {
  return {
    ...rig,
    outlets: rig.outlets.map((outlet, i) =>
      i === outletIndex ? { ...outlet, nozzle: { ...outlet.nozzle, boreM } } : outlet,
    ),
  }
}

/** checkPressure against a gauge target, so that it means the same at every altitude. */
function checkGauge(rig: Rig, site: Site, targetGaugePa: number): PressureCheck {
  return checkPrepared(prepareRig(rig, site), targetGaugePa)
}

const isReached = (verdict: Verdict) => verdict === 'holds' || verdict === 'barely-holds'

export interface FittingCompressor<T> {
  candidate: T
  check: PressureCheck
  /** 0 to 1 */
  engineShortfall: number
}

/**
 * The smallest of the compressors offered with which the rig holds its target.
 *
 * Inputs   rig, site · target Pa gauge · candidates from small to large, each with the compressor it stands for
 * Result   the first whose verdict is Holds (5 % air margin) and whose engine is not short; or, where none is, the first
 *          that at least barely holds; or null
 * Checked  tests/shared/airflow/fit.test.ts
 */
export function findSmallestCompressor<T>(
  rig: Rig,
  site: Site,
  targetGaugePa: number,
  candidates: readonly T[],
  compressorOf: (candidate: T) => Compressor,
): FittingCompressor<T> | null {
  let barely: FittingCompressor<T> | null = null
  for (const candidate of candidates) {
    const trial = { ...rig, compressor: compressorOf(candidate) }
    const prepared = prepareRig(trial, site)
    const check = checkPrepared(prepared, targetGaugePa)
    if (!isReached(check.verdict)) continue
    const shortfall = engineShortfall(trial.compressor, prepared, site.altitudeM)
    const found = { candidate, check, engineShortfall: shortfall }
    if (check.verdict === 'holds' && shortfall === 0) return found
    barely ??= found
  }
  return barely
}

export interface FittingNozzle {
  /** bore in sixteenths of an inch */
  number: number
  check: PressureCheck
  /** the same nozzle one sixteenth worn */
  wornCheck: PressureCheck
  /** worn so far it is wider than a hose of its own line, and counts no more */
  isWornWiderThanLine: boolean
}

export interface LargestNozzles {
  whenNew: FittingNozzle | null
  whenWorn: FittingNozzle | null
  /** what stops even the smallest number; null where one fits */
  obstacle: Reason | 'wider-than-line' | null
}

/**
 * The largest nozzle number that reaches the target new, and the largest that still does one sixteenth worn.
 *
 * Inputs   rig, site · target Pa gauge · which outlet · numbers from small to large
 * Result   as the limit bore, none is wider than the narrowest of the outlet's own line; null where even the smallest
 *          does not reach the target, with what stops it
 * Checked  tests/shared/airflow/fit.test.ts
 */
export function findLargestNozzles(
  rig: Rig,
  site: Site,
  targetGaugePa: number,
  outletIndex: number,
  numbers: readonly number[],
): LargestNozzles {
  const diameters = rig.outlets[outletIndex]!.line.map(({ insideDiameterM }) => insideDiameterM)
  const isWiderThanLine = (sixteenths: number) => sixteenths * sixteenthM > Math.min(...diameters) + sameBoreM
  const at = (sixteenths: number) =>
    checkGauge(withBore(rig, outletIndex, sixteenths * sixteenthM), site, targetGaugePa)
  let whenNew: FittingNozzle | null = null
  let whenWorn: FittingNozzle | null = null
  for (const number of numbers) {
    const check = at(number)
    const obstacle = isReached(check.verdict)
      ? isWiderThanLine(number)
        ? 'wider-than-line'
        : null
      : check.reason
    if (obstacle) return { whenNew, whenWorn, obstacle: whenNew ? null : obstacle }
    const wornCheck = at(number + 1)
    const isWornWiderThanLine = isWiderThanLine(number + 1)
    whenNew = { number, check, wornCheck, isWornWiderThanLine }
    if (isReached(wornCheck.verdict) && !isWornWiderThanLine) whenWorn = whenNew
  }
  return { whenNew, whenWorn, obstacle: null }
}

/**
 * What the other outlets see when one is shut: the operating point without it; null when it is the only one.
 * Checked  tests/shared/airflow/fit.test.ts
 */
export function solveWithOutletShut(
  rig: Rig,
  site: Site,
  shutIndex: number,
): (OperatingPointResult & { openIndexes: number[] }) | null {
  const openIndexes = rig.outlets.map((_, i) => i).filter((i) => i !== shutIndex)
  if (openIndexes.length === 0) return null
  const outlets = openIndexes.map((i) => rig.outlets[i]!)
  return { ...solveOperatingPoint({ ...rig, outlets }, site), openIndexes }
}
