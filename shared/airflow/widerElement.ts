import { solvePrepared } from './operatingPoint.ts'
import type { OperatingPoint } from './operatingPoint.ts'
import { prepareRig } from './preparedRig.ts'
import type { LineElement, Rig, Site } from './rig.ts'

export interface WiderElement {
  place: 'air-line' | 'outlet-line'
  index: number
  insideDiameterM: number
  /** what the lowest nozzle gains, Pa */
  gainPa: number
}

function lowestNozzlePressure(rig: Rig, site: Site): number {
  const { operatingPoint } = solvePrepared(prepareRig(rig, site))
  return operatingPoint ? Math.min(...operatingPoint.outlets.map((outlet) => outlet.nozzlePressurePa)) : NaN
}

/**
 * Which single hose on the way to one nozzle, taken one usual size wider, gives the rig's lowest nozzle the most.
 *
 * Only the air line and this outlet's own line are tried, one element at a time, so that what is said of a hose is
 * true of that hose alone even where two outlets have unlike hoses.
 *
 * Inputs   rig, site · which outlet · the usual inside diameters, rising, m · may this element be exchanged?
 * Result   the best exchange with its gain Pa, or null when none gains anything
 * Checked  tests/shared/airflow/widerElement.test.ts
 */
export function findBestWiderElement(
  rig: Rig,
  site: Site,
  outletIndex: number,
  diametersM: readonly number[],
  canChange: (element: LineElement) => boolean,
): WiderElement | null {
  const before = lowestNozzlePressure(rig, site)
  let best: WiderElement | null = null
  const consider = (
    line: readonly LineElement[],
    place: WiderElement['place'],
    exchange: (line: readonly LineElement[]) => Rig,
  ) =>
    line.forEach((element, index) => {
      if (!canChange(element)) return
      const insideDiameterM = diametersM.find((diameter) => diameter > element.insideDiameterM * 1.001)
      if (insideDiameterM === undefined) return
      const wider = line.map((other, i) => (i === index ? { ...element, insideDiameterM } : other))
      const gainPa = lowestNozzlePressure(exchange(wider), site) - before
      if (gainPa > (best?.gainPa ?? 0)) best = { place, index, insideDiameterM, gainPa }
    })
  consider(rig.airLine, 'air-line', (airLine) => ({ ...rig, airLine }))
  consider(rig.outlets[outletIndex]!.line, 'outlet-line', (line) => ({
    ...rig,
    outlets: rig.outlets.map((outlet, i) => (i === outletIndex ? { ...outlet, line } : outlet)),
  }))
  return best
}

/**
 * Does a flat nameplate work under its set pressure? All its air then passes the nozzles whatever the hoses are, and a
 * wider hose only lowers the pressure at the compressor.
 *
 * Inputs   rig · its operating point (Pa absolute)
 * Checked  tests/shared/airflow/widerElement.test.ts
 */
export function isOutOfAir(rig: Rig, point: OperatingPoint): boolean {
  const { freeAir, setPressurePa } = rig.compressor
  return typeof freeAir === 'number' && point.compressorPressurePa < setPressurePa * (1 - 1e-9)
}
