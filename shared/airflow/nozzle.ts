import { gasConstant, heatRatio, resolveAmbient } from './ambient.ts'
import type { Nozzle, Site } from './rig.ts'

/** In service with media: midway between the two government points in tests/reference/nozzle.test.ts. */
export const defaultDischargeCoefficient = 0.81
/** The same nozzle with the media shut off. */
export const cleanAirDischargeCoefficient = 0.97

/** Ambient over stagnation pressure below which the throat is sonic: (2/(γ+1))^(γ/(γ−1)) = 0.5283. */
export const criticalRatio = (2 / (heatRatio + 1)) ** (heatRatio / (heatRatio - 1))
/** Ψ at the critical ratio: √γ (2/(γ+1))^((γ+1)/(2(γ−1))) = 0.6847. */
export const criticalFlowFunction =
  Math.sqrt(heatRatio) * (2 / (heatRatio + 1)) ** ((heatRatio + 1) / (2 * (heatRatio - 1)))
const isentropicExponent = heatRatio / (heatRatio - 1)

/** A nozzle at a site with the constants of its flow taken out: all that the solver needs. */
export interface NozzleFlow {
  /** Cd (π/4) d² / √(R T0), so that ṁ = conductance · p0 · Ψ; kg/(s Pa) */
  conductance: number
  ambientPa: number
}

/** Cd (π/4) d² / √(R T0) for a nozzle passing air of stagnation temperature T0. */
export function prepareNozzle(nozzle: Nozzle, stagnationTemperatureK: number, ambientPa: number): NozzleFlow {
  const coefficient = nozzle.dischargeCoefficient ?? defaultDischargeCoefficient
  const area = (Math.PI / 4) * nozzle.boreM * nozzle.boreM
  return { conductance: (coefficient * area) / Math.sqrt(gasConstant * stagnationTemperatureK), ambientPa }
}

/**
 * Mass flow from the gauge pressure before a nozzle: perfect gas, isentropic to the throat.
 *
 *   ṁ = Cd A p0 / √(R T0) · Ψ        kg/s
 *   Ψ = √(2γ/(γ−1) (r^(2/γ) − r^((γ+1)/γ))),  r = max(p_amb / p0, critical ratio)
 *
 * With t = (p0/p_amb)^((γ−1)/γ) the subsonic branch is Cd A p_amb / √(R T0) · √(2γ/(γ−1) t (t − 1)), written so
 * because t − 1 keeps its digits at the smallest pressures.
 *
 * Inputs   nozzle, prepared · gauge pressure Pa, never negative
 * Valid    a converging nozzle at any pressure; a venturi above 13 psig at sea level (understated below)
 * Ignores  real-gas effects, water (it leaves before the nozzle)
 * Source   isentropic flow, e.g. ISO 9300 for the choked branch        Checked  tests/reference/orifice.test.ts
 */
export function massFlowAtGauge(flow: NozzleFlow, gaugePa: number): number {
  const stagnationPa = flow.ambientPa + gaugePa
  if (flow.ambientPa <= criticalRatio * stagnationPa) {
    return flow.conductance * stagnationPa * criticalFlowFunction
  }
  const excess = Math.expm1(Math.log1p(gaugePa / flow.ambientPa) / isentropicExponent)
  return flow.conductance * flow.ambientPa * Math.sqrt(2 * isentropicExponent * (1 + excess) * excess)
}

/**
 * The other way round: gauge pressure before a nozzle from its mass flow, exact.
 *
 * Inputs   nozzle, prepared · ṁ kg/s, never negative        Result  Pa gauge
 * Source   inverse of massFlowAtGauge        Checked  tests/shared/airflow/parts.test.ts
 */
export function gaugeAtMassFlow(flow: NozzleFlow, massFlow: number): number {
  const chokedPa = massFlow / (flow.conductance * criticalFlowFunction)
  if (flow.ambientPa <= criticalRatio * chokedPa) return chokedPa - flow.ambientPa
  const q = massFlow / (flow.conductance * flow.ambientPa)
  const quarter = (q * q) / (2 * isentropicExponent)
  const excess = (2 * quarter) / (1 + Math.sqrt(1 + 4 * quarter))
  return flow.ambientPa * Math.expm1(isentropicExponent * Math.log1p(excess))
}

/** Is the throat sonic at this gauge pressure? */
export function isThroatSonic(ambientPa: number, gaugePa: number): boolean {
  return ambientPa <= criticalRatio * (ambientPa + gaugePa)
}

/**
 * Mass flow of a nozzle at a site; see massFlowAtGauge for the equation.
 *
 * Inputs   nozzle (bore m, Cd) · stagnation pressure Pa absolute · site (its air temperature is taken as T0)
 * Result   kg/s; 0 at or below the site's pressure
 * Checked  tests/reference/orifice.test.ts, tests/reference/nozzle.test.ts
 */
export function nozzleMassFlow(nozzle: Nozzle, stagnationPressurePa: number, site: Site): number {
  const ambientPa = resolveAmbient(site).pressurePa
  const flow = prepareNozzle(nozzle, site.airTemperatureK, ambientPa)
  return massFlowAtGauge(flow, Math.max(0, stagnationPressurePa - ambientPa))
}
