import { describe, expect, it } from 'vitest'
import { gasConstant, viscosity } from '#shared/airflow/ambient.ts'
import {
  elementOutletPressure,
  elementPressureDrop,
  frictionFactor,
  prepareElement,
  prepareLineAir,
} from '#shared/airflow/line.ts'

/** Colebrook's equation by halving 1/√f, apart from the code's own iteration. */
function colebrookByHalving(reynolds: number, relativeRoughness: number): number {
  let low = 0.5
  let high = 40
  for (let step = 0; step < 200; step++) {
    const x = (low + high) / 2
    const right = -2 * Math.log10(relativeRoughness / 3.7 + (2.51 * x) / reynolds)
    if (x < right) low = x
    else high = x
  }
  return 1 / ((low + high) / 2) ** 2
}

describe('friction', () => {
  it('is the root of the Colebrook equation, evaluated here by halving', () => {
    let worst = 0
    for (const reynolds of [4000, 1e4, 3e4, 1e5, 1e6, 1e7, 1e8]) {
      for (const roughness of [0, 1e-6, 1e-5, 1e-4, 1e-3, 0.01, 0.05, 0.33]) {
        const residual = frictionFactor(reynolds, roughness) / colebrookByHalving(reynolds, roughness) - 1
        worst = Math.max(worst, Math.abs(residual))
      }
    }
    console.info(`Colebrook against halving: largest residual ${worst.toExponential(1)}`)
    expect(worst).toBeLessThan(1e-12)
  })

  // White, Fluid Mechanics, chapter 6: smooth pipe by Prandtl's law, to the digits of its table; from memory
  it.each([
    [4000, 0.0399],
    [1e4, 0.0309],
    [1e5, 0.018],
    [1e6, 0.0116],
    [1e7, 0.0081],
    [1e8, 0.0059],
  ])('of a smooth pipe at Re %d is %d', (reynolds, printed) => {
    expect(Math.abs(frictionFactor(reynolds, 0) - printed)).toBeLessThanOrEqual(0.00005 + 1e-12)
  })

  // the first is White, Fluid Mechanics, example 6.6, the others ordinary readings of the chart; all from memory
  it.each([
    [270_000, 0.0008, 0.02],
    [1e5, 0.001, 0.0222],
    [1e5, 0.01, 0.0385],
  ])('at Re %d and roughness %d is read from the Moody chart as %d', (reynolds, roughness, read) => {
    expect(Math.abs(frictionFactor(reynolds, roughness) / read - 1)).toBeLessThan(0.015)
  })

  // Kármán's law of the fully rough pipe with Nikuradse's constant: 1/√f = 2 log10(3.7 D/ε)
  it.each([1e-4, 1e-3, 0.01, 0.05])(
    'of a fully rough pipe of ε/D %d is the limit of Kármán and Nikuradse',
    (e) => {
      expect(frictionFactor(1e12, e) * (2 * Math.log10(3.7 / e)) ** 2).toBeCloseTo(1, 6)
    },
  )

  it('is 64/Re when laminar (Hagen and Poiseuille), and has no step on the way to turbulence', () => {
    expect(frictionFactor(1000, 0.001)).toBe(0.064)
    for (const edge of [2300, 4000]) {
      expect(frictionFactor(edge * (1 + 1e-9), 0.001)).toBeCloseTo(
        frictionFactor(edge * (1 - 1e-9), 0.001),
        8,
      )
    }
    const middle = (frictionFactor(2300, 0.001) + frictionFactor(4000, 0.001)) / 2
    expect(frictionFactor(3150, 0.001)).toBeCloseTo(middle, 12)
  })
})

/**
 * Pressure after a length of pipe by Runge and Kutta from the differential equation of isothermal flow of a perfect gas,
 *
 *   dp/dx = −(f/D) (G² R T / 2p) / (1 − G² R T / p²)
 *
 * which says momentum, continuity and state, and not yet the formula that the code solves.
 */
function integrate(
  inletPa: number,
  massFlow: number,
  bore: number,
  length: number,
  roughness: number,
  kelvin: number,
) {
  const g = massFlow / ((Math.PI / 4) * bore * bore)
  const friction = colebrookByHalving((4 * massFlow) / (Math.PI * bore * viscosity(kelvin)), roughness / bore)
  const fluxRt = g * g * gasConstant * kelvin
  const slope = (p: number) => -((friction / bore) * fluxRt) / (2 * p) / (1 - fluxRt / (p * p))
  const steps = 20_000
  const h = length / steps
  let p = inletPa
  for (let i = 0; i < steps; i++) {
    const a = slope(p)
    const b = slope(p + (h / 2) * a)
    const c = slope(p + (h / 2) * b)
    p += (h / 6) * (a + 2 * b + 2 * c + slope(p + h * c))
  }
  return p
}

describe('a hose', () => {
  // a source of its own: the differential equation, integrated here
  it.each([
    { name: '185 cfm in 50 ft of 1 1/4 in', massFlow: 0.105, bore: 0.03175, length: 15.24, inletPa: 8e5 },
    { name: '185 cfm in 50 ft of 3/4 in', massFlow: 0.105, bore: 0.01905, length: 15.24, inletPa: 8e5 },
    { name: '375 cfm in 100 m of 2 in', massFlow: 0.21, bore: 0.0508, length: 100, inletPa: 8e5 },
    { name: 'near its choke', massFlow: 0.105, bore: 0.01905, length: 29.5, inletPa: 8e5 },
  ])('$name: the formula is the integral of isothermal pipe flow', ({ massFlow, bore, length, inletPa }) => {
    const kelvin = 303.15
    const roughnessM = 2e-5
    const outletPa = integrate(inletPa, massFlow, bore, length, roughnessM, kelvin)
    expect(outletPa).toBeGreaterThan(0)
    const element = prepareElement(
      { insideDiameterM: bore, lengthM: length, roughnessM },
      prepareLineAir(kelvin),
      'hose',
      0,
    )
    const drop = elementPressureDrop(element, massFlow, outletPa)
    expect(Math.abs((outletPa + drop) / inletPa - 1)).toBeLessThan(1e-6)
    expect(Math.abs(elementOutletPressure(element, massFlow, inletPa) / outletPa - 1)).toBeLessThan(1e-5)
  })

  // Darcy and Weisbach for an incompressible fluid is the limit of a small drop: Δp = (f L/D + K) ½ρV²
  it('with a small drop is the incompressible law', () => {
    const kelvin = 293.15
    const given = { insideDiameterM: 0.05, lengthM: 3, lossK: 2, mediaFactor: 1.3, roughnessM: 1e-5 }
    const massFlow = 0.02
    const outletPa = 8e5
    const area = (Math.PI / 4) * 0.05 ** 2
    const head = ((massFlow / area) ** 2 * gasConstant * kelvin) / outletPa / 2
    const reynolds = (4 * massFlow) / (Math.PI * 0.05 * viscosity(kelvin))
    const byHand = ((1.3 * colebrookByHalving(reynolds, 1e-5 / 0.05) * 3) / 0.05 + 2) * head
    const drop = elementPressureDrop(
      prepareElement(given, prepareLineAir(kelvin), 'hose', 0),
      massFlow,
      outletPa,
    )
    expect(Math.abs(drop / byHand - 1)).toBeLessThan(1e-3)
  })

  it('is choked where G² R T0 reaches p2²', () => {
    const element = prepareElement({ insideDiameterM: 0.02, lengthM: 1 }, prepareLineAir(300), 'hose', 0)
    const limit = (3e5 * (Math.PI / 4) * 0.02 ** 2) / Math.sqrt(gasConstant * 300)
    expect(elementPressureDrop(element, limit * 1.000001, 3e5)).toBeNaN()
    expect(elementPressureDrop(element, limit * 0.999999, 3e5)).toBeGreaterThan(0)
  })
})
