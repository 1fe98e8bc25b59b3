import { freeAirAt } from './compressor.ts'
import { gaugeBeforeLine } from './line.ts'
import type { LineFlow } from './line.ts'
import { massFlowAtGauge } from './nozzle.ts'
import { prepareRig } from './preparedRig.ts'
import type { PreparedRig } from './preparedRig.ts'
import type { Rig, Site } from './rig.ts'
import { findRoot } from './rootFinding.ts'

/** Gauges read while one outlet blasts and every other is shut. */
export interface GaugeReadings {
  /** Pa absolute, at the compressor's outlet */
  compressorPressurePa: number
  /** Pa absolute, by the needle gauge before the nozzle */
  nozzlePressurePa: number
  /** m, measured */
  boreM: number
  /** ± Pa of each gauge (95 %); absent 3 % of the reading over the site's pressure, no source */
  compressorAccuracyPa?: number
  nozzleAccuracyPa?: number
  /** which outlet blasts; absent the first */
  outletIndex?: number
}

export interface MeasuredFactor {
  value: number
  low: number
  high: number
}

export type CalibrationReason =
  | 'nozzle-over-compressor'
  | 'drop-within-gauges'
  | 'regulator-acting'
  | 'line-choked'
  | 'compressor-at-set'
  | 'out-of-range'

export interface Calibration {
  /** factor on the nameplate; null where it was not moved */
  conditionFactor: MeasuredFactor | null
  conditionReason: CalibrationReason | null
  /** factor on φm f L/D + ΣK of every element; null where it was not moved */
  lineFactor: MeasuredFactor | null
  lineReason: CalibrationReason | null
}

export const conditionFactorRange = { min: 0.3, max: 1.2 }
export const lineFactorRange = { min: 0.1, max: 10 }
const absentAccuracy = 0.03
/** what is left of a drop that a factor explains, Pa */
const nearlyNoPa = 1

const scaleLosses = (line: readonly LineFlow[], factor: number): LineFlow[] =>
  line.map((element) => ({
    ...element,
    lengthRatio: element.lengthRatio * factor,
    lossK: element.lossK * factor,
  }))

/** The factor on the losses that turns the nozzle's gauge pressure into the compressor's at a flow; NaN when a choke is in the way. */
function lineFactorFor(
  rig: PreparedRig,
  outletIndex: number,
  massFlow: number,
  nozzleGauge: number,
  compressorGauge: number,
): number {
  if (nozzleGauge >= compressorGauge) return 0
  const ambientPa = rig.ambient.pressurePa
  const line = [...rig.airLine, ...rig.outlets[outletIndex]!.line]
  const dropAt = (factor: number) =>
    gaugeBeforeLine(scaleLosses(line, factor), massFlow, nozzleGauge, ambientPa) - compressorGauge
  let earlierFactor = 0
  let earlierDrop = nozzleGauge - compressorGauge
  const root = findRoot({
    evaluate: dropAt,
    propose(factor, drop) {
      const next = factor - (drop * (factor - earlierFactor)) / (drop - earlierDrop)
      earlierFactor = factor
      earlierDrop = drop
      return next
    },
    low: 0,
    high: 1000,
    guess: 1,
    widthTolerance: 1e-10,
    residualTolerance: 1e-3,
    zeroTolerance: 1e-9,
  })
  return Math.abs(root.residual) <= nearlyNoPa ? root.x : NaN
}

/**
 * What two gauges and a measured bore say of a rig.
 *
 *   flow      ṁ from the needle gauge and the bore
 *   k         (ṁ + air taken first) / (FAD(p) ρd), where the compressor works under its set pressure
 *   line      s with p_compressor = march(ṁ, p_nozzle) when every φm f L/D + ΣK is multiplied by s
 *
 * Each range is what the two gauges' accuracies make of it: the effect of each gauge at its ± (95 %) alone, added as
 * squares because their errors are independent, so a range of 95 % too. A drop that the gauges' accuracy could
 * itself make, a nozzle reading over the compressor's, a regulator that holds: such readings cannot tell the machine
 * from the hoses, and move neither. At or over the set pressure the machine is throttled, so only the line is measured.
 *
 * Inputs   rig and site (SI) · readings Pa absolute, m
 * Result   both factors with their range, or why they were not moved
 * Errors   none        Checked  tests/shared/airflow/calibrate.test.ts, tests/shared/work/calibration.test.ts
 */
export function calibrate(rig: Rig, site: Site, readings: GaugeReadings): Calibration {
  const outletIndex = readings.outletIndex ?? 0
  const measured: Rig = {
    ...rig,
    outlets: rig.outlets.map((outlet, i) =>
      i === outletIndex ? { ...outlet, nozzle: { ...outlet.nozzle, boreM: readings.boreM } } : outlet,
    ),
  }
  const prepared = prepareRig(measured, site)
  const ambientPa = prepared.ambient.pressurePa
  const outlet = prepared.outlets[outletIndex]!
  const compressorGauge = readings.compressorPressurePa - ambientPa
  const nozzleGauge = readings.nozzlePressurePa - ambientPa
  const compressorAccuracy = readings.compressorAccuracyPa ?? absentAccuracy * compressorGauge
  const nozzleAccuracy = readings.nozzleAccuracyPa ?? absentAccuracy * nozzleGauge
  const neither = (reason: CalibrationReason): Calibration => ({
    conditionFactor: null,
    conditionReason: reason,
    lineFactor: null,
    lineReason: reason,
  })

  if (!(nozzleGauge > 0) || nozzleGauge > compressorGauge) return neither('nozzle-over-compressor')
  if (compressorGauge - nozzleGauge <= Math.hypot(compressorAccuracy, nozzleAccuracy)) {
    return neither('drop-within-gauges')
  }
  const flowAt = (gauge: number) => massFlowAtGauge(outlet.nozzle, Math.max(0, gauge))
  const massFlow = flowAt(nozzleGauge)
  const entry = gaugeBeforeLine(outlet.line, massFlow, nozzleGauge, ambientPa)
  if (Number.isNaN(gaugeBeforeLine(prepared.airLine, massFlow, entry, ambientPa))) {
    return neither('line-choked')
  }
  if (entry >= outlet.regulatorGaugePa - nozzleAccuracy) return neither('regulator-acting')

  /** Errors of the two gauges are independent: their effects, one gauge at a time, add as squares. */
  const ranged = (factorAt: (c: number, n: number) => number, range: { min: number; max: number }) => {
    const value = factorAt(compressorGauge, nozzleGauge)
    if (!(value >= range.min && value <= range.max)) return null
    const off = (c: number, n: number) => factorAt(compressorGauge + c, nozzleGauge + n) - value
    const effects = [
      [off(-compressorAccuracy, 0), off(compressorAccuracy, 0)],
      [off(0, -nozzleAccuracy), off(0, nozzleAccuracy)],
    ].map((pair) => pair.filter((effect) => !Number.isNaN(effect)))
    const reach = (sign: number) =>
      Math.hypot(...effects.map((pair) => Math.max(0, ...pair.map((effect) => sign * effect))))
    return { value, low: Math.max(0, value - reach(-1)), high: value + reach(1) }
  }

  const lineFactor = ranged((c, n) => lineFactorFor(prepared, outletIndex, flowAt(n), n, c), lineFactorRange)
  const lineReason = lineFactor ? null : 'out-of-range'

  const setGauge = measured.compressor.setPressurePa - ambientPa
  if (compressorGauge >= setGauge - compressorAccuracy) {
    return { conditionFactor: null, conditionReason: 'compressor-at-set', lineFactor, lineReason }
  }
  const conditionFactor = ranged(
    (c, n) =>
      (flowAt(n) + prepared.firstMassFlow) /
      (freeAirAt(measured.compressor, c + ambientPa) * prepared.ambient.dryAirDensity),
    conditionFactorRange,
  )
  return {
    conditionFactor,
    conditionReason: conditionFactor ? null : 'out-of-range',
    lineFactor,
    lineReason,
  }
}
