import { calibrate } from '../airflow/index.ts'
import type { CalibrationReason, MeasuredFactor } from '../airflow/index.ts'
import { freeAirAt } from '../airflow/compressor.ts'
import { questionOfCheck } from '../check/rigOfCheck.ts'
import type { CheckElement, CheckRequest } from '../contracts/check.ts'
import { checkLimits } from '../contracts/limits.ts'
import type { GaugeReading, Work } from '../contracts/work.ts'
import { sortMade } from './instants.ts'
import { dropSuperseded } from './supersede.ts'

/** What to look at when a factor is off by more than the gauges explain, likeliest first. Common practice, no source. */
export type CalibrationCause =
  | 'inlet-filter'
  | 'leak'
  | 'separator'
  | 'crushed-hose'
  | 'thin-hose'
  /** more air than the plate says, or less loss than the hoses can have: a bore or a gauge misread */
  | 'bore-or-gauge'

export interface Measured extends MeasuredFactor {
  /** 1, as the plate or the profile says, is outside of the range */
  isOff: boolean
}

export interface RigCalibration {
  reading: GaugeReading
  outletIndex: number
  /** factor on the plate; null where the reading did not move it, with why */
  conditionFactor: Measured | null
  conditionReason: CalibrationReason | null
  /** factor on the losses of the air line and of that outlet's line */
  lineFactor: Measured | null
  lineReason: CalibrationReason | null
  /** "delivers 168 of 185 cfm", at the pressure of the compressor's gauge; null where the condition was not moved */
  delivery: { freeAirM3Min: number; plateFreeAirM3Min: number } | null
  causes: CalibrationCause[]
}

export interface CalibrationFound {
  /** what later checks of the pair use: the latest reading that moved something; null: there is none */
  used: RigCalibration | null
  /** later ones that could not tell the machine from the hoses, latest first */
  unused: RigCalibration[]
}

const measured = (factor: MeasuredFactor | null): Measured | null =>
  factor && { ...factor, isOff: factor.low > 1 || factor.high < 1 }

function causesOf(condition: Measured | null, line: Measured | null): CalibrationCause[] {
  const causes: CalibrationCause[] = []
  if (condition?.isOff && condition.value < 1) causes.push('inlet-filter', 'leak', 'separator')
  if (line?.isOff && line.value > 1) causes.push('crushed-hose', 'thin-hose')
  const isTooGood = (condition?.isOff && condition.value > 1) || (line?.isOff && line.value < 1)
  if (isTooGood) causes.push('bore-or-gauge')
  return causes
}

const perMinute = 60

/**
 * What one reading says of the rig as its profile, the plate and the site would have it.
 *
 * Inputs   the reading, gauge pressures · the check of that rig with that compressor at the site of the reading
 * Result   see `calibrate` of the air model; a condition the check already has counts for nothing
 * Errors   none: an outlet that the rig no longer has gives null        Checked  tests/shared/work/calibration.test.ts
 */
export function calibrationOfReading(reading: GaugeReading, request: CheckRequest): RigCalibration | null {
  const { outletIndex } = reading
  if (!request.outlets[outletIndex]) return null
  const { rig, site, ambientPa } = questionOfCheck(request)
  const compressorPressurePa = reading.compressorPressureKpa * 1000 + ambientPa
  const { compressorAccuracyKpa, nozzleAccuracyKpa } = reading
  const found = calibrate(rig, site, {
    outletIndex,
    compressorPressurePa,
    nozzlePressurePa: reading.nozzlePressureKpa * 1000 + ambientPa,
    boreM: reading.boreMm / 1000,
    ...(compressorAccuracyKpa === null ? {} : { compressorAccuracyPa: compressorAccuracyKpa * 1000 }),
    ...(nozzleAccuracyKpa === null ? {} : { nozzleAccuracyPa: nozzleAccuracyKpa * 1000 }),
  })
  const conditionFactor = measured(found.conditionFactor)
  const lineFactor = measured(found.lineFactor)
  const plateFreeAirM3Min = freeAirAt(rig.compressor, compressorPressurePa) * perMinute
  return {
    reading,
    outletIndex,
    conditionFactor,
    conditionReason: found.conditionReason,
    lineFactor,
    lineReason: found.lineReason,
    delivery: conditionFactor && {
      freeAirM3Min: conditionFactor.value * plateFreeAirM3Min,
      plateFreeAirM3Min,
    },
    causes: causesOf(conditionFactor, lineFactor),
  }
}

/**
 * How a rig with a compressor was measured: by the latest reading of that pair that the owner has not set aside.
 *
 * A reading that moves neither factor does not undo an earlier one; it is listed as not used.
 *
 * Inputs   all gauge readings, in any order, corrections among them · the pair · the check of the pair at a site by its
 *          id, null where that cannot be asked
 * Errors   none        Checked  tests/shared/work/calibration.test.ts
 */
export function calibrationOf(
  gaugeReadings: Work['gaugeReadings'],
  pair: { rigId: string; compressorId: string },
  requestAt: (siteId: string) => CheckRequest | null,
): CalibrationFound {
  const current = dropSuperseded(gaugeReadings).map((corrected) => corrected.current)
  const readings = sortMade(current)
    .reverse()
    .filter(
      ({ rigId, compressorId, setAsideAt }) =>
        rigId === pair.rigId && compressorId === pair.compressorId && setAsideAt === null,
    )
  const unused: RigCalibration[] = []
  for (const reading of readings) {
    const request = requestAt(reading.siteId)
    const found = request && calibrationOfReading(reading, request)
    if (!found) continue
    if (found.conditionFactor || found.lineFactor) return { used: found, unused }
    unused.push(found)
  }
  return { used: null, unused }
}

function scaleLosses(factor: number): (element: CheckElement) => CheckElement {
  const { lengthM, lossK } = checkLimits
  return (element) => ({
    ...element,
    ...(element.lengthM === undefined ? {} : { lengthM: Math.min(lengthM.max, element.lengthM * factor) }),
    ...(element.lossK === undefined ? {} : { lossK: Math.min(lossK.max, element.lossK * factor) }),
  })
}

/**
 * A later check of the same pair, by what was measured: the condition takes the place of the record's own, and the line
 * factor multiplies length and K of the air line and of the outlet that was measured.
 *
 * Valid    lengths and K are held to what a check may contain
 * Checked  tests/shared/work/calibration.test.ts
 */
export function applyCalibration(request: CheckRequest, calibration: RigCalibration | null): CheckRequest {
  if (!calibration) return request
  const { conditionFactor, lineFactor, outletIndex } = calibration
  const scale = lineFactor && scaleLosses(lineFactor.value)
  return {
    ...request,
    compressor: conditionFactor
      ? { ...request.compressor, conditionFactor: conditionFactor.value }
      : request.compressor,
    airLine: scale ? request.airLine.map(scale) : request.airLine,
    outlets: scale
      ? request.outlets.map((outlet, i) =>
          i === outletIndex ? { ...outlet, line: outlet.line.map(scale) } : outlet,
        )
      : request.outlets,
  }
}
