import { describe, expect, it } from 'vitest'
import { freeAirOnCurve, traceDeliveryAndDraw } from '#shared/airflow/drawCurves.ts'
import { resolveAmbient, solveOperatingPoint, withBore } from '#shared/airflow/index.ts'
import { prepareRig } from '#shared/airflow/preparedRig.ts'
import type { Outlet, Rig, Site } from '#shared/airflow/rig.ts'

const psi = 6894.757293168361
const cfm = 0.028316846592 / 60
const inch = 0.0254
const site: Site = { altitudeM: 0, airTemperatureK: 293.15 }
const ambient = resolveAmbient(site)
const bores = [5, 6, 7].map((number) => (number * inch) / 16)

function makeOutlet(overrides: Partial<Outlet> = {}): Outlet {
  return {
    line: [
      { name: 'blast-hose', insideDiameterM: 1.25 * inch, lengthM: 15, lossK: 2, mediaFactor: 1.3 },
      { name: 'whip', insideDiameterM: inch, lengthM: 3, lossK: 1, mediaFactor: 1.3 },
    ],
    nozzle: { boreM: bores[1]! },
    ...overrides,
  }
}

function makeRig(overrides: Partial<Rig> = {}): Rig {
  return {
    compressor: {
      freeAir: 300 * cfm,
      setPressurePa: ambient.pressurePa + 100 * psi,
      unloadPressurePa: ambient.pressurePa + 120 * psi,
    },
    airLine: [{ name: 'air-line', insideDiameterM: 1.5 * inch, lengthM: 8, lossK: 2 }],
    outlets: [makeOutlet()],
    airTakenFirst: [{ name: 'hood', freeAirM3S: 15 * cfm }],
    ...overrides,
  }
}

const trace = (rig: Rig, targetPsi = 90) =>
  traceDeliveryAndDraw(prepareRig(rig, site), 0, bores, targetPsi * psi)

const curve = [60, 100, 120].map((pressure, index) => ({
  pressurePa: ambient.pressurePa + pressure * psi,
  freeAirM3S: [320, 290, 270][index]! * cfm,
}))
const rigs: Record<string, Rig> = {
  'one outlet': makeRig(),
  'a user’s curve': makeRig({ compressor: { ...makeRig().compressor, freeAir: curve } }),
  'two unlike outlets': makeRig({
    compressor: { ...makeRig().compressor, freeAir: 600 * cfm },
    outlets: [makeOutlet(), makeOutlet({ line: [], nozzle: { boreM: bores[0]! } })],
  }),
}

describe('delivery and draw', () => {
  it.each(Object.keys(rigs))('of %s meet where the rig is in balance with each bore', (name) => {
    const rig = rigs[name]!
    const { delivery, draws } = trace(rig)
    draws.forEach((draw, index) => {
      const { operatingPoint } = solveOperatingPoint(withBore(rig, 0, bores[index]!), site)
      const gauge = operatingPoint!.outlets[0]!.nozzlePressurePa - ambient.pressurePa
      expect(draw.operatingPoint!.nozzleGaugePa).toBeCloseTo(gauge, 3)
      expect(freeAirOnCurve(draw, gauge)! / operatingPoint!.freeAirM3S).toBeCloseTo(1, 3)
      expect(Math.abs(freeAirOnCurve(delivery, gauge)! / operatingPoint!.freeAirM3S - 1)).toBeLessThan(0.01)
    })
  })

  it('begin with all the nameplate gives and end with only the hood fed at unload', () => {
    const { points } = trace(makeRig()).delivery
    expect(points[0]!.freeAirM3S / (300 * cfm)).toBeCloseTo(1, 9)
    const last = points[points.length - 1]!
    expect(last.freeAirM3S / (15 * cfm)).toBeCloseTo(1, 6)
    // 15 of 300 cfm is left at unload less a twentieth of the 20 psi between set and unload: 119 psi
    expect(last.nozzleGaugePa / psi).toBeCloseTo(119, 6)
  })

  it('show a draw that is the choked nozzle’s by hand, with the hood’s air on it', () => {
    const { draws } = trace(makeRig({ airLine: [], outlets: [makeOutlet({ line: [] })] }))
    const p0 = ambient.pressurePa + 90 * psi
    // ISO 9300's choked form at γ = 1.4: √γ (2/2.4)^3 = 0.68473
    const flow = (0.81 * (Math.PI / 4) * bores[1]! ** 2 * p0 * 0.68473) / Math.sqrt(287.05 * 293.15)
    const expected = flow / ambient.dryAirDensity + 15 * cfm
    expect(freeAirOnCurve(draws[1]!, 90 * psi)! / expected).toBeCloseTo(1, 4)
  })

  it('rise with the pressure and with the bore', () => {
    const { draws } = trace(makeRig())
    const at = (index: number, pressure: number) => freeAirOnCurve(draws[index]!, pressure * psi)!
    expect(at(1, 100)).toBeGreaterThan(at(1, 70))
    expect(at(1, 90)).toBeGreaterThan(at(0, 90))
    expect(at(2, 90)).toBeGreaterThan(at(1, 90))
  })

  it('end a draw with the hose that chokes, and say of the others nothing', () => {
    // sonic in the hose itself from 1.343 times its bore: a No. 6 passes 0.3 in, a No. 7 does not
    const line = [{ name: 'whip', insideDiameterM: 0.3 * inch, lengthM: 3 }]
    const { draws } = trace(makeRig({ outlets: [makeOutlet({ line })] }))
    expect(draws.map((draw) => draw.end)).toEqual([null, null, 'choked:whip'])
    expect(draws[2]!.points).toEqual([])
    expect(draws[0]!.points.length).toBeGreaterThan(10)
  })

  it('end a draw where the regulator holds', () => {
    const regulatorPa = ambient.pressurePa + 80 * psi
    const { draws } = trace(makeRig({ outlets: [makeOutlet({ regulatorPa })] }))
    expect(draws[0]!.end).toBe('regulator:1')
    expect(Math.max(...draws[0]!.points.map((point) => point.nozzleGaugePa))).toBeLessThan(80 * psi)
    expect(draws[0]!.operatingPoint!.nozzleGaugePa).toBeLessThan(80 * psi)
  })

  it('deliver nothing where the hoods take it all', () => {
    const { delivery, draws } = trace(makeRig({ airTakenFirst: [{ name: 'hoods', freeAirM3S: 301 * cfm }] }))
    expect(delivery.points).toEqual([])
    expect(draws.map((draw) => draw.operatingPoint)).toEqual([null, null, null])
    expect(draws[0]!.verdict).toBe('cannot-run')
  })

  it('ends the delivery where the other outlet takes all there is', () => {
    const others = makeOutlet({ line: [], nozzle: { boreM: bores[0]! } })
    const two = makeRig({ airTakenFirst: [], outlets: [makeOutlet({ line: [] }), others] })
    const { delivery } = trace(two)
    expect(delivery.isTakenByOthers).toBe(true)
    // shut, the first sees the manifold at which the other stands alone
    const alone = solveOperatingPoint(makeRig({ airTakenFirst: [], outlets: [others] }), site).operatingPoint!
    const last = delivery.points.at(-1)!
    const manifoldGauge = alone.manifoldPressurePa - ambient.pressurePa
    expect(Math.abs(last.nozzleGaugePa / manifoldGauge - 1)).toBeLessThan(1e-5)
    expect(Math.abs(last.freeAirM3S / alone.freeAirM3S - 1)).toBeLessThan(1e-5)
    expect(trace(makeRig()).delivery.isTakenByOthers).toBe(false)
  })

  it('show some of the delivery where the whip chokes at every lower pressure', () => {
    const line = [{ name: 'whip', insideDiameterM: 0.5 * inch, lengthM: 3 }]
    const compressor = {
      freeAir: 1600 * cfm,
      setPressurePa: ambient.pressurePa + 150 * psi,
      unloadPressurePa: ambient.pressurePa + 170 * psi,
    }
    const rig = makeRig({ compressor, outlets: [makeOutlet({ line, nozzle: { boreM: (10 * inch) / 16 } })] })
    const { delivery, lowestGaugePa, highestGaugePa } = traceDeliveryAndDraw(
      prepareRig(rig, site),
      0,
      [(10 * inch) / 16],
      30 * psi,
    )
    const first = delivery.points[0]!
    expect(first.nozzleGaugePa).toBeGreaterThan(1.2 * 30 * psi)
    // it begins where the whip's flow is isothermally sonic: p = G √(R T)
    const flow = (first.freeAirM3S - 15 * cfm) * ambient.dryAirDensity
    const sonicPa = (flow / ((Math.PI / 4) * (0.5 * inch) ** 2)) * Math.sqrt(287.05 * 293.15)
    expect(Math.abs((first.nozzleGaugePa + ambient.pressurePa) / sonicPa - 1)).toBeLessThan(1e-3)
    const shown = delivery.points.filter(({ nozzleGaugePa }) => nozzleGaugePa <= highestGaugePa)
    expect(shown.length).toBeGreaterThan(1)
    expect(lowestGaugePa).toBeLessThan(30 * psi)
  })

  it('show the target and every balance inside the range', () => {
    const traced = trace(makeRig(), 110)
    const shown = [110 * psi, ...traced.draws.map((draw) => draw.operatingPoint!.nozzleGaugePa)]
    for (const gauge of shown) {
      expect(gauge).toBeGreaterThan(traced.lowestGaugePa)
      expect(gauge).toBeLessThan(traced.highestGaugePa)
    }
  })
})
