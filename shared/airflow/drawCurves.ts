import { deliveryAt, pressureAtDelivery } from './compressor.ts'
import { elementOutletPressure, findChokedElement, gaugeBeforeLine } from './line.ts'
import type { LineFlow } from './line.ts'
import { gaugeAtMassFlow, massFlowAtGauge } from './nozzle.ts'
import type { Reason } from './operatingPoint.ts'
import { checkPrepared } from './pressureCheck.ts'
import type { Verdict } from './pressureCheck.ts'
import { withPreparedBore } from './preparedBore.ts'
import { outletMassFlow } from './preparedRig.ts'
import type { PreparedOutlet, PreparedRig } from './preparedRig.ts'

export interface AirPoint {
  /** Pa gauge, at the nozzle whose bore is varied */
  nozzleGaugePa: number
  /** m³/s, air taken first and every other outlet included */
  freeAirM3S: number
}

export interface AirCurve {
  points: AirPoint[]
  /** why the curve ends before the range does; null where it runs through it */
  end: Reason | null
}

export interface DeliveryCurve extends AirCurve {
  /** does the curve end where the other outlets take all that is delivered */
  isTakenByOthers: boolean
}

export interface DrawCurve extends AirCurve {
  boreM: number
  /** with this bore, at the target */
  verdict: Verdict
  operatingPoint: AirPoint | null
}

export interface DeliveryAndDraw {
  lowestGaugePa: number
  highestGaugePa: number
  delivery: DeliveryCurve
  draws: DrawCurve[]
}

const stepsOfDelivery = 32
const stepsOfFall = 16
const stepsOfDraw = 24
/** halvings between two points of the delivery, down to under 1 Pa */
const stepsToEnd = 20

/** Gauge pressure before an outlet's line when its nozzle passes this flow; NaN when an element is choked. */
function gaugeBeforeOutlet({ line, nozzle }: PreparedOutlet, massFlow: number): number {
  return gaugeBeforeLine(line, massFlow, gaugeAtMassFlow(nozzle, massFlow), nozzle.ambientPa)
}

/** What all outlets but one draw from a manifold, kg/s; NaN when one of their lines is choked. */
function drawOfOthers(rig: PreparedRig, outletIndex: number, manifoldGaugePa: number): number {
  let total = 0
  rig.outlets.forEach((outlet, index) => {
    if (index === outletIndex) return
    const flow = outletMassFlow(outlet, manifoldGaugePa, NaN)
    total += Number.isNaN(gaugeBeforeOutlet(outlet, flow)) ? NaN : flow
  })
  return total
}

/** Gauge pressure after a row of elements from the gauge pressure before it; NaN when one of them is choked. */
function gaugeAfterLine(
  line: readonly LineFlow[],
  massFlow: number,
  gaugePa: number,
  ambientPa: number,
): number {
  if (massFlow === 0) return gaugePa
  let pressurePa = ambientPa + gaugePa
  for (const element of line) pressurePa = elementOutletPressure(element, massFlow, pressurePa)
  return pressurePa - ambientPa
}

/** Compressor pressures at which its delivery is worth knowing: evenly, and every corner of its curve. */
function deliveryPressures(rig: PreparedRig): number[] {
  const { delivery, firstMassFlow, ambient } = rig
  const top = pressureAtDelivery(delivery, firstMassFlow)
  if (Number.isNaN(top)) return []
  const spread = (from: number, to: number, steps: number) =>
    Array.from({ length: steps + 1 }, (_, step) => from + ((to - from) * step) / steps)
  const setPa = delivery.pressuresPa[delivery.pressuresPa.length - 2]!
  const corners = delivery.pressuresPa.filter((pressure) => pressure > ambient.pressurePa && pressure < top)
  const fall = setPa < top ? spread(setPa, top, stepsOfFall) : []
  const all = [...spread(ambient.pressurePa, top, stepsOfDelivery), ...corners, ...fall]
  return [...new Set(all)].sort((a, b) => a - b)
}

/**
 * What reaches one nozzle from the compressor, whatever its bore: the compressor's pressure less what the line takes.
 *
 *   at each compressor pressure p:  ṁ = delivery(p) − air taken first,  nozzle pressure = p − losses(ṁ)
 *
 * The nozzle's bore does not enter, so every draw meets this curve exactly at its operating point.
 *
 * Inputs   rig, prepared · which outlet
 * Result   points of rising nozzle pressure; end names the element that is choked below the first of them; with several
 *          outlets the last is where the others take all
 * Checked  tests/shared/airflow/drawCurves.test.ts
 */
export function traceDelivery(rig: PreparedRig, outletIndex: number): DeliveryCurve {
  const { ambient, delivery, firstMassFlow } = rig
  const outlet = rig.outlets[outletIndex]!
  const arrivalAt = (pressurePa: number) => {
    const total = Math.max(0, deliveryAt(delivery, pressurePa) - firstMassFlow)
    const gauge = pressurePa - ambient.pressurePa
    const manifold = gaugeAfterLine(rig.airLine, total, gauge, ambient.pressurePa)
    const own = total - (manifold > 0 ? drawOfOthers(rig, outletIndex, manifold) : 0)
    const feed = Math.min(manifold, outlet.regulatorGaugePa)
    const nozzleGaugePa = own < 0 ? NaN : gaugeAfterLine(outlet.line, own, feed, ambient.pressurePa)
    return { total, gauge, own, feed, nozzleGaugePa }
  }
  const isChokedAt = (pressurePa: number) => {
    const { own, nozzleGaugePa } = arrivalAt(pressurePa)
    return own >= 0 && Number.isNaN(nozzleGaugePa)
  }
  const pointOf = ({ nozzleGaugePa, total }: { nozzleGaugePa: number; total: number }): AirPoint => ({
    nozzleGaugePa,
    freeAirM3S: (total + firstMassFlow) / ambient.dryAirDensity,
  })
  let pressures = deliveryPressures(rig)
  let end: Reason | null = null
  const chokedPa = pressures.findLast(isChokedAt)
  if (chokedPa !== undefined) {
    const { total, gauge, own, feed } = arrivalAt(chokedPa)
    end =
      chokedForwards(rig.airLine, total, gauge, ambient.pressurePa) ??
      chokedForwards(outlet.line, own, feed, ambient.pressurePa)
    pressures = pressures.filter((pressure) => pressure > chokedPa)
    const [next, top] = [pressures[0], pressures[pressures.length - 1]]
    if (next !== undefined && top !== undefined) {
      const [, edgePa] = findChange(chokedPa, next, isChokedAt)
      pressures = [...spreadFrom(edgePa, top), ...pressures].sort((a, b) => a - b)
    }
  }
  const points: AirPoint[] = []
  let earlierPa = ambient.pressurePa
  for (const pressurePa of pressures) {
    const arrival = arrivalAt(pressurePa)
    if (arrival.own < 0) {
      const [last] = findChange(earlierPa, pressurePa, (pressure) => arrivalAt(pressure).own >= 0)
      const lastArrival = arrivalAt(last)
      if (last > earlierPa && lastArrival.nozzleGaugePa >= 0) points.push(pointOf(lastArrival))
      return { points, end, isTakenByOthers: true }
    }
    if (arrival.nozzleGaugePa >= 0) points.push(pointOf(arrival))
    earlierPa = pressurePa
  }
  return { points, end, isTakenByOthers: false }
}

/** The value up to which something is so from low on, and the one from which it is not, by halving. */
function findChange(low: number, high: number, isSo: (value: number) => boolean): [number, number] {
  let [yes, no] = [low, high]
  for (let step = 0; step < stepsToEnd; step++) {
    const middle = (yes + no) / 2
    if (isSo(middle)) yes = middle
    else no = middle
  }
  return [yes, no]
}

/** Pressures from the edge of a choke up, close together there: the nozzle's pressure leaves it like a root. */
function spreadFrom(edgePa: number, topPa: number): number[] {
  const shares = Array.from({ length: stepsOfFall }, (_, step) => (step / stepsOfFall) ** 2)
  return shares.map((share) => edgePa + (topPa - edgePa) * share)
}

/** The first element that a march from the compressor cannot pass. */
function chokedForwards(
  line: readonly LineFlow[],
  massFlow: number,
  gaugePa: number,
  ambientPa: number,
): Reason | null {
  let pressurePa = ambientPa + gaugePa
  for (const element of line) {
    pressurePa = elementOutletPressure(element, massFlow, pressurePa)
    if (Number.isNaN(pressurePa)) return `choked:${element.name}`
  }
  return null
}

/** What the rig draws with one nozzle at a gauge pressure, or why it cannot stand there. */
function drawAt(rig: PreparedRig, outletIndex: number, nozzleGaugePa: number): AirPoint | Reason {
  const { ambient, firstMassFlow } = rig
  const outlet = rig.outlets[outletIndex]!
  const flow = massFlowAtGauge(outlet.nozzle, nozzleGaugePa)
  const manifold = gaugeBeforeOutlet(outlet, flow)
  if (Number.isNaN(manifold)) {
    const nozzleGauge = gaugeAtMassFlow(outlet.nozzle, flow)
    return `choked:${findChokedElement(outlet.line, flow, nozzleGauge, ambient.pressurePa)!.name}`
  }
  if (manifold > outlet.regulatorGaugePa * (1 + 1e-9)) return `regulator:${outletIndex + 1}`
  const total = flow + drawOfOthers(rig, outletIndex, manifold)
  if (Number.isNaN(gaugeBeforeLine(rig.airLine, total, manifold, ambient.pressurePa))) {
    const element = findChokedElement(rig.airLine, total, manifold, ambient.pressurePa)
    return element ? `choked:${element.name}` : 'short-of-air'
  }
  return { nozzleGaugePa, freeAirM3S: (total + firstMassFlow) / ambient.dryAirDensity }
}

/**
 * What the rig draws over the pressure at one nozzle, with one bore in it.
 *
 *   ṁ = nozzle(p) + the other outlets at the manifold pressure this takes + air taken first
 *
 * Inputs   rig, prepared · which outlet · bore m · range Pa gauge
 * Result   points of rising pressure; end where a line chokes or a regulator holds before the range ends
 * Checked  tests/shared/airflow/drawCurves.test.ts
 */
export function traceDraw(
  rig: PreparedRig,
  outletIndex: number,
  boreM: number,
  lowestGaugePa: number,
  highestGaugePa: number,
): AirCurve {
  const trial = withPreparedBore(rig, outletIndex, boreM)
  const points: AirPoint[] = []
  for (let step = 0; step <= stepsOfDraw; step++) {
    const gauge = lowestGaugePa + ((highestGaugePa - lowestGaugePa) * step) / stepsOfDraw
    const drawn = drawAt(trial, outletIndex, gauge)
    if (typeof drawn === 'string') return { points, end: drawn }
    points.push(drawn)
  }
  return { points, end: null }
}

/** A range of nozzle pressures, Pa gauge, with the target, the operating points and some of the delivery in it. */
function rangeToShow({ points }: AirCurve, targetGaugePa: number, operatingGaugesPa: readonly number[]) {
  const lowest = Math.min(0.55 * targetGaugePa, ...operatingGaugesPa.map((gauge) => 0.85 * gauge))
  const highest = Math.max(1.2 * targetGaugePa, ...operatingGaugesPa.map((gauge) => 1.06 * gauge))
  const [first, last] = [points[0], points[points.length - 1]]
  if (!first || !last) return { lowestGaugePa: lowest, highestGaugePa: highest }
  const isUnder = last.nozzleGaugePa < 1.2 * lowest
  const fromDelivery = 0.9 * Math.max(first.nozzleGaugePa, 0.5 * last.nozzleGaugePa)
  return {
    lowestGaugePa: isUnder ? Math.min(lowest, fromDelivery) : lowest,
    // where the line chokes at lower pressures the delivery begins above them all
    highestGaugePa: Math.max(highest, Math.min(last.nozzleGaugePa, 1.3 * first.nozzleGaugePa)),
  }
}

/**
 * Delivery and draw over one nozzle's pressure, in a range that shows the target, the delivery and
 * every operating point.
 *
 * Inputs   rig, prepared · which outlet · bores m · target Pa gauge
 * Result   the delivery, and a draw with its operating point for each bore
 * Checked  tests/shared/airflow/drawCurves.test.ts
 */
export function traceDeliveryAndDraw(
  rig: PreparedRig,
  outletIndex: number,
  boresM: readonly number[],
  targetGaugePa: number,
): DeliveryAndDraw {
  const checks = boresM.map((boreM) =>
    checkPrepared(withPreparedBore(rig, outletIndex, boreM), targetGaugePa),
  )
  const operatingPoints = checks.map(
    ({ operatingPoint }): AirPoint | null =>
      operatingPoint && {
        nozzleGaugePa: operatingPoint.outlets[outletIndex]!.nozzlePressurePa - rig.ambient.pressurePa,
        freeAirM3S: operatingPoint.freeAirM3S,
      },
  )
  const gauges = operatingPoints.flatMap((point) => (point ? [point.nozzleGaugePa] : []))
  const delivery = traceDelivery(rig, outletIndex)
  const { lowestGaugePa, highestGaugePa } = rangeToShow(delivery, targetGaugePa, gauges)
  return {
    lowestGaugePa,
    highestGaugePa,
    delivery,
    draws: boresM.map((boreM, index) => ({
      boreM,
      verdict: checks[index]!.verdict,
      operatingPoint: operatingPoints[index]!,
      ...traceDraw(rig, outletIndex, boreM, lowestGaugePa, highestGaugePa),
    })),
  }
}

/**
 * Free air of a curve at a nozzle pressure, straight between its points.
 *
 * Inputs   curve, of rising pressure · Pa gauge        Result  m³/s, or null where the curve does not reach
 */
export function freeAirOnCurve({ points }: AirCurve, nozzleGaugePa: number): number | null {
  const index = points.findIndex((point) => point.nozzleGaugePa >= nozzleGaugePa)
  const after = points[index]
  if (!after) return null
  const before = points[index - 1]
  if (!before) return after.nozzleGaugePa === nozzleGaugePa ? after.freeAirM3S : null
  const part = (nozzleGaugePa - before.nozzleGaugePa) / (after.nozzleGaugePa - before.nozzleGaugePa)
  return before.freeAirM3S + (after.freeAirM3S - before.freeAirM3S) * part
}
