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

/** Halley's steps on x = 1/√f, from one substitution of an ordinary f; the first is within 0.5, the second exact. */
function colebrook(reynolds: number, relativeRoughness: number): number {
  const a = relativeRoughness / 3.7
  const b = 2.51 / reynolds
  let x = -perDecade * Math.log(a + 8 * b)
  for (let step = 0; step < 8; step++) {
    const inside = a + b * x
    const excess = x + perDecade * Math.log(inside)
    const share = b / inside
    const slope = 1 + perDecade * share
    const change = excess / (slope + (excess * perDecade * share * share) / (2 * slope))
    x -= change
    // what is left is under a thousandth of the cube of this change
    if (Math.abs(change) <= 1e-4) break
  }
  return 1 / (x * x)
}

/** A line element at a temperature with everything that does not depend on the flow taken out. */
export interface LineFlow {
  name: string
  insideDiameterM: number
  /** √(R T0) / A, so that G² R T0 = (massFlow · chokePerFlow)²: at this pressure or under the element is choked */
  chokePerFlow: number
  /** 4 / (π D μ), so that Re = massFlow · reynoldsPerFlow */
  reynoldsPerFlow: number
  relativeRoughness: number
  /** φm L / D */
  lengthRatio: number
  lossK: number
}

/** What every element of a rig shares: its air. */
export interface LineAir {
  viscosityPaS: number
  /** √(R T0), m/s */
  isothermalSpeed: number
}

export function prepareLineAir(temperatureK: number): LineAir {
  return { viscosityPaS: viscosity(temperatureK), isothermalSpeed: Math.sqrt(gasConstant * temperatureK) }
}

/** An element in its air; without a name of its own it is called by its place. */
export function prepareElement(element: LineElement, air: LineAir, place: string, index: number): LineFlow {
  const d = element.insideDiameterM
  const area = (Math.PI / 4) * d * d
  return {
    name: element.name || `${place}-${index + 1}`,
    insideDiameterM: d,
    chokePerFlow: air.isothermalSpeed / area,
    reynoldsPerFlow: 4 / (Math.PI * d * air.viscosityPaS),
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
 * Inputs   element, prepared · ṁ kg/s, never negative · p2 Pa absolute
 * Result   p1 − p2 in Pa, or NaN when choked: G² R T0 ≥ p2², which K = L = 0 is held to as well
 * Ignores  heat from the wall taking time, bends not in ΣK
 * Source   isothermal compressible pipe flow, any fluid-mechanics text        Checked  tests/reference/line.test.ts
 */
export function elementPressureDrop(element: LineFlow, massFlow: number, outletPa: number): number {
  const ratio = (massFlow * element.chokePerFlow) / outletPa
  return ratio < 1 ? pressureDrop(element, massFlow, outletPa, ratio * ratio) : NaN
}

/** p1 − p2 at χ = G² R T0 / p2², at most 1. */
function pressureDrop(element: LineFlow, massFlow: number, outletPa: number, chi: number): number {
  if (chi === 0) return 0
  const loss = elementLoss(element, massFlow)
  if (loss === 0) return 0
  const u = squareRise(chi, loss)
  return (outletPa * u) / (1 + Math.sqrt(1 + u))
}

/**
 * u = p1²/p2² − 1 from u = χ (C + ln(1 + u)), χ up to 1 and C over 0.
 *
 * The start is the root with u − ln(1 + u) replaced by its bound u²/(2 (1 + u)); Halley's steps on a convex function
 * then need one or two logarithms.
 */
function squareRise(chi: number, loss: number): number {
  const delta = (1 - chi) / chi
  const gap = delta - loss
  const root = Math.sqrt(gap * gap + 4 * loss * (delta + 0.5))
  let u = gap < 0 ? (root - gap) / (2 * delta + 1) : (2 * loss) / (root + gap)
  for (let step = 0; step < 40; step++) {
    const square = 1 + u
    // the plain logarithm is twice as quick, and its last digit is lost only beside a loss as small as itself
    const excess = u - chi * (loss + (loss > 0.01 ? Math.log(square) : Math.log1p(u)))
    const slope = 1 - chi / square
    const bend = chi / (square * square)
    const change = excess / (slope - (excess * bend) / (2 * slope))
    u -= change
    const half = bend / (2 * slope)
    const left = half * half + bend / (3 * square * slope)
    if (Math.abs(change * change * change) * left <= 1e-16 * u) break
  }
  return u
}

/**
 * The same law forwards: pressure at an element's outlet from the pressure at its inlet.
 *
 * Inputs   element, prepared · ṁ kg/s · p1 Pa absolute
 * Result   p2 Pa absolute, or NaN when this inlet pressure cannot pass the flow without choking
 * Checked  tests/reference/line.test.ts, tests/shared/airflow/laws.test.ts
 */
export function elementOutletPressure(element: LineFlow, massFlow: number, inletPa: number): number {
  const flux = (massFlow * element.chokePerFlow) ** 2
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

/** A march from the nozzle back through elements: where it stands, and the first of them that was choked. */
export interface March {
  /** Pa gauge */
  gaugePa: number
  choked: LineFlow | null
  /** the greatest √(G² R T0) / p2 on the way: choked from 1 */
  tightness: number
}

export function startMarch(gaugePa = 0): March {
  return { gaugePa, choked: null, tightness: 0 }
}

/** Begins a march again at a gauge pressure. */
export function restartMarch(march: March, gaugePa: number): void {
  march.gaugePa = gaugePa
  march.choked = null
  march.tightness = 0
}

/**
 * Takes a march back through a row of elements. A choked one is taken from the lowest outlet pressure that passes the
 * flow, so that the pressure before a line is continuous and rises with the flow and with the pressure after it even
 * where no number may be returned: a search then needs no closed side, and looks at `choked` when it has ended.
 *
 * Inputs   line, prepared · ṁ kg/s · ambient pressure Pa · the march, changed in place
 */
export function marchBack(
  line: readonly LineFlow[],
  massFlow: number,
  ambientPa: number,
  march: March,
): void {
  for (let i = line.length - 1; i >= 0; i--) {
    const element = line[i]!
    const outletPa = ambientPa + march.gaugePa
    const chokePa = massFlow * element.chokePerFlow
    const ratio = chokePa / outletPa
    if (ratio > march.tightness) march.tightness = ratio
    if (ratio < 1) {
      march.gaugePa += pressureDrop(element, massFlow, outletPa, ratio * ratio)
    } else {
      march.choked ??= element
      march.gaugePa = chokePa + pressureDrop(element, massFlow, chokePa, 1) - ambientPa
    }
  }
}
