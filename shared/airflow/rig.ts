/**
 * What the air model is asked about. SI throughout: pressures in Pa absolute, lengths in m, temperatures in K,
 * free air in m³/s at the site's own pressure, temperature and humidity. Units of the trade are converted at the edges.
 */

/** Where the rig stands. The barometer is the station's own, absolute; without one the altitude gives the pressure. */
export interface Site {
  altitudeM: number
  airTemperatureK: number
  /** 0 to 1; absent 0 */
  relativeHumidity?: number
  barometerPa?: number
}

/** A hose, a fitting or a pot: friction over its length and a sum of losses in its own bore. */
export interface LineElement {
  name?: string
  insideDiameterM: number
  /** absent 0 */
  lengthM?: number
  /** absent 0.01 mm */
  roughnessM?: number
  /** ΣK, counting ½ρV² in this element's own bore; absent 0 */
  lossK?: number
  /** multiplies the friction of the length only; absent 1 */
  mediaFactor?: number
}

export interface Nozzle {
  boreM: number
  /** absent 0.81, in service with media */
  dischargeCoefficient?: number
}

export interface Outlet {
  line: readonly LineElement[]
  /** caps the pressure entering this outlet's line, Pa absolute */
  regulatorPa?: number
  nozzle: Nozzle
}

export interface CurvePoint {
  pressurePa: number
  freeAirM3S: number
}

export type Engine = 'natural' | 'turbo'

export interface Compressor {
  /** one number by nameplate, or points of strictly rising pressure and never rising free air */
  freeAir: number | readonly CurvePoint[]
  setPressurePa: number
  unloadPressurePa: number
  /** what a measured machine delivers of its nameplate; absent 1 */
  conditionFactor?: number
  /** line and nozzle air above the site's air temperature; absent 0 */
  lineTemperatureRiseK?: number
  engine?: Engine
}

export interface AirDraw {
  name: string
  freeAirM3S: number
}

export interface Rig {
  compressor: Compressor
  airLine: readonly LineElement[]
  outlets: readonly Outlet[]
  airTakenFirst: readonly AirDraw[]
}
