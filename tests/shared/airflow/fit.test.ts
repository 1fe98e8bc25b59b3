import { describe, expect, it } from 'vitest'
import {
  checkPressure,
  findLargestNozzles,
  findSmallestCompressor,
  limitBore,
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
    expect(findLargestNozzles(rig, site, 90 * psi, 0, [8])).toEqual({
      whenNew: null,
      whenWorn: null,
      obstacle: 'short-of-air',
    })
  })

  it('no nozzle is wider than the narrowest hose of its own line, as no limit bore is', () => {
    const whip = { name: 'whip', insideDiameterM: 0.0127, lengthM: 0.1 }
    const narrow: Rig = {
      ...rig,
      compressor: compressorOf(1600),
      outlets: [
        { ...rig.outlets[0]!, line: [whip] },
        { line: [], nozzle: { boreM: 0.006 } },
      ],
    }
    const numbers = [2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 12]
    const { whenNew, whenWorn } = findLargestNozzles(narrow, site, 30 * psi, 0, numbers)
    // by air alone a No. 9 holds behind this 1/2 in whip
    expect(checkPressure(withBore(narrow, 0, (9 * 0.0254) / 16), site, 101325 + 30 * psi).verdict).toBe(
      'holds',
    )
    expect(limitBore(narrow, site, 101325 + 30 * psi, 0)).toMatchObject({ boreM: 0.0127, limitedBy: 'line' })
    expect(whenNew).toMatchObject({ number: 8, isWornWiderThanLine: true })
    expect(whenWorn?.number).toBe(7)
    expect(findLargestNozzles(narrow, site, 30 * psi, 0, [9]).obstacle).toBe('wider-than-line')
    // the other outlet's own line is open
    expect(findLargestNozzles(narrow, site, 30 * psi, 1, numbers).whenNew!.number).toBeGreaterThan(8)
  })

  it('names what stops even the smallest: a regulator, or a hose that chokes', () => {
    const held = { ...rig, outlets: [{ ...rig.outlets[0]!, regulatorPa: 101325 + 60 * psi }] }
    expect(findLargestNozzles(held, site, 90 * psi, 0, [2, 3]).obstacle).toBe('regulator:1')
    const thin = { name: 'whip', insideDiameterM: 0.003 }
    const choked = { ...rig, outlets: [{ ...rig.outlets[0]!, line: [thin] }] }
    expect(findLargestNozzles(choked, site, 90 * psi, 0, [3, 4]).obstacle).toBe('choked:whip')
  })

  it('shutting one of two outlets leaves the other alone with all the air', () => {
    const two = { ...rig, outlets: [rig.outlets[0]!, { line: [], nozzle: { boreM: 0.006 } }] }
    const shut = solveWithOutletShut(two, site, 1)!
    expect(shut.openIndexes).toEqual([0])
    expect(shut.operatingPoint).toEqual(solveOperatingPoint(rig, site).operatingPoint)
    expect(solveWithOutletShut(rig, site, 0)).toBeNull()
  })
})
