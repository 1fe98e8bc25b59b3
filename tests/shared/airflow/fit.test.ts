import { describe, expect, it } from 'vitest'
import {
  checkPressure,
  findLargestNozzles,
  findSmallestCompressor,
  solveOperatingPoint,
  solveWithOutletShut,
  withBore,
} from '#shared/airflow/index.ts'
import type { Compressor, Rig } from '#shared/airflow/index.ts'

const cfm = 0.028316846592 / 60
const psi = 6894.757293168361
const site = { altitudeM: 0, airTemperatureK: 293.15 }
const compressorOf = (size: number): Compressor => ({
  freeAir: size * cfm,
  setPressurePa: 101325 + 100 * psi,
  unloadPressurePa: 101325 + 120 * psi,
  engine: 'natural',
})
const hose = { insideDiameterM: 0.03175, lengthM: 8, lossK: 1 }
const rig: Rig = {
  compressor: compressorOf(185),
  airLine: [hose],
  outlets: [{ line: [hose], nozzle: { boreM: (6 * 0.0254) / 16 } }],
  airTakenFirst: [],
}
const sizes = [90, 185, 210, 260, 375, 425]

describe('what to rent, and what fits', () => {
  it('the smallest compressor that holds is the first of its row whose verdict is Holds', () => {
    const found = findSmallestCompressor(rig, site, 90 * psi, sizes, compressorOf)!
    const verdictOf = (size: number) =>
      checkPressure({ ...rig, compressor: compressorOf(size) }, site, 101325 + 90 * psi).verdict
    expect(found.check.verdict).toBe('holds')
    expect(verdictOf(found.candidate)).toBe('holds')
    const smaller = sizes.filter((size) => size < found.candidate)
    expect(smaller.length).toBeGreaterThan(0)
    for (const size of smaller) expect(verdictOf(size)).not.toBe('holds')
  })

  it('passes over a machine whose engine is short, and falls back on the first that reaches it', () => {
    const high = { altitudeM: 4500, airTemperatureK: 283.15 }
    const found = findSmallestCompressor(rig, high, 60 * psi, sizes, compressorOf)!
    expect(found.engineShortfall).toBeGreaterThan(0)
    expect(found.check.reason).toBeNull()
    expect(findSmallestCompressor(rig, high, 60 * psi, [90], compressorOf)).toBeNull()
  })

  it('the largest nozzles hold, and one number more does not', () => {
    const numbers = [2, 3, 4, 5, 6, 7, 8]
    const { whenNew, whenWorn } = findLargestNozzles(rig, site, 90 * psi, 0, numbers)
    const isReached = (sixteenths: number) =>
      checkPressure(withBore(rig, 0, (sixteenths * 0.0254) / 16), site, 101325 + 90 * psi).reason === null
    expect(isReached(whenNew!.number)).toBe(true)
    expect(isReached(whenNew!.number + 1)).toBe(false)
    expect(isReached(whenWorn!.number + 1)).toBe(true)
    expect(whenWorn!.number).toBe(whenNew!.number - 1)
    expect(findLargestNozzles(rig, site, 90 * psi, 0, [8])).toEqual({ whenNew: null, whenWorn: null })
  })

  it('shutting one of two outlets leaves the other alone with all the air', () => {
    const two = { ...rig, outlets: [rig.outlets[0]!, { line: [], nozzle: { boreM: 0.006 } }] }
    const shut = solveWithOutletShut(two, site, 1)!
    expect(shut.openIndexes).toEqual([0])
    expect(shut.operatingPoint).toEqual(solveOperatingPoint(rig, site).operatingPoint)
    expect(solveWithOutletShut(rig, site, 0)).toBeNull()
  })
})
