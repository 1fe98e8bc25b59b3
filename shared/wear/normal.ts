const squareRootOfTwoPi = Math.sqrt(2 * Math.PI)

/**
 * The standard normal distribution function.
 *
 *   Φ(z) = ∫ from −∞ to z of exp(−t²/2)/√(2π) dt        –
 *
 * Inputs   z –
 * Valid    any z; 1e-14 absolute, zero below about −38
 * Source   the rational form of Hart and others, Computer Approximations (1968), no. 5666, from memory
 * Checked  tests/shared/wear/normal.test.ts
 */
export function normalCdf(z: number): number {
  const x = Math.abs(z)
  if (x > 38) return z > 0 ? 1 : 0
  const tail = Math.exp((-x * x) / 2) * tailRatio(x)
  return z > 0 ? 1 - tail : tail
}

/** (1 − Φ(x)) / exp(−x²/2) for x ≥ 0. */
function tailRatio(x: number): number {
  if (x > 7) return 1 / (squareRootOfTwoPi * (x + 1 / (x + 2 / (x + 3 / (x + 4 / (x + 0.65))))))
  const above =
    (((((0.0352624965998911 * x + 0.700383064443688) * x + 6.37396220353165) * x + 33.912866078383) * x +
      112.079291497871) *
      x +
      221.213596169931) *
      x +
    220.206867912376
  const below =
    ((((((0.0883883476483184 * x + 1.75566716318264) * x + 16.064177579207) * x + 86.7807322029461) * x +
      296.564248779674) *
      x +
      637.333633378831) *
      x +
      793.826512519948) *
      x +
    440.413735824752
  return above / below
}

/** ln Φ(z), finite for every finite z: far down it is −z²/2 and the logarithm of the tail's ratio. */
export function logNormalCdf(z: number): number {
  return z > -5 ? Math.log(normalCdf(z)) : (-z * z) / 2 + Math.log(tailRatio(-z))
}

/** ln of the normal density of a value `distance` from its middle. */
export function logNormalDensity(distance: number, deviation: number): number {
  const z = distance / deviation
  return (-z * z) / 2 - Math.log(deviation * squareRootOfTwoPi)
}

export interface NormalNodes {
  z: readonly number[]
  /** sum to 1 */
  weights: readonly number[]
}

/**
 * Nodes to integrate over a standard normal by the trapezoid rule, whose error for a function that is smooth over
 * one z falls as exp(−π²/step²).
 */
export function normalNodes(step: number, reach: number): NormalNodes {
  const count = Math.round(reach / step)
  const z = Array.from({ length: 2 * count + 1 }, (_, i) => (i - count) * step)
  const densities = z.map((value) => Math.exp((-value * value) / 2))
  const total = densities.reduce((sum, density) => sum + density, 0)
  return { z, weights: densities.map((density) => density / total) }
}
