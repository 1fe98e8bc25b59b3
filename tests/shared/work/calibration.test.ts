import { describe, expect, it } from 'vitest'
import { solveOperatingPoint } from '#shared/airflow/index.ts'
import { questionOfCheck } from '#shared/check/rigOfCheck.ts'
import { answerCheck } from '#shared/check/answerCheck.ts'
import type { CheckRequest } from '#shared/contracts/check.ts'
import { checkRequestSchema } from '#shared/contracts/check.ts'
import type { GaugeReading } from '#shared/contracts/work.ts'
import { applyCalibration, calibrationOf, calibrationOfReading } from '#shared/work/index.ts'
import { createRandom, createReading, createRequest, utc, worseLine } from './madeUp.ts'

const psi = 6.894757293168361

/** The rig as it really is: a compressor that delivers less, hoses that lose more than their profile says. */
function makeReal(nominal: CheckRequest, conditionFactor: number, lineFactor: number): CheckRequest {
  return {
    ...nominal,
    compressor: { ...nominal.compressor, conditionFactor },
    airLine: nominal.airLine.map(worseLine(lineFactor)),
    outlets: nominal.outlets.map((outlet) => ({ ...outlet, line: outlet.line.map(worseLine(lineFactor)) })),
  }
}

/** What perfect gauges show on it, kPa; null where it cannot run. */
function gaugesOf(real: CheckRequest) {
  const { rig, site, ambientPa } = questionOfCheck(real)
  const point = solveOperatingPoint(rig, site).operatingPoint
  return (
    point && {
      compressorPressureKpa: (point.compressorPressurePa - ambientPa) / 1000,
      nozzlePressureKpa: (point.outlets[0]!.nozzlePressurePa - ambientPa) / 1000,
    }
  )
}

const fine = { compressorAccuracyKpa: 2, nozzleAccuracyKpa: 2 }
const nominal = createRequest()
const readAt = (day: number, k: number, s: number, overrides: Partial<GaugeReading> = {}) =>
  createReading(utc(day), { ...gaugesOf(makeReal(nominal, k, s))!, ...fine, ...overrides })
const pair = { rigId: 'rig', compressorId: 'compressor' }
const find = (readings: GaugeReading[]) => calibrationOf(readings, pair, () => nominal)

describe('a rig that was measured', () => {
  it('delivers what its gauges say of what its plate says', () => {
    const plate = createRequest({
      compressor: { ...nominal.compressor, ratedFreeAirM3Min: 185 * 0.028316846592 },
    })
    const gauges = gaugesOf(makeReal(plate, 168 / 185, 1.4))!
    const { delivery, conditionFactor, lineFactor } = calibrationOfReading(
      createReading(utc(3), { ...gauges, ...fine }),
      plate,
    )!
    expect(delivery!.freeAirM3Min / 0.028316846592).toBeCloseTo(168, 4)
    expect(delivery!.plateFreeAirM3Min / 0.028316846592).toBeCloseTo(185, 9)
    expect(conditionFactor!.isOff).toBe(true)
    expect(lineFactor!.value).toBeCloseTo(1.4, 5)
  })

  it('and whose record already has a condition is still held against its plate', () => {
    const worn = createRequest({ compressor: { ...nominal.compressor, conditionFactor: 0.5 } })
    expect(calibrationOfReading(readAt(3, 0.9, 1), worn)).toEqual(
      calibrationOfReading(readAt(3, 0.9, 1), nominal),
    )
  })

  it.each([
    [0.85, 1, ['inlet-filter', 'leak', 'separator']],
    [1, 1.6, ['crushed-hose', 'thin-hose']],
    [0.85, 1.6, ['inlet-filter', 'leak', 'separator', 'crushed-hose', 'thin-hose']],
    [1, 0.5, ['bore-or-gauge']],
    [1.1, 1, ['bore-or-gauge']],
    [1, 1, []],
  ])('delivering %d of its plate with %d times the losses has to look at %j', (k, s, causes) => {
    expect(calibrationOfReading(readAt(3, k, s), nominal)!.causes).toEqual(causes)
  })

  it('is not called off where the gauges explain it', () => {
    const coarse = { compressorAccuracyKpa: 15, nozzleAccuracyKpa: 15 }
    const { conditionFactor, causes } = calibrationOfReading(readAt(3, 0.98, 1.05, coarse), nominal)!
    expect(conditionFactor!.value).toBeCloseTo(0.98, 6)
    expect([conditionFactor!.isOff, causes]).toEqual([false, []])
  })

  it('answers a later check with what was read on the day', () => {
    const { used } = find([readAt(3, 0.85, 1.7)])
    const request = applyCalibration({ ...nominal, targetNozzlePressureKpa: 500 }, used)
    const { operatingPoint } = answerCheck(request)
    expect(operatingPoint!.compressorPressureKpa).toBeCloseTo(used!.reading.compressorPressureKpa, 3)
    expect(operatingPoint!.outlets[0]!.nozzlePressureKpa).toBeCloseTo(used!.reading.nozzlePressureKpa, 3)
    expect(checkRequestSchema.safeParse(request).success).toBe(true)
  })

  it('applies it at another bore and another site as the real rig would behave there', () => {
    const { used } = find([readAt(3, 0.85, 1.7)])
    const other = createRequest({
      site: { altitudeM: 1800, airTemperatureC: 5 },
      outlets: nominal.outlets.map((outlet) => ({ ...outlet, nozzle: { boreMm: 8 } })),
    })
    const found = gaugesOf(applyCalibration(other, used))!
    const real = gaugesOf(makeReal(other, 0.85, 1.7))!
    expect(found.compressorPressureKpa).toBeCloseTo(real.compressorPressureKpa, 3)
    expect(found.nozzlePressureKpa).toBeCloseTo(real.nozzlePressureKpa, 3)
  })

  it('leaves the line of an outlet that was not measured as it is', () => {
    const two = createRequest({ outlets: [nominal.outlets[0]!, nominal.outlets[0]!] })
    const { used } = find([readAt(3, 0.85, 1.7, { outletIndex: 0 })])
    const applied = applyCalibration(two, used)
    expect(applied.outlets[1]).toEqual(two.outlets[1])
    expect(applied.outlets[0]!.line[0]!.lossK).toBeCloseTo(8 * 1.7, 5)
    expect(applied.airLine[0]!.lengthM).toBeCloseTo(15 * 1.7, 4)
    expect(applyCalibration(two, null)).toBe(two)
  })
})

describe('which reading is used', () => {
  const early = readAt(3, 0.9, 1.2)
  const late = readAt(5, 0.8, 1.5)
  const usedOf = (readings: GaugeReading[]) => find(readings).used?.reading.id

  it('is the latest of that pair, in any order', () => {
    const others = [readAt(7, 0.5, 1, { rigId: 'other' }), readAt(8, 0.5, 1, { compressorId: 'other' })]
    expect(usedOf([early, late, ...others])).toBe(late.id)
    expect(usedOf([late, ...others, early, late])).toBe(late.id)
  })

  it('is the one before where the owner set the latest aside', () => {
    expect(usedOf([early, { ...late, setAsideAt: utc(6), setAsideBy: 'Ana' }])).toBe(early.id)
  })

  it('is a correction instead of what it corrects', () => {
    const correction = readAt(6, 0.95, 1, { id: 'corrected', supersedesId: late.id })
    expect(usedOf([early, late, correction])).toBe('corrected')
  })

  it('is none where nothing was read, or the rig no longer has that outlet', () => {
    expect(find([])).toEqual({ used: null, unused: [] })
    expect(find([{ ...early, outletIndex: 3 }])).toEqual({ used: null, unused: [] })
  })

  it('is not one that cannot tell the machine from the hoses: that one says why', () => {
    const coarse = readAt(9, 0.8, 1, { compressorAccuracyKpa: 200, nozzleAccuracyKpa: 200 })
    const { used, unused } = find([early, coarse])
    expect(used!.reading.id).toBe(early.id)
    expect(unused).toMatchObject([
      {
        conditionFactor: null,
        conditionReason: 'drop-within-gauges',
        lineFactor: null,
        lineReason: 'drop-within-gauges',
        delivery: null,
        causes: [],
      },
    ])
    expect(applyCalibration(nominal, find([coarse]).used)).toBe(nominal)
  })

  it('may tell of the hoses alone, where the machine is throttled', () => {
    const strong = createRequest({
      compressor: { ratedFreeAirM3Min: 20, setPressureKpa: 700, unloadPressureKpa: 840 },
    })
    const reading = createReading(utc(3), { ...gaugesOf(makeReal(strong, 0.9, 1.5))!, ...fine })
    const { used } = calibrationOf([reading], pair, () => strong)
    expect(used!.conditionReason).toBe('compressor-at-set')
    expect(used!.lineFactor!.value).toBeCloseTo(1.5, 5)
    expect(applyCalibration(strong, used).compressor).toBe(strong.compressor)
  })
})

/**
 * Rigs drawn at random, made worse by factors drawn at random, solved forward, their gauges read with normal errors of
 * which the accuracy is the 95 % half-width. The band of 93.5 to 97 % of 1,000 is about two standard deviations
 * (0.7 %) to one side; it is wider above because readings whose drop the gauges could make are left out, and those are
 * the ones that were furthest off.
 */
describe('the range of 95 %', () => {
  it.each([0.5, 1, 2])(
    'of gauges good to ± %d psi holds the truth about as often as it says',
    (accuracyPsi) => {
      const accuracyKpa = accuracyPsi * psi
      const random = createRandom(Math.round(accuracyPsi * 1000))
      const counts = { condition: 0, conditionInside: 0, line: 0, lineInside: 0, unmoved: 0, rigs: 0 }
      while (counts.rigs < 1000) {
        const insideDiameterMm = random.between(25, 38)
        const drawn = createRequest({
          site: {
            altitudeM: random.between(0, 2500),
            airTemperatureC: random.between(-5, 40),
            relativeHumidityPct: random.between(0, 100),
          },
          compressor: {
            ratedFreeAirM3Min: random.between(4.5, 9),
            setPressureKpa: 1200,
            unloadPressureKpa: 1340,
          },
          airLine: [{ insideDiameterMm, lengthM: random.between(5, 30), lossK: 2 }],
          outlets: [
            {
              line: [
                { insideDiameterMm: 32, lossK: random.between(4, 12) },
                { insideDiameterMm, lengthM: random.between(10, 45), lossK: 2, mediaFactor: 1.3 },
              ],
              nozzle: { boreMm: random.between(8.5, 12) },
            },
          ],
        })
        const k = random.between(0.7, 1.05)
        const s = Math.exp(random.between(Math.log(0.6), Math.log(3)))
        const gauges = gaugesOf(makeReal(drawn, k, s))
        if (!gauges) continue
        counts.rigs += 1
        const reading = createReading(utc(3), {
          boreMm: drawn.outlets[0]!.nozzle.boreMm,
          compressorPressureKpa: gauges.compressorPressureKpa + (accuracyKpa / 1.96) * random.normal(),
          nozzlePressureKpa: gauges.nozzlePressureKpa + (accuracyKpa / 1.96) * random.normal(),
          compressorAccuracyKpa: accuracyKpa,
          nozzleAccuracyKpa: accuracyKpa,
        })
        const { conditionFactor, lineFactor } = calibrationOfReading(reading, drawn)!
        if (!lineFactor) counts.unmoved += 1
        else {
          counts.line += 1
          if (lineFactor.low <= s && s <= lineFactor.high) counts.lineInside += 1
        }
        if (conditionFactor) {
          counts.condition += 1
          if (conditionFactor.low <= k && k <= conditionFactor.high) counts.conditionInside += 1
        }
      }
      const shares = [counts.conditionInside / counts.condition, counts.lineInside / counts.line]
      for (const share of shares) {
        expect(share).toBeGreaterThan(0.935)
        expect(share).toBeLessThan(0.97)
      }
      if (accuracyPsi === 0.5) expect(counts.unmoved).toBeLessThan(10)
    },
  )
})
