import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { resolveAmbient } from '#shared/airflow/ambient.ts'
import {
  deliveryAt,
  freeAirAt,
  fullLoadDeliveryAt,
  prepareDelivery,
  pressureAtDelivery,
} from '#shared/airflow/compressor.ts'
import { listPressureLosses, nozzleMassFlow, solveOperatingPoint } from '#shared/airflow/index.ts'
import { criticalRatio, gaugeAtMassFlow, massFlowAtGauge, prepareNozzle } from '#shared/airflow/nozzle.ts'
import { prepareRig } from '#shared/airflow/preparedRig.ts'
import { findRoot } from '#shared/airflow/rootFinding.ts'
import { questionOfCheck } from '#shared/check/rigOfCheck.ts'
import { anyChecks, seed } from './randomChecks.ts'

const even = (min: number, max: number) =>
  fc.integer({ min: 0, max: 1e9 }).map((count) => min + ((max - min) * count) / 1e9)

describe('a nozzle', () => {
  const ambientPa = 101325
  const flow = prepareNozzle({ boreM: 0.008 }, 293.15, ambientPa)

  it('gives its pressure back from its flow, from a pascal to 35 bar', () => {
    fc.assert(
      fc.property(even(0, Math.log(3.5e6)), (logGauge) => {
        const gauge = Math.exp(logGauge)
        expect(Math.abs(gaugeAtMassFlow(flow, massFlowAtGauge(flow, gauge)) / gauge - 1)).toBeLessThan(1e-12)
      }),
      { seed, numRuns: 2_000 },
    )
  })

  it('passes more the higher the pressure, without a step where the throat turns sonic', () => {
    const critical = ambientPa / criticalRatio - ambientPa
    const [below, above] = [critical * (1 - 1e-9), critical * (1 + 1e-9)]
    expect(massFlowAtGauge(flow, above) / massFlowAtGauge(flow, below) - 1).toBeLessThan(1e-8)
    expect(massFlowAtGauge(flow, above)).toBeGreaterThan(massFlowAtGauge(flow, below))
    let earlier = 0
    for (let gauge = 10; gauge < 3.5e6; gauge *= 1.1) {
      expect(massFlowAtGauge(flow, gauge)).toBeGreaterThan(earlier)
      earlier = massFlowAtGauge(flow, gauge)
    }
  })

  it('passes nothing at or below the pressure of the site', () => {
    const site = { altitudeM: 0, airTemperatureK: 293.15 }
    expect(nozzleMassFlow({ boreM: 0.008 }, ambientPa, site)).toBe(0)
    expect(nozzleMassFlow({ boreM: 0.008 }, 5e4, site)).toBe(0)
  })
})

describe('a compressor', () => {
  const ambient = resolveAmbient({ altitudeM: 0, airTemperatureK: 293.15 })
  const curve = [
    { pressurePa: 3e5, freeAirM3S: 0.2 },
    { pressurePa: 5e5, freeAirM3S: 0.16 },
    { pressurePa: 9e5, freeAirM3S: 0.12 },
  ]

  it('is linear between the points of its curve and flat outside', () => {
    const compressor = { freeAir: curve, setPressurePa: 8e5, unloadPressurePa: 1e6 }
    const at = (pressurePa: number) => freeAirAt(compressor, pressurePa)
    expect([at(1e5), at(3e5), at(4e5), at(5e5), at(9e5), at(2e6)]).toEqual([0.2, 0.2, 0.18, 0.16, 0.12, 0.12])
    expect(at(7e5)).toBeCloseTo(0.14, 12)
  })

  it('delivers k FAD ρd to set, and then falls in a straight line to nothing at unload', () => {
    const compressor = { freeAir: curve, setPressurePa: 7e5, unloadPressurePa: 9e5, conditionFactor: 0.9 }
    const delivery = prepareDelivery(compressor, ambient)
    const volume = (pressurePa: number) => deliveryAt(delivery, pressurePa) / (0.9 * ambient.dryAirDensity)
    expect(volume(4e5)).toBeCloseTo(0.18, 12)
    expect(volume(7e5)).toBeCloseTo(0.14, 12)
    expect(volume(8e5)).toBeCloseTo(0.07, 12)
    expect(volume(9e5)).toBe(0)
    expect(volume(2e6)).toBe(0)
    expect(fullLoadDeliveryAt(delivery, 8.5e5)).toBeCloseTo(0.9 * ambient.dryAirDensity * 0.14, 12)
  })

  it('is found again from what it delivers, at the highest pressure that delivers it', () => {
    const delivery = prepareDelivery({ freeAir: 0.1, setPressurePa: 7e5, unloadPressurePa: 9e5 }, ambient)
    const full = 0.1 * ambient.dryAirDensity
    expect(pressureAtDelivery(delivery, full)).toBe(7e5)
    expect(pressureAtDelivery(delivery, full / 2)).toBeCloseTo(8e5, 4)
    expect(pressureAtDelivery(delivery, full * 1.01)).toBeNaN()
  })

  it('whose curve begins above set is flat below', () => {
    const late = { freeAir: curve.slice(1), setPressurePa: 4e5, unloadPressurePa: 6e5 }
    const delivery = prepareDelivery(late, ambient)
    expect(deliveryAt(delivery, 2e5)).toBe(0.16 * ambient.dryAirDensity)
    expect(deliveryAt(delivery, 5e5)).toBeCloseTo(0.08 * ambient.dryAirDensity, 12)
  })
})

describe('where the pressure goes', () => {
  it('the losses and the nozzle add up to the compressor, for every outlet of random rigs', () => {
    let spoken = 0
    fc.assert(
      fc.property(anyChecks, (body) => {
        const { rig, site } = questionOfCheck(body)
        const { operatingPoint } = solveOperatingPoint(rig, site)
        if (!operatingPoint) return
        const prepared = prepareRig(rig, site)
        operatingPoint.outlets.forEach(({ nozzlePressurePa }, index) => {
          const losses = listPressureLosses(prepared, operatingPoint, index)
          const sum = losses.reduce((total, { dropPa }) => total + dropPa, nozzlePressurePa)
          expect(Math.abs(sum / operatingPoint.compressorPressurePa - 1)).toBeLessThan(1e-7)
          for (const { dropPa } of losses) expect(dropPa).toBeGreaterThanOrEqual(0)
          const regulators = losses.filter(({ place }) => place === 'regulator')
          const regulatorPa = rig.outlets[index]!.regulatorPa ?? Infinity
          expect(regulators).toHaveLength(operatingPoint.manifoldPressurePa > regulatorPa ? 1 : 0)
          spoken++
        })
      }),
      { seed, numRuns: 1_500 },
    )
    expect(spoken).toBeGreaterThan(1_000)
  })
})

describe('the root finder', () => {
  /** rising, with a jump and a flat of its own, and closed from `closed` on */
  const functions = fc.record({
    root: even(0.001, 0.999),
    steepness: even(-6, 9),
    jump: even(0, 1),
    closed: even(0.5, 1.5),
    power: fc.constantFrom(1, 3, 1 / 3, 9),
    proposal: fc.constantFrom('secant', 'wild', 'none', 'stuck', 'end'),
    isSlopeKnown: fc.boolean(),
  })

  it('ends within 200 evaluations at the root, the jump, or the closed part, whatever it is proposed', () => {
    fc.assert(
      fc.property(functions, ({ root, steepness, jump, closed, power, proposal, isSlopeKnown }) => {
        let evaluations = 0
        let earlierX = 0
        let earlierY = -1
        const value = (x: number) => {
          const away = x - root
          return Math.sign(away) * Math.abs(away) ** power * 10 ** steepness + (away >= 0 ? jump : -jump)
        }
        const found = findRoot({
          evaluate(x) {
            evaluations++
            return x >= closed ? NaN : value(x)
          },
          propose(x, y) {
            const secant = x - (y * (x - earlierX)) / (y - earlierY)
            earlierX = x
            earlierY = y
            return { secant, wild: x * 1e9 - 3, none: NaN, stuck: x, end: 1 }[proposal]!
          },
          low: 0,
          high: 1,
          guess: 0.9,
          widthTolerance: 1e-9,
          residualTolerance: 1e-8,
          zeroTolerance: 0,
          leastSlope: isSlopeKnown && power === 1 ? 0.5 * 10 ** steepness : 0,
        })
        expect(found.evaluations).toBe(evaluations)
        expect(evaluations).toBeLessThanOrEqual(200)
        if (closed > root * (1 + 1e-6)) {
          expect(found.isMet).toBe(true)
          expect(found.low).toBeLessThanOrEqual(root)
          expect(found.high).toBeGreaterThanOrEqual(root)
          expect(found.high - found.low).toBeLessThanOrEqual(1e-9)
        } else if (closed < root * (1 - 1e-3) && Math.abs(value(closed)) > 1e-3) {
          expect(found.isMet).toBe(false)
        }
      }),
      { seed, numRuns: 5_000 },
    )
  })

  const line = {
    propose: () => NaN,
    low: 0,
    high: 1,
    widthTolerance: 1e-9,
    residualTolerance: 1e-8,
    zeroTolerance: 0,
  }

  it('needs no second side where the slope is known', () => {
    const found = findRoot({ ...line, evaluate: (x) => x - 0.3, guess: 0.3 + 1e-10, leastSlope: 0.5 })
    expect(found.evaluations).toBe(1)
    expect(found.low).toBeLessThanOrEqual(0.3)
    expect(found.high - found.low).toBeLessThanOrEqual(1e-9)
  })

  it('takes a proposal at the high end, once', () => {
    const met = findRoot({ ...line, evaluate: (x) => x - 1, propose: () => 1, guess: 0.5 })
    expect([met.x, met.evaluations]).toEqual([1, 2])
    const short = findRoot({ ...line, evaluate: (x) => x - 0.25, propose: () => 1, guess: 0.5 })
    expect(short.x).toBeCloseTo(0.25, 8)
  })

  it('leaves guesses alone that close in from one side, and pushes the last of them across the root', () => {
    const found = findRoot({
      ...line,
      evaluate: (x) => Math.log(x / 0.03),
      // tangents of a concave function never pass its root
      propose: (x, y) => x - x * y,
      guess: 0.02,
    })
    expect(found.evaluations).toBeLessThanOrEqual(10)
    expect(found.high - found.low).toBeLessThanOrEqual(1e-9)
  })
})
