import { gasConstant, viscosity } from './ambient.ts'
import type { LineElement } from './rig.ts'

/** Roughness of a hose's bore where none is given, m. No source: smooth rubber. */
export const defaultRoughnessM = 1e-5
const laminarLimit = 2300
const turbulentLimit = 4000

/**
 * Darcy friction factor.
 *
 *   f = 64/Re                                                  Re ≤ 2300
 *   1/√f = −2 log10(ε/(3.7 D) + 2.51/(Re √f))                  Re ≥ 4000
 *   linear in Re between their values at the two ends
 *
 * Inputs   Re – · relative roughness ε/D –
 * Valid    Re > 0, ε/D up to 0.05 by the source; used to 0.33, where it is only a bound
 * Source   Colebrook 1939; the line between is a convention        Checked  tests/reference/line.test.ts
 */
export function frictionFactor(reynolds: number, relativeRoughness: number): number {
  if (reynolds <= laminarLimit) return 64 / reynolds
  if (reynolds >= turbulentLimit) return colebrook(reynolds, relativeRoughness)
  const low = 64 / laminarLimit
  const high = colebrook(turbulentLimit, relativeRoughness)
  return low + ((high - low) * (reynolds - laminarLimit)) / (turbulentLimit - laminarLimit)
}

const perDecade = 2 / Math.LN10

/** Newton on x = 1/√f from Swamee and Jain's explicit start; two or three steps reach the last digits. */
function colebrook(reynolds: number, relativeRoughness: number): number {
  const a = relativeRoughness / 3.7
  const b = 2.51 / reynolds
  let x = -perDecade * Math.log(a + 5.74 / reynolds ** 0.9)
  for (let step = 0; step < 8; step++) {
    const inside = a + b * x
    const change = (x + perDecade * Math.log(inside)) / (1 + (perDecade * b) / inside)
    x -= change
    if (Math.abs(change) <= 1e-9 * x) break
  }
  return 1 / (x * x)
}

/** A line element at a temperature with everything that does not depend on the flow taken out. */
export interface LineFlow {
  name: string
  insideDiameterM: number
  /** R T0 / A², so that G² R T0 = massFlow² · flux */
  flux: number
  /** 4 / (π D μ), so that Re = massFlow · reynoldsPerFlow */
  reynoldsPerFlow: number
  relativeRoughness: number
  /** φm L / D */
  lengthRatio: number
  lossK: number
}

export function prepareElement(element: LineElement, place: string, temperatureK: number): LineFlow {
  const d = element.insideDiameterM
  const area = (Math.PI / 4) * d * d
  return {
    name: element.name || place,
    insideDiameterM: d,
    flux: (gasConstant * temperatureK) / (area * area),
    reynoldsPerFlow: 4 / (Math.PI * d * viscosity(temperatureK)),
    relativeRoughness: (element.roughnessM ?? defaultRoughnessM) / d,
    lengthRatio: ((element.mediaFactor ?? 1) * (element.lengthM ?? 0)) / d,
    lossK: element.lossK ?? 0,
  }
}

/** φm f L/D + ΣK of an element at a mass flow in kg/s. */
export function elementLoss(element: LineFlow, massFlow: number): number {
  if (element.lengthRatio === 0) return element.lossK
  const reynolds = massFlow * element.reynoldsPerFlow
  if (reynolds <= laminarLimit) return (element.lengthRatio * 64) / reynolds + element.lossK
  return element.lengthRatio * frictionFactor(reynolds, element.relativeRoughness) + element.lossK
}

/**
 * Pressure an element takes from isothermal air, from its outlet back to its inlet.
 *
 *   p1² − p2² = G² R T0 (φm f L/D + ΣK + 2 ln(p1/p2)),  G = ṁ/A        Pa absolute
 *
 * With u = p1²/p2² − 1 and χ = G² R T0 / p2² it is u = χ (C + ln(1 + u)), solved by Newton from an upper bound of
 * its root, from which a convex function is descended without overshoot.
 *
 * Inputs   element, prepared · ṁ kg/s, positive · p2 Pa absolute
 * Result   p1 − p2 in Pa, or NaN when choked: χ ≥ 1, which K = L = 0 is held to as well
 * Ignores  heat from the wall taking time, bends not in ΣK
 * Source   isothermal compressible pipe flow, any fluid-mechanics text        Checked  tests/reference/line.test.ts
 */
export function elementPressureDrop(element: LineFlow, massFlow: number, outletPa: number): number {
  const chi = (massFlow * massFlow * element.flux) / (outletPa * outletPa)
  if (chi >= 1) return NaN
  if (chi === 0) return 0
  const loss = elementLoss(element, massFlow)
  if (loss === 0) return 0
  let u = chi * loss * (1 + chi / (1 - chi))
  for (let step = 0; step < 60; step++) {
    const next = u - (u - chi * (loss + Math.log1p(u))) / (1 - chi / (1 + u))
    const change = Math.abs(next - u)
    u = next
    if (change <= 1e-13 * u) break
  }
  return (outletPa * u) / (1 + Math.sqrt(1 + u))
}

/**
 * The same law forwards: pressure at an element's outlet from the pressure at its inlet.
 *
 * Inputs   element, prepared · ṁ kg/s · p1 Pa absolute
 * Result   p2 Pa absolute, or NaN when this inlet pressure cannot pass the flow without choking
 */
export function elementOutletPressure(element: LineFlow, massFlow: number, inletPa: number): number {
  const flux = massFlow * massFlow * element.flux
  const loss = elementLoss(element, massFlow)
  const inletSquare = inletPa * inletPa
  const lowest = inletSquare - flux * (loss + Math.log(inletSquare / flux))
  if (!(flux < inletSquare) || lowest <= flux) return NaN
  if (loss === 0) return inletPa
  let square = inletSquare
  for (let step = 0; step < 60; step++) {
    const residual = square - inletSquare + flux * (loss + Math.log(inletSquare / square))
    const next = square - residual / (1 - flux / square)
    const change = Math.abs(next - square)
    square = next
    if (change <= 1e-14 * inletSquare) break
  }
  return Math.sqrt(square)
}

/** Gauge pressure before a row of elements from the gauge pressure after it; NaN when one of them is choked. */
export function gaugeBeforeLine(
  line: readonly LineFlow[],
  massFlow: number,
  gaugePa: number,
  ambientPa: number,
): number {
  let gauge = gaugePa
  for (let i = line.length - 1; i >= 0; i--) {
    gauge += elementPressureDrop(line[i]!, massFlow, ambientPa + gauge)
  }
  return gauge
}

/** The element that chokes when the same march is taken, or null. */
export function findChokedElement(
  line: readonly LineFlow[],
  massFlow: number,
  gaugePa: number,
  ambientPa: number,
): LineFlow | null {
  let gauge = gaugePa
  for (let i = line.length - 1; i >= 0; i--) {
    const drop = elementPressureDrop(line[i]!, massFlow, ambientPa + gauge)
    if (Number.isNaN(drop)) return line[i]!
    gauge += drop
  }
  return null
}
