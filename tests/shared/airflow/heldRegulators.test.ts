import { describe, expect, it } from 'vitest'
import { checkPressure, limitBore, nozzleMassFlow, solveOperatingPoint } from '#shared/airflow/index.ts'
import type { Rig } from '#shared/airflow/index.ts'
import { findChokedElement, prepareElement, prepareLineAir } from '#shared/airflow/line.ts'

const ambientPa = 101325
const gauge = (kpa: number) => ambientPa + kpa * 1000
const site = { altitudeM: 0, airTemperatureK: 293.15 }

/** A big machine, a regulator at 400 kPa, and an air line of this diameter. */
function heldRig(airLineMm: number): Rig {
  return {
    compressor: { freeAir: 0.3, setPressurePa: gauge(900), unloadPressurePa: gauge(1040) },
    airLine: [{ name: 'thin hose', insideDiameterM: airLineMm / 1000, lossK: 0.5 }],
    outlets: [{ line: [], regulatorPa: gauge(400), nozzle: { boreM: 0.01 } }],
    airTakenFirst: [],
  }
}

/** The nozzle's flow at 400 kPa, and whether the air line is choked by it at a manifold pressure. */
function isChokedAt(rig: Rig, manifoldKpa: number): boolean {
  const massFlow = nozzleMassFlow(rig.outlets[0]!.nozzle, gauge(400), site)
  const line = rig.airLine.map((element) =>
    prepareElement(element, prepareLineAir(site.airTemperatureK), 'air-line', 0),
  )
  return findChokedElement(line, massFlow, manifoldKpa * 1000, ambientPa) !== null
}

describe('behind a held regulator', () => {
  it('the nozzle sees the regulator, whatever the compressor has left over', () => {
    const { operatingPoint } = solveOperatingPoint(heldRig(30), site)
    expect(operatingPoint!.outlets[0]!.nozzlePressurePa).toBeCloseTo(gauge(400), 3)
    expect(operatingPoint!.compressorPressurePa).toBeGreaterThan(gauge(900))
  })

  it('an air line choked at a lower pressure and open at a higher one runs at the higher one', () => {
    const rig = heldRig(6.6)
    expect(isChokedAt(rig, 400)).toBe(true)
    expect(isChokedAt(rig, 700)).toBe(false)
    const check = checkPressure(rig, site, gauge(400))
    expect(check.operatingPoint!.manifoldPressurePa).toBeGreaterThan(gauge(400))
    expect(check.operatingPoint!.outlets[0]!.nozzlePressurePa).toBeCloseTo(gauge(400), 3)
    // held to the same answer: the smallest pressure that opens the line is what the target needs
    expect(check.verdict).toBe('holds')
    const needed = check.atTarget!.manifoldPressurePa
    expect(isChokedAt(rig, (needed - ambientPa) / 1000 - 1)).toBe(true)
    expect(needed).toBeLessThan(check.operatingPoint!.manifoldPressurePa)
  })

  it('and the same with two outlets, of which one is not regulated', () => {
    const rig = heldRig(6.6)
    const both = { ...rig, outlets: [...rig.outlets, { line: [], nozzle: { boreM: 0.001 } }] }
    const check = checkPressure(both, site, gauge(400))
    expect(check.operatingPoint!.manifoldPressurePa).toBeGreaterThan(gauge(400))
    expect(check.verdict).toBe('holds')
  })

  it('a line too thin at any pressure is named', () => {
    const check = checkPressure(heldRig(4), site, gauge(400))
    expect(check).toMatchObject({ verdict: 'falls-short', operatingPoint: null, atTarget: null })
    expect(check.reason).toBe('choked:thin hose')
  })

  it('a target over the regulator names the regulator', () => {
    const check = checkPressure(heldRig(30), site, gauge(401))
    expect(check.reason).toBe('regulator:1')
    expect(check.operatingPoint).not.toBeNull()
    expect(check.atTarget).toBeNull()
  })

  it('a target at the regulator is reached', () => {
    expect(checkPressure(heldRig(30), site, gauge(400)).verdict).toBe('holds')
  })

  it('the limit bore is that of the air line where it chokes first', () => {
    const limit = limitBore(heldRig(6.6), site, gauge(400), 0)
    expect(limit.limitedBy).toBe('air-line')
    expect(limit.boreM!).toBeGreaterThan(0.01)
  })
})
