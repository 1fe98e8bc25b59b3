import { gasConstant, humidityRatio, saturationPressure, standardPressure } from './ambient.ts'
import {
  cleanAirDischargeCoefficient,
  criticalFlowFunction,
  criticalRatio,
  defaultDischargeCoefficient,
} from './nozzle.ts'
import type { PressureCheck } from './pressureCheck.ts'
import type { PreparedRig } from './preparedRig.ts'
import type { Compressor, Rig, Site } from './rig.ts'

/** Every caution there is; the sentences are made from these codes. */
export const cautionCodes = [
  'engine-short',
  'barometer-against-altitude',
  'air-only-reading-low',
  'target-above-set-pressure',
  'low-compressor-pressure',
  'hose-under-twice-bore',
  'hose-under-three-times-bore',
  'humid-bare-compressor',
  'nozzle-below-critical',
] as const

export type CautionCode = (typeof cautionCodes)[number]

export interface Caution {
  code: CautionCode
  /** how much it may move the figure it speaks of, percent */
  sizePct: number
}

/** Altitude from which an engine loses 1 % of its power in every 100 m. */
export const deratingFromM = { natural: 305, turbo: 1000 } as const
/** Separators of screw compressors hold about this much back. From memory. */
const lowCompressorGaugePa = 400e3

/**
 * By how much the engine falls short of the compressor's duty at this site, 0 to 1.
 *
 *   have = 1 − 1 % per 100 m above 305 m (natural) or 1000 m (turbo)
 *   need = (p_dry ((p_set/p_amb)^0.2857 − 1))_site / (the same)_sea level;  ρd T is p_dry / R
 *   short = max(0, 1 − 1.1 have / need)
 *
 * Inputs   compressor · prepared rig · altitude m        Valid  up to 5,000 m
 * Source   derating: US MSHA practice, second-hand; the 10 % reserve: no source        Checked  tests/shared/airflow/cautions.test.ts
 */
export function engineShortfall(compressor: Compressor, rig: PreparedRig, altitudeM: number): number {
  if (!compressor.engine) return 0
  const have = 1 - Math.max(0, altitudeM - deratingFromM[compressor.engine]) / 10000
  const { pressurePa, vapourPressurePa } = rig.ambient
  const setGauge = compressor.setPressurePa - pressurePa
  const duty = (ambientPa: number, dryPa: number) => dryPa * ((1 + setGauge / ambientPa) ** 0.2857 - 1)
  const need = duty(pressurePa, pressurePa - vapourPressurePa) / duty(101325, 101325)
  return Math.max(0, 1 - (1.1 * have) / need)
}

/**
 * What to be careful about in a check, the biggest first.
 *
 *   air-only reading    0.97 / Cd − 1, more air with the media shut off
 *   hose head           ½ ρ V² / p0 = ½ (Cd A Ψ / A_hose)², what a gauge in the last hose reads off the nozzle's p0
 *   humid, bare         (1 + w) √(1 + 0.608 w / (1 + w)) − 1, the pressure that vapour kept in the air adds
 *   above set           (p_req − p_set) / (p_unload − p_set), how far the machine has closed
 *   barometer           |p / p(altitude) − 1|, from 4 %        low compressor        1 − p / 4 bar, gauge
 *   below critical      1 − p0 / (p_amb / 0.528)               engine                see engineShortfall
 *
 * Inputs   rig, site, the rig prepared, its check, target Pa gauge
 * Result   codes with their size in percent
 * Source   perfect gas and moist air (gas constant 1 + 0.608 q times dry air's); 4 %, 4 bar, two and three bores, 25 K
 *          and 2 % are the design's, no source        Checked  tests/shared/airflow/cautions.test.ts
 */
export function findCautions(
  rig: Rig,
  site: Site,
  prepared: PreparedRig,
  check: PressureCheck,
  targetGaugePa: number,
): Caution[] {
  const found: Caution[] = []
  const add = (code: CautionCode, size: number) => found.push({ code, sizePct: size * 100 })
  const { ambient } = prepared

  const engineShort = engineShortfall(rig.compressor, prepared, site.altitudeM)
  if (engineShort > 0) add('engine-short', engineShort)

  if (site.barometerPa !== undefined) {
    const off = Math.abs(site.barometerPa / standardPressure(site.altitudeM) - 1)
    if (off > 0.04) add('barometer-against-altitude', off)
  }

  const coefficients = rig.outlets.map((o) => o.nozzle.dischargeCoefficient ?? defaultDischargeCoefficient)
  const leastCoefficient = Math.min(...coefficients)
  if (leastCoefficient < cleanAirDischargeCoefficient) {
    add('air-only-reading-low', cleanAirDischargeCoefficient / leastCoefficient - 1)
  }

  const compressorPa =
    check.operatingPoint?.compressorPressurePa ?? check.atTarget?.requiredCompressorPressurePa
  if (compressorPa !== undefined) {
    const gauge = compressorPa - ambient.pressurePa
    if (gauge < lowCompressorGaugePa) add('low-compressor-pressure', 1 - gauge / lowCompressorGaugePa)
  }
  if (check.atTarget && check.reason === null) {
    const { requiredCompressorPressurePa: requiredPa } = check.atTarget
    const { setPressurePa, unloadPressurePa } = rig.compressor
    if (requiredPa > setPressurePa) {
      add('target-above-set-pressure', (requiredPa - setPressurePa) / (unloadPressurePa - setPressurePa))
    }
  }

  let headShare = 0
  let leastRatio = Infinity
  rig.outlets.forEach((outlet, i) => {
    const last = outlet.line[outlet.line.length - 1] ?? rig.airLine[rig.airLine.length - 1]
    if (!last) return
    const flowPerPressure = prepared.outlets[i]!.nozzle.conductance * criticalFlowFunction
    const area = (Math.PI / 4) * last.insideDiameterM ** 2
    const head = (flowPerPressure / area) ** 2 * (gasConstant * prepared.lineTemperatureK) * 0.5
    headShare = Math.max(headShare, head)
    leastRatio = Math.min(leastRatio, last.insideDiameterM / outlet.nozzle.boreM)
  })
  if (leastRatio < 2) add('hose-under-twice-bore', headShare)
  else if (leastRatio < 3) add('hose-under-three-times-bore', headShare)

  const rise = rig.compressor.lineTemperatureRiseK ?? 0
  if (rise >= 25 && ambient.vapourPressurePa > 0.02 * ambient.pressurePa) {
    const ratio = humidityRatio(ambient.vapourPressurePa, ambient.pressurePa)
    add('humid-bare-compressor', (1 + ratio) * Math.sqrt(1 + (0.608 * ratio) / (1 + ratio)) - 1)
  }

  const lowestGauge = Math.min(
    targetGaugePa,
    ...(check.operatingPoint?.outlets.map((o) => o.nozzlePressurePa - ambient.pressurePa) ?? []),
  )
  if (criticalRatio * (ambient.pressurePa + lowestGauge) < ambient.pressurePa) {
    const subsonic = 1 - (ambient.pressurePa + lowestGauge) / (ambient.pressurePa / criticalRatio)
    add('nozzle-below-critical', subsonic)
  }
  return found.sort((a, b) => b.sizePct - a.sizePct)
}

/**
 * Water that leaves in drains and pot in an hour: inlet vapour of all the air delivered, less what saturated air holds
 * at the line's temperature and the compressor's pressure.
 *
 *   3600 ṁ (w(p_v, p_amb) − w(p_sat(T0), p)),  never below 0        L/h, 1 kg a litre
 *
 * Inputs   rig, prepared · its check
 * Result   L/h, null without an operating point
 * Ignores  vapour that leaves as such with warm air past the drains
 * Source   Dalton, humidityRatio        Checked  tests/shared/airflow/cautions.test.ts
 */
export function waterToDrain(prepared: PreparedRig, check: PressureCheck): number | null {
  if (!check.operatingPoint) return null
  const { pressurePa, vapourPressurePa } = prepared.ambient
  const { compressorPressurePa, massFlow } = check.operatingPoint
  const saturationPa = saturationPressure(prepared.lineTemperatureK)
  if (vapourPressurePa === 0 || saturationPa >= compressorPressurePa) return 0
  const carried = humidityRatio(vapourPressurePa, pressurePa)
  const held = humidityRatio(saturationPa, compressorPressurePa)
  return Math.max(0, carried - held) * massFlow * 3600
}
