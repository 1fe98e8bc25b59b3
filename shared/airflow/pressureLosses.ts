import { elementPressureDrop } from './line.ts'
import { gaugeAtMassFlow } from './nozzle.ts'
import { solvePrepared } from './operatingPoint.ts'
import type { OperatingPoint } from './operatingPoint.ts'
import type { LineFlow } from './line.ts'
import { prepareRig } from './preparedRig.ts'
import type { PreparedRig } from './preparedRig.ts'
import type { LineElement, Rig, Site } from './rig.ts'

export interface PressureLoss {
  /** the air line, or an outlet's own line */
  place: 'air-line' | 'regulator' | 'outlet-line'
  /** index in its line */
  index: number
  name: string
  /** Pa, never negative */
  dropPa: number
}

function lossesOfLine(
  line: readonly LineFlow[],
  place: PressureLoss['place'],
  massFlow: number,
  gaugePa: number,
  ambientPa: number,
): PressureLoss[] {
  const losses: PressureLoss[] = []
  let gauge = gaugePa
  for (let index = line.length - 1; index >= 0; index--) {
    const dropPa = elementPressureDrop(line[index]!, massFlow, ambientPa + gauge)
    losses.unshift({ place, index, name: line[index]!.name, dropPa })
    gauge += dropPa
  }
  return losses
}

/**
 * Where the pressure goes between compressor and one nozzle at the operating point, in the order the air meets it.
 *
 * The drops and the nozzle's gauge pressure add up to the compressor's; what a held regulator takes is one of them.
 *
 * Inputs   rig, prepared · its operating point · which outlet
 * Checked  tests/shared/airflow/pressureLosses.test.ts
 */
export function listPressureLosses(
  rig: PreparedRig,
  point: OperatingPoint,
  outletIndex: number,
): PressureLoss[] {
  const outlet = rig.outlets[outletIndex]!
  const ambientPa = rig.ambient.pressurePa
  const outletFlow = point.outlets[outletIndex]!.massFlow
  const airLineFlow = point.massFlow - rig.firstMassFlow
  const manifoldGauge = point.manifoldPressurePa - ambientPa
  const air = lossesOfLine(rig.airLine, 'air-line', airLineFlow, manifoldGauge, ambientPa)
  const regulatorDrop = manifoldGauge - Math.min(manifoldGauge, outlet.regulatorGaugePa)
  const nozzleGauge = gaugeAtMassFlow(outlet.nozzle, outletFlow)
  const own = lossesOfLine(outlet.line, 'outlet-line', outletFlow, nozzleGauge, ambientPa)
  const held: PressureLoss[] =
    regulatorDrop > 0 ? [{ place: 'regulator', index: 0, name: 'regulator', dropPa: regulatorDrop }] : []
  return [...air, ...held, ...own]
}

export interface WiderElement {
  place: 'air-line' | 'outlet-line'
  index: number
  insideDiameterM: number
  /** what the lowest nozzle gains, Pa */
  gainPa: number
}

/**
 * Which single hose, taken one usual size wider, gives the lowest nozzle the most. In the outlets' lines it is the hose
 * at one place of the first outlet's, taken as wide at the same place of the others.
 *
 * Inputs   rig, site · the usual inside diameters, rising, m · may this element be exchanged?
 * Result   the best exchange, or null when none gains anything (below the set pressure of a flat nameplate none can)
 */
export function findBestWiderElement(
  rig: Rig,
  site: Site,
  diametersM: readonly number[],
  canChange: (element: LineElement) => boolean,
): WiderElement | null {
  const lowest = (trial: Rig) => {
    const { operatingPoint } = solvePrepared(prepareRig(trial, site))
    return operatingPoint ? Math.min(...operatingPoint.outlets.map((o) => o.nozzlePressurePa)) : NaN
  }
  const before = lowest(rig)
  let best: WiderElement | null = null
  const consider = (
    element: LineElement,
    place: WiderElement['place'],
    index: number,
    exchange: (wider: LineElement) => Rig,
  ) => {
    if (!canChange(element)) return
    const insideDiameterM = diametersM.find((d) => d > element.insideDiameterM * 1.001)
    if (insideDiameterM === undefined) return
    const gainPa = lowest(exchange({ ...element, insideDiameterM })) - before
    if (gainPa > (best?.gainPa ?? 0)) best = { place, index, insideDiameterM, gainPa }
  }
  const replaceAt = (line: readonly LineElement[], index: number, wider: LineElement) =>
    line.map((element, i) => (i === index ? wider : element))
  rig.airLine.forEach((element, index) =>
    consider(element, 'air-line', index, (wider) => ({
      ...rig,
      airLine: replaceAt(rig.airLine, index, wider),
    })),
  )
  rig.outlets[0]?.line.forEach((element, index) =>
    consider(element, 'outlet-line', index, ({ insideDiameterM }) => ({
      ...rig,
      outlets: rig.outlets.map((outlet) => {
        const own = outlet.line[index]
        if (!own || own.insideDiameterM >= insideDiameterM) return outlet
        return { ...outlet, line: replaceAt(outlet.line, index, { ...own, insideDiameterM }) }
      }),
    })),
  )
  return best
}
