import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { calibrate, solveOperatingPoint } from '#shared/airflow/index.ts'
import type { LineElement, Rig } from '#shared/airflow/index.ts'
import { seed } from './randomChecks.ts'

const site = { altitudeM: 500, airTemperatureK: 298.15, relativeHumidity: 0.5 }
const bore = 0.0095

/** Losses that can be scaled whole: K only, or a length whose friction takes the factor as its media factor. */
function makeRig(conditionFactor: number, lineFactor: number, overrides: Partial<Rig> = {}): Rig {
  const element = (e: LineElement): LineElement => ({
    ...e,
    lossK: (e.lossK ?? 0) * lineFactor,
    mediaFactor: (e.mediaFactor ?? 1) * lineFactor,
  })
  return {
    compressor: { freeAir: 0.13, setPressurePa: 1.4e6, unloadPressurePa: 1.54e6, conditionFactor },
    airLine: [{ insideDiameterM: 0.025, lengthM: 15, lossK: 2 }].map(element),
    outlets: [
      {
        line: [
          { insideDiameterM: 0.025, lossK: 8 },
          { insideDiameterM: 0.025, lengthM: 15, mediaFactor: 1.3, lossK: 1 },
        ].map(element),
        nozzle: { boreM: bore },
      },
    ],
    airTakenFirst: [{ name: 'hood', freeAirM3S: 0.005 }],
    ...overrides,
  }
}

function readingsOf(rig: Rig) {
  const point = solveOperatingPoint(rig, site).operatingPoint!
  return {
    compressorPressurePa: point.compressorPressurePa,
    nozzlePressurePa: point.outlets[0]!.nozzlePressurePa,
    boreM: bore,
    compressorAccuracyPa: 2e3,
    nozzleAccuracyPa: 2e3,
  }
}

describe('two gauges and a measured bore', () => {
  it('give back the condition and the line factor that made the readings', () => {
    const truth = fc.record({ k: fc.integer({ min: 65, max: 100 }), s: fc.integer({ min: 60, max: 250 }) })
    fc.assert(
      fc.property(truth, ({ k, s }) => {
        const real = makeRig(k / 100, s / 100)
        const found = calibrate(makeRig(1, 1), site, readingsOf(real))
        expect(found.lineFactor!.value).toBeCloseTo(s / 100, 6)
        expect(found.conditionFactor!.value).toBeCloseTo(k / 100, 6)
        for (const factor of [found.lineFactor!, found.conditionFactor!]) {
          expect(factor.low).toBeLessThan(factor.value)
          expect(factor.high).toBeGreaterThan(factor.value)
        }
      }),
      { seed, numRuns: 200 },
    )
  })

  it('cannot be under set and above it: a throttled machine only tells of the line', () => {
    const strong = makeRig(1, 1.5, {
      compressor: { freeAir: 0.4, setPressurePa: 8.9e5, unloadPressurePa: 1.03e6 },
    })
    const found = calibrate({ ...makeRig(1, 1), compressor: strong.compressor }, site, readingsOf(strong))
    expect(found.conditionReason).toBe('compressor-at-set')
    expect(found.conditionFactor).toBeNull()
    expect(found.lineFactor!.value).toBeCloseTo(1.5, 6)
  })

  const readings = readingsOf(makeRig(0.9, 1))
  it.each([
    [
      'a needle gauge over the compressor’s',
      { nozzlePressurePa: readings.compressorPressurePa + 1 },
      'nozzle-over-compressor',
    ],
    ['a needle gauge at nothing', { nozzlePressurePa: 9e4 }, 'nozzle-over-compressor'],
    [
      'gauges too coarse for the drop',
      { compressorAccuracyPa: 2e5, nozzleAccuracyPa: 2e5 },
      'drop-within-gauges',
    ],
  ])('%s move neither', (_, change, reason) => {
    expect(calibrate(makeRig(1, 1), site, { ...readings, ...change })).toEqual({
      conditionFactor: null,
      conditionReason: reason,
      lineFactor: null,
      lineReason: reason,
    })
  })

  it('behind a regulator that holds move neither', () => {
    const rig = makeRig(1, 1)
    const outlets = [{ ...rig.outlets[0]!, regulatorPa: readings.nozzlePressurePa }]
    const found = calibrate({ ...rig, outlets }, site, readings)
    expect([found.conditionReason, found.lineReason]).toEqual(['regulator-acting', 'regulator-acting'])
  })

  it('on a rig without any line leave a line factor that nothing could explain alone', () => {
    const bare = { ...makeRig(1, 1), airLine: [], outlets: [{ line: [], nozzle: { boreM: bore } }] }
    const found = calibrate(bare, site, {
      ...readings,
      compressorPressurePa: readings.nozzlePressurePa + 2e5,
    })
    expect([found.lineFactor, found.lineReason]).toEqual([null, 'out-of-range'])
  })

  it('of a drop that the gauges can just tell, the range of the line begins at no loss', () => {
    const drop = readings.compressorPressurePa - readings.nozzlePressurePa
    const coarse = { ...readings, compressorAccuracyPa: drop * 0.7, nozzleAccuracyPa: drop * 0.7 }
    expect(calibrate(makeRig(1, 1), site, coarse).lineFactor!.low).toBe(0)
  })
})
