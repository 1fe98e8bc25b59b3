import { describe, expect, it } from 'vitest'
import { resolveAmbient, solveOperatingPoint } from '#shared/airflow/index.ts'
import type { LineElement, Rig, Site } from '#shared/airflow/rig.ts'
import { findBestWiderElement, isOutOfAir } from '#shared/airflow/widerElement.ts'

const psi = 6894.757293168361
const cfm = 0.028316846592 / 60
const inch = 0.0254
const site: Site = { altitudeM: 0, airTemperatureK: 293.15 }
const ambientPa = resolveAmbient(site).pressurePa
const diameters = [0.5, 0.75, 1, 1.25, 1.5, 2].map((inches) => inches * inch)
const isHose = (element: LineElement) => element.name !== 'pot'

const hose = (inches: number): LineElement => ({
  name: 'blast-hose',
  insideDiameterM: inches * inch,
  lengthM: 15,
})
const pot: LineElement = { name: 'pot', insideDiameterM: inch, lossK: 8 }

function makeRig(hoses: number[], freeAirCfm = 900): Rig {
  return {
    compressor: {
      freeAir: freeAirCfm * cfm,
      setPressurePa: ambientPa + 125 * psi,
      unloadPressurePa: ambientPa + 145 * psi,
    },
    airLine: [{ name: 'air-line', insideDiameterM: 2 * inch, lengthM: 8 }],
    outlets: hoses.map((inches) => ({
      line: [pot, hose(inches)],
      nozzle: { boreM: (6 * inch) / 16 },
    })),
    airTakenFirst: [],
  }
}

const lowest = (rig: Rig) =>
  Math.min(...solveOperatingPoint(rig, site).operatingPoint!.outlets.map((outlet) => outlet.nozzlePressurePa))

describe('the best wider hose', () => {
  it('is the thin one, and gains what the same rig with that hose has more', () => {
    const found = findBestWiderElement(makeRig([0.75]), site, 0, diameters, isHose)
    expect(found).toMatchObject({ place: 'outlet-line', index: 1, insideDiameterM: inch })
    expect(found!.gainPa).toBeCloseTo(lowest(makeRig([1])) - lowest(makeRig([0.75])), 1)
    expect(found!.gainPa).toBeGreaterThan(5 * psi)
  })
  it('is never the pot', () => {
    const found = findBestWiderElement(makeRig([2]), site, 0, diameters, isHose)
    expect(found).toBeNull()
  })
  it('is told of the one outlet asked for, not of both at once', () => {
    const found = findBestWiderElement(makeRig([1.25, 0.75]), site, 1, diameters, isHose)
    expect(found).toMatchObject({ place: 'outlet-line', index: 1, insideDiameterM: inch })
    expect(found!.gainPa).toBeCloseTo(lowest(makeRig([1.25, 1])) - lowest(makeRig([1.25, 0.75])), 1)
  })
  it('does nothing for a flat nameplate under its set pressure: the machine is out of air', () => {
    const rig = makeRig([1.25], 185)
    const { operatingPoint } = solveOperatingPoint(rig, site)
    expect(isOutOfAir(rig, operatingPoint!)).toBe(true)
    const found = findBestWiderElement(rig, site, 0, diameters, isHose)
    expect(found?.gainPa ?? 0).toBeLessThan(1)
  })
  it('a machine that throttles over its set pressure is not out of air', () => {
    const rig = makeRig([1.25], 900)
    expect(isOutOfAir(rig, solveOperatingPoint(rig, site).operatingPoint!)).toBe(false)
  })
})
