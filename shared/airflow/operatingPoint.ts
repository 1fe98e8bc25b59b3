import { findBalance } from './balance.ts'
import { gaugeAtMassFlow, isThroatSonic } from './nozzle.ts'
import { prepareRig } from './preparedRig.ts'
import type { PreparedRig } from './preparedRig.ts'
import type { Rig, Site } from './rig.ts'

/** Why there is no balance; sentences are made from these in every language. */
export type Reason =
  | 'short-of-air'
  | 'above-unload'
  | 'air-taken-first'
  | 'no-nozzle'
  | 'bore-range'
  | `choked:${string}`
  | `regulator:${number}`

export interface OutletState {
  /** Pa absolute */
  nozzlePressurePa: number
  /** kg/s */
  massFlow: number
  /** is the throat sonic */
  isChoked: boolean
}

export interface OperatingPoint {
  /** Pa absolute */
  compressorPressurePa: number
  /** Pa absolute, after the air line */
  manifoldPressurePa: number
  /** kg/s, air taken first included */
  massFlow: number
  /** m³/s at the site, air taken first included */
  freeAirM3S: number
  outlets: OutletState[]
  /** marches from the nozzles back to the compressor that it took */
  marches: number
}

export interface OperatingPointResult {
  operatingPoint: OperatingPoint | null
  reason: Reason | null
}

/** The operating point of a rig already prepared; see solveOperatingPoint. */
export function solvePrepared(rig: PreparedRig): OperatingPointResult {
  if (rig.firstMassFlow >= rig.openMassFlow) return { operatingPoint: null, reason: 'air-taken-first' }
  if (rig.outlets.length === 0) return { operatingPoint: null, reason: 'no-nozzle' }
  const found = findBalance(rig)
  if (found.choked) return { operatingPoint: null, reason: `choked:${found.choked.name}` }
  const ambientPa = rig.ambient.pressurePa
  let massFlow = rig.firstMassFlow
  const outlets = rig.outlets.map((outlet, i) => {
    const flow = found.massFlows[i]!
    massFlow += flow
    const nozzleGauge = gaugeAtMassFlow(outlet.nozzle, flow)
    return {
      nozzlePressurePa: ambientPa + nozzleGauge,
      massFlow: flow,
      isChoked: isThroatSonic(ambientPa, nozzleGauge),
    }
  })
  return {
    operatingPoint: {
      compressorPressurePa: ambientPa + found.compressorGaugePa,
      manifoldPressurePa: ambientPa + found.manifoldGaugePa,
      massFlow,
      freeAirM3S: massFlow / rig.ambient.dryAirDensity,
      outlets,
      marches: found.marches,
    },
    reason: null,
  }
}

/**
 * Where the draw of the nozzles and of the air taken first equals what the compressor delivers.
 *
 * The march goes from the nozzle back: for one outlet a guessed flow gives the nozzle pressure and every pressure
 * before it, so the balance is one search in one variable; for several outlets the manifold pressure is guessed and
 * each outlet is one more. A flat nameplate working below its set pressure is met by the first guess.
 *
 * Inputs   rig and site (SI, pressures absolute)
 * Result   the point, balanced to 1e-8 of full-load delivery in a bracket of 1e-9; or null with the reason: air taken
 *          first is all there is, there is no nozzle, or the balance lies beyond a choked element
 * Errors   none for input in the declared ranges        Checked  tests/shared/airflow/laws.test.ts
 */
export function solveOperatingPoint(rig: Rig, site: Site): OperatingPointResult {
  return solvePrepared(prepareRig(rig, site))
}
