import { resolveAmbient } from './ambient.ts'
import type { Ambient } from './ambient.ts'
import { airTakenFirstMass, deliveryAt, prepareDelivery } from './compressor.ts'
import type { Delivery } from './compressor.ts'
import { marchBack, prepareElement, prepareLineAir, restartMarch, startMarch } from './line.ts'
import type { LineAir, LineFlow, March } from './line.ts'
import { criticalFlowFunction, gaugeAtMassFlow, massFlowAtGauge, prepareNozzle } from './nozzle.ts'
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

function prepareLine(line: readonly LineElement[], air: LineAir, place: string): LineFlow[] {
  return line.map((element, index) => prepareElement(element, air, place, index))
}

export function prepareRig(rig: Rig, site: Site): PreparedRig {
  const ambient = resolveAmbient(site)
  const lineTemperatureK = ambient.temperatureK + (rig.compressor.lineTemperatureRiseK ?? 0)
  const delivery = prepareDelivery(rig.compressor, ambient)
  const air = prepareLineAir(lineTemperatureK)
  return {
    ambient,
    lineTemperatureK,
    delivery,
    firstMassFlow: airTakenFirstMass(rig.airTakenFirst, ambient),
    openMassFlow: deliveryAt(delivery, ambient.pressurePa),
    airLine: prepareLine(rig.airLine, air, 'air-line'),
    outlets: rig.outlets.map((outlet, index) => ({
      line: prepareLine(outlet.line, air, `outlet-${index + 1}-line`),
      nozzle: prepareNozzle(outlet.nozzle, lineTemperatureK, ambient.pressurePa),
      boreM: outlet.nozzle.boreM,
      regulatorGaugePa: outlet.regulatorPa === undefined ? Infinity : outlet.regulatorPa - ambient.pressurePa,
    })),
  }
}

/** friction factor of a hose that works hard */
const ordinaryFriction = 0.018

/** What a line adds to (p/ṁ)², its friction ordinary and its logarithm left out. */
function roughSquare(line: readonly LineFlow[]): number {
  let square = 0
  for (let i = 0; i < line.length; i++) {
    const { chokePerFlow, lengthRatio, lossK } = line[i]!
    square += chokePerFlow * chokePerFlow * (ordinaryFriction * lengthRatio + lossK)
  }
  return square
}

/**
 * Compressor pressure over flow with the only nozzle sonic, Pa s/kg: every pressure then stands nearly in proportion to
 * the flow.
 */
export function roughPressurePerFlow({ outlets, airLine }: PreparedRig): number {
  const { nozzle, line } = outlets[0]!
  const nozzlePerFlow = 1 / (nozzle.conductance * criticalFlowFunction)
  return Math.sqrt(nozzlePerFlow * nozzlePerFlow + roughSquare(line) + roughSquare(airLine))
}

/** The march from an outlet's nozzle, passing this flow, back to the manifold; see marchBack. */
export function marchOutlet(outlet: PreparedOutlet, massFlow: number, march: March): void {
  restartMarch(march, gaugeAtMassFlow(outlet.nozzle, massFlow))
  marchBack(outlet.line, massFlow, outlet.nozzle.ambientPa, march)
}

/**
 * Flow of one outlet whose line is fed at a gauge pressure (its regulator applied): the march inverted.
 *
 * Result   kg/s; where an element is choked it is what the choke passes, as a march at it tells
 */
export function outletMassFlow(outlet: PreparedOutlet, manifoldGaugePa: number, guess: number): number {
  const feedGauge = Math.min(manifoldGaugePa, outlet.regulatorGaugePa)
  if (feedGauge <= 0) return 0
  const most = massFlowAtGauge(outlet.nozzle, feedGauge)
  if (outlet.line.length === 0) return most
  const feedPa = outlet.nozzle.ambientPa + feedGauge
  const march = startMarch()
  let earlierFlow = 0
  let earlierPa = 0
  return findRoot({
    evaluate(flow) {
      marchOutlet(outlet, flow, march)
      return (march.gaugePa - feedGauge) / feedGauge
    },
    propose(flow, residual) {
      const pressure = feedPa + feedGauge * residual
      const next = flow + ((feedPa - pressure) * (flow - earlierFlow)) / (pressure - earlierPa)
      earlierFlow = flow
      earlierPa = pressure
      return Math.min(next, most)
    },
    low: 0,
    high: most,
    guess: guess > 0 ? Math.min(guess, most) : most,
    widthTolerance: 1e-12,
    residualTolerance: 1e-11,
    zeroTolerance: 4e-15,
  }).x
}
