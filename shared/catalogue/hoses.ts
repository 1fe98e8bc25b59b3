import { M_PER_FOOT, mmOfInches } from '#shared/units/quantities.ts'
import type { Sourced } from './source.ts'

/** A hose bore by name. The metric name is a rounded one: the inch value is the one computed with. */
export interface HoseSize {
  inchName: string
  metricName: string
  insideDiameterMm: number
}

/** Common practice, no source: the sizes blast and air hose is sold and asked for in. */
export const HOSE_SIZES: readonly HoseSize[] = [
  { inchName: '1/2', metricName: '13', insideDiameterMm: mmOfInches(0.5) },
  { inchName: '3/4', metricName: '19', insideDiameterMm: mmOfInches(0.75) },
  { inchName: '1', metricName: '25', insideDiameterMm: mmOfInches(1) },
  { inchName: '1 1/4', metricName: '32', insideDiameterMm: mmOfInches(1.25) },
  { inchName: '1 1/2', metricName: '38', insideDiameterMm: mmOfInches(1.5) },
  { inchName: '2', metricName: '50', insideDiameterMm: mmOfInches(2) },
]

export const HOSE_LENGTHS: readonly { feet: number; lengthM: number }[] = [10, 25, 50, 100].map((feet) => ({
  feet,
  lengthM: feet * M_PER_FOOT,
}))

export const LINE_SOURCE: Sourced = {
  source: 'screen defaults: measure a loss where it matters',
  status: 'common practice, no source',
}

/** Velocity heads lost in one coupling, in the hose's own bore. */
export const LOSS_K_PER_COUPLING = 1
/** A pot with 1 1/4 in piping; measure it. */
export const POT_DEFAULT: Readonly<LossElement> = {
  insideDiameterMm: mmOfInches(1.25),
  lengthM: 0,
  lossK: 8,
}
/** Multiplies the friction of hose that carries media, after the pot. */
export const MEDIA_FACTOR_AFTER_POT = 1.3
export const HOSE_ROUGHNESS_MM = 0.01

export interface LossElement {
  insideDiameterMm: number
  lengthM: number
  lossK: number
}

/** A hose with its couplings as one element of the line. */
export function hoseElement(hose: {
  insideDiameterMm: number
  lengthM: number
  couplings: number
}): LossElement {
  const { insideDiameterMm, lengthM, couplings } = hose
  return { insideDiameterMm, lengthM, lossK: couplings * LOSS_K_PER_COUPLING }
}

const DRY_AIR_J_PER_KG_K = 287.05

export interface MeasuredDrop {
  dropKpa: number
  freeAirM3Min: number
  inletKpaGauge: number
  insideDiameterMm: number
  ambientKpa: number
  temperatureK: number
}

export type MeasuredLoss =
  | { ok: true; lossK: number }
  | { ok: false; problem: 'not-positive' }
  /** so much air cannot lose so much pressure: the largest possible drop, or 0 where that air cannot pass at all */
  | { ok: false; problem: 'drop-too-large'; largestDropKpa: number }

/**
 * The sum of losses of an element from a measured drop, "5 psi at 185 cfm", in the element's own bore.
 *
 *   K = (p1² − p2²) / (G² R T) − 2 ln(p1 / p2)        G = free air · p_amb / (R T) / A
 *
 * Inputs   p1 inlet, p2 = p1 − drop Pa absolute · free air m³/s at ambient pressure and T · A bore area m²
 * Valid    p2² > G² R T (not choked) and p2 above ambient; K is then never negative
 * Ignores  humidity, a line warmer than the free air; friction over length is counted in K
 * Source   the isothermal line element of the air model, solved for K        Checked  tests/shared/catalogue/hoses.test.ts
 */
export function lossKFromMeasured(measured: MeasuredDrop): MeasuredLoss {
  const { dropKpa, freeAirM3Min, inletKpaGauge, insideDiameterMm, ambientKpa, temperatureK } = measured
  const isPositive = Object.values(measured).every((value) => Number.isFinite(value) && value > 0)
  if (!isPositive) return { ok: false, problem: 'not-positive' }
  const p1 = (inletKpaGauge + ambientKpa) * 1000
  const p2 = p1 - dropKpa * 1000
  const RT = DRY_AIR_J_PER_KG_K * temperatureK
  const massFlow = ((freeAirM3Min / 60) * ambientKpa * 1000) / RT
  const G = massFlow / ((Math.PI / 4) * (insideDiameterMm / 1000) ** 2)
  const choke = G * Math.sqrt(RT)
  if (dropKpa >= inletKpaGauge || p2 <= choke) {
    const largest = Math.min(inletKpaGauge, (p1 - choke) / 1000)
    return { ok: false, problem: 'drop-too-large', largestDropKpa: Math.max(0, largest) }
  }
  return { ok: true, lossK: Math.max(0, (p1 ** 2 - p2 ** 2) / (G ** 2 * RT) - 2 * Math.log(p1 / p2)) }
}
