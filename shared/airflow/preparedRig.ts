import { resolveAmbient } from './ambient.ts'
import type { Ambient } from './ambient.ts'
import { airTakenFirstMass, deliveryAt, prepareDelivery } from './compressor.ts'
import type { Delivery } from './compressor.ts'
import { findChokedElement, gaugeBeforeLine, prepareElement } from './line.ts'
import type { LineFlow } from './line.ts'
import { gaugeAtMassFlow, massFlowAtGauge, prepareNozzle } from './nozzle.ts'
import type { NozzleFlow } from './nozzle.ts'
import type { LineElement, Rig, Site } from './rig.ts'
import { findRoot } from './rootFinding.ts'

/** A rig at a site with every constant taken out of the march; gauge pressures inside, for their digits. */
export interface PreparedRig {
  ambient: Ambient
  lineTemperatureK: number
  delivery: Delivery
  /** kg/s of dry air */
  firstMassFlow: number
  /** kg/s delivered with no pressure on it */
  openMassFlow: number
  airLine: LineFlow[]
  outlets: PreparedOutlet[]
}

export interface PreparedOutlet {
  line: LineFlow[]
  nozzle: NozzleFlow
  boreM: number
  /** Infinity without a regulator */
  regulatorGaugePa: number
}

export function prepareRig(rig: Rig, site: Site): PreparedRig {
  const ambient = resolveAmbient(site)
  const lineTemperatureK = ambient.temperatureK + (rig.compressor.lineTemperatureRiseK ?? 0)
  const delivery = prepareDelivery(rig.compressor, ambient)
  const prepareLine = (line: readonly LineElement[], place: string) =>
    line.map((element, index) => prepareElement(element, `${place}-${index + 1}`, lineTemperatureK))
  return {
    ambient,
    lineTemperatureK,
    delivery,
    firstMassFlow: airTakenFirstMass(rig.airTakenFirst, ambient),
    openMassFlow: deliveryAt(delivery, ambient.pressurePa),
    airLine: prepareLine(rig.airLine, 'air-line'),
    outlets: rig.outlets.map((outlet, index) => ({
      line: prepareLine(outlet.line, `outlet-${index + 1}-line`),
      nozzle: prepareNozzle(outlet.nozzle, lineTemperatureK, ambient.pressurePa),
      boreM: outlet.nozzle.boreM,
      regulatorGaugePa:
        outlet.regulatorPa === undefined ? Infinity : outlet.regulatorPa - ambient.pressurePa,
    })),
  }
}

/** Gauge pressure before an outlet's line when its nozzle passes this flow; NaN when its line is choked. */
export function entryGauge(outlet: PreparedOutlet, massFlow: number): number {
  const nozzleGauge = gaugeAtMassFlow(outlet.nozzle, massFlow)
  return gaugeBeforeLine(outlet.line, massFlow, nozzleGauge, outlet.nozzle.ambientPa)
}

/**
 * Flow of one outlet whose line is fed at a gauge pressure (its regulator applied): the march inverted.
 *
 * Result   kg/s; NaN when its line chokes before this pressure is reached
 */
export function outletMassFlow(outlet: PreparedOutlet, manifoldGaugePa: number, guess: number): number {
  const feedGauge = Math.min(manifoldGaugePa, outlet.regulatorGaugePa)
  if (feedGauge <= 0) return 0
  const most = massFlowAtGauge(outlet.nozzle, feedGauge)
  if (outlet.line.length === 0) return most
  const { ambientPa } = outlet.nozzle
  const feedPa = ambientPa + feedGauge
  let earlierFlow = 0
  let earlierPa = 0
  const root = findRoot({
    evaluate: (flow) => (entryGauge(outlet, flow) - feedGauge) / feedGauge,
    propose(flow, residual) {
      const pressure = feedPa + feedGauge * residual
      const next = flow + ((feedPa - pressure) * (flow - earlierFlow)) / (pressure - earlierPa)
      earlierFlow = flow
      earlierPa = pressure
      return next
    },
    low: 0,
    high: most,
    guess,
    widthTolerance: 1e-12,
    residualTolerance: 1e-11,
    zeroTolerance: 4e-15,
  })
  return root.isMet ? root.x : NaN
}

/** Which element chokes when an outlet is fed at this gauge pressure: the one that closes at its largest open flow. */
export function findOutletChoke(outlet: PreparedOutlet, manifoldGaugePa: number): LineFlow | null {
  const feedGauge = Math.min(manifoldGaugePa, outlet.regulatorGaugePa)
  let open = 0
  let closed = massFlowAtGauge(outlet.nozzle, Math.max(0, feedGauge))
  for (let step = 0; step < 60; step++) {
    const middle = (open + closed) / 2
    if (Number.isNaN(entryGauge(outlet, middle))) closed = middle
    else open = middle
  }
  return findChokedElement(
    outlet.line,
    closed,
    gaugeAtMassFlow(outlet.nozzle, closed),
    outlet.nozzle.ambientPa,
  )
}
