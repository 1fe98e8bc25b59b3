import type { Ambient } from './ambient.ts'
import type { AirDraw, Compressor } from './rig.ts'

/**
 * Free air by nameplate or by curve: linear between points, flat outside; m³/s at Pa absolute.
 * Checked  tests/shared/airflow/parts.test.ts
 */
export function freeAirAt(compressor: Compressor, pressurePa: number): number {
  const { freeAir } = compressor
  if (typeof freeAir === 'number') return freeAir
  let below = freeAir[0]!
  if (pressurePa <= below.pressurePa) return below.freeAirM3S
  for (const point of freeAir) {
    if (pressurePa <= point.pressurePa) {
      const part = (pressurePa - below.pressurePa) / (point.pressurePa - below.pressurePa)
      return part > 0 ? below.freeAirM3S + (point.freeAirM3S - below.freeAirM3S) * part : below.freeAirM3S
    }
    below = point
  }
  return below.freeAirM3S
}

/** A compressor at a site, as dry mass: straight between its corners, flat before the first, zero after the last. */
export interface Delivery {
  /** Pa absolute, rising; the last is unload */
  pressuresPa: number[]
  /** kg/s of dry air at each, never rising; the last is 0 */
  massFlows: number[]
}

/**
 * Delivery of a compressor as dry mass over the pressure at its outlet.
 *
 *   k · FAD(p) · ρd up to the set pressure, then a straight line from its value there to zero at unload        kg/s
 *
 * Source   free air delivery as in ISO 1217; the straight fall is the design's        Checked  tests/shared/airflow/parts.test.ts
 */
export function prepareDelivery(compressor: Compressor, ambient: Ambient): Delivery {
  const mass = (compressor.conditionFactor ?? 1) * ambient.dryAirDensity
  const { freeAir, setPressurePa, unloadPressurePa } = compressor
  const atSet = mass * freeAirAt(compressor, setPressurePa)
  if (typeof freeAir === 'number') {
    return { pressuresPa: [setPressurePa, unloadPressurePa], massFlows: [atSet, 0] }
  }
  const below = freeAir.filter((point) => point.pressurePa < setPressurePa)
  return {
    pressuresPa: [...below.map((point) => point.pressurePa), setPressurePa, unloadPressurePa],
    massFlows: [...below.map((point) => mass * point.freeAirM3S), atSet, 0],
  }
}

/** kg/s of dry air delivered at a pressure, Pa absolute. */
export function deliveryAt({ pressuresPa, massFlows }: Delivery, pressurePa: number): number {
  const last = pressuresPa.length - 1
  if (pressurePa <= pressuresPa[0]!) return massFlows[0]!
  for (let i = 1; i <= last; i++) {
    const right = pressuresPa[i]!
    if (pressurePa <= right) {
      const left = pressuresPa[i - 1]!
      const from = massFlows[i - 1]!
      return from + ((massFlows[i]! - from) * (pressurePa - left)) / (right - left)
    }
  }
  return 0
}

/** What the compressor would give at a pressure were it not throttled above set: the D of the air margin, kg/s. */
export function fullLoadDeliveryAt(delivery: Delivery, pressurePa: number): number {
  const setPa = delivery.pressuresPa[delivery.pressuresPa.length - 2]!
  return deliveryAt(delivery, Math.min(pressurePa, setPa))
}

/**
 * The highest pressure at which at least this much is delivered, Pa absolute; NaN when that is nowhere.
 * Checked  tests/shared/airflow/parts.test.ts
 */
export function pressureAtDelivery({ pressuresPa, massFlows }: Delivery, massFlow: number): number {
  if (massFlow > massFlows[0]!) return NaN
  for (let i = pressuresPa.length - 1; i > 0; i--) {
    const left = massFlows[i - 1]!
    if (massFlow <= left) {
      const right = massFlows[i]!
      const part = left === right ? 1 : (left - massFlow) / (left - right)
      return pressuresPa[i - 1]! + (pressuresPa[i]! - pressuresPa[i - 1]!) * part
    }
  }
  return pressuresPa[0]!
}

/** Hoods and tools together as dry mass, kg/s. */
export function airTakenFirstMass(draws: readonly AirDraw[], ambient: Ambient): number {
  let freeAir = 0
  for (const draw of draws) freeAir += draw.freeAirM3S
  return freeAir * ambient.dryAirDensity
}
