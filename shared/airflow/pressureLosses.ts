import { elementPressureDrop } from './line.ts'
import { gaugeAtMassFlow } from './nozzle.ts'
import type { OperatingPoint } from './operatingPoint.ts'
import type { LineFlow } from './line.ts'
import type { PreparedRig } from './preparedRig.ts'

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
 * Checked  tests/shared/airflow/parts.test.ts
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
