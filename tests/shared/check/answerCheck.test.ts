import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { answerCheck, bitsFor } from '#shared/check/answerCheck.ts'
import { cautionSentences, sentenceOfCaution } from '#shared/check/cautionSentences.ts'
import { questionOfCheck } from '#shared/check/rigOfCheck.ts'
import { cautionCodes } from '#shared/contracts/cautions.ts'
import { checkAnswerSchema, checkRequestSchema } from '#shared/contracts/check.ts'
import { makeCheckRequest } from '../../support/checkRequest.ts'
import { checkBodies, seed } from '../airflow/randomChecks.ts'

describe('a request in the units of its fields', () => {
  it('becomes SI, absolute at the edge and nowhere else', () => {
    const { rig, site, ambientPa, targetPa } = questionOfCheck({
      site: { altitudeM: 300, airTemperatureC: 25, relativeHumidityPct: 40, barometerKpa: 98 },
      compressor: {
        curve: [
          { pressureKpa: 500, freeAirM3Min: 6 },
          { pressureKpa: 700, freeAirM3Min: 5.4 },
        ],
        setPressureKpa: 690,
        unloadPressureKpa: 830,
        conditionFactor: 0.9,
        lineTemperatureRiseK: 10,
        engine: 'turbo',
      },
      airLine: [
        { name: 'a', insideDiameterMm: 32, lengthM: 15, roughnessMm: 0.02, lossK: 2, mediaFactor: 1.3 },
      ],
      outlets: [{ line: [], regulatorKpa: 600, nozzle: { boreMm: 8, dischargeCoefficient: 0.87 } }],
      airTakenFirst: [{ name: 'hood', freeAirM3Min: 0.3 }],
      targetNozzlePressureKpa: 620,
    })
    expect(site).toEqual({
      altitudeM: 300,
      airTemperatureK: 298.15,
      relativeHumidity: 0.4,
      barometerPa: 98000,
    })
    expect([ambientPa, targetPa]).toEqual([98000, 718000])
    expect(rig).toEqual({
      compressor: {
        freeAir: [
          { pressurePa: 598000, freeAirM3S: expect.closeTo(0.1, 12) },
          { pressurePa: 798000, freeAirM3S: expect.closeTo(0.09, 12) },
        ],
        setPressurePa: 788000,
        unloadPressurePa: 928000,
        conditionFactor: 0.9,
        lineTemperatureRiseK: 10,
        engine: 'turbo',
      },
      airLine: [
        { name: 'a', insideDiameterM: 0.032, lengthM: 15, roughnessM: 0.00002, lossK: 2, mediaFactor: 1.3 },
      ],
      outlets: [{ line: [], regulatorPa: 698000, nozzle: { boreM: 0.008, dischargeCoefficient: 0.87 } }],
      airTakenFirst: [{ name: 'hood', freeAirM3S: expect.closeTo(0.005, 12) }],
    })
  })
})

describe('an answer', () => {
  it('is worked by hand for one outlet without a hose, below the set pressure', () => {
    // 20 °C, sea level: ρd = 101325/(287.05 · 293.15) = 1.20411; 5.24 m³/min less 0.24 for a hood is 5 m³/min;
    // ṁ = 5/60 · 1.20411 = 0.100343 kg/s; p0 = ṁ √(R T)/(0.81 · π/4 d² · 0.684731), d = 12 mm: 464.04 kPa absolute
    const answer = answerCheck(
      makeCheckRequest({
        airLine: [],
        outlets: [{ line: [], nozzle: { boreMm: 12 } }],
        airTakenFirst: [{ name: 'hood', freeAirM3Min: 0.24 }],
        targetNozzlePressureKpa: 300,
      }),
    )
    const [outlet] = answer.operatingPoint!.outlets
    expect(outlet!.massFlowKgS).toBeCloseTo(0.100343, 5)
    expect(outlet!.freeAirM3Min).toBeCloseTo(5, 8)
    expect(outlet!.choked).toBe(true)
    expect(outlet!.nozzlePressureKpa).toBeCloseTo(464.04 - 101.325, 1)
    expect(answer.operatingPoint!.freeAirM3Min).toBeCloseTo(5.24, 8)
    expect(answer.operatingPoint!.compressorPressureKpa).toBeCloseTo(outlet!.nozzlePressureKpa, 8)
    // at 300 kPa gauge the nozzle takes 401.325/464.04 of 5 m³/min, with the hood 4.564; of 5.24 that leaves 12.9 %
    expect(answer.atTarget!.requiredFreeAirM3Min).toBeCloseTo((5 * 401.325) / 464.04 + 0.24, 2)
    expect(answer.atTarget!.deliveredFreeAirM3Min).toBeCloseTo(5.24, 8)
    expect(answer.atTarget!.airMarginPct).toBeCloseTo(12.9, 1)
    expect([answer.verdict, answer.reason]).toEqual(['holds', null])
    // the limit bore takes the 5 m³/min at 300 kPa: 12 √(464.04/401.325) = 12.904 mm
    expect(answer.outlets[0]!.limitBoreMm).toBeCloseTo(12.904, 2)
    expect(answer.outlets[0]!.limitedBy).toBe('air')
    // 12.904 mm lies between 32/64 (12.7) and 33/64 (13.0969)
    expect(answer.outlets[0]!.noGoBit!.name).toBe('33/64')
    expect(answer.outlets[0]!.orderBit!.name).toBe('1/2')
    expect(answer.waterToDrainLPerHour).toBe(0)
  })

  it('counts air at the site: the same machine gives as many cubic metres, and fewer kilograms, at altitude', () => {
    const at = (altitudeM: number) =>
      answerCheck(
        makeCheckRequest({
          site: { altitudeM, airTemperatureC: 20 },
          outlets: [{ line: [], nozzle: { boreMm: 12 } }],
        }),
      ).operatingPoint!
    expect(at(2000).freeAirM3Min).toBeCloseTo(at(0).freeAirM3Min, 6)
    // density follows the standard atmosphere, 79.501 kPa of 101.325
    expect(at(2000).outlets[0]!.massFlowKgS / at(0).outlets[0]!.massFlowKgS).toBeCloseTo(79.501 / 101.325, 3)
  })

  it('to an air line thinner than the flow needs names the element', () => {
    const airLine = [{ name: 'whip', insideDiameterMm: 3 }]
    const outlets = [{ line: [], nozzle: { boreMm: 12 } }]
    const answer = answerCheck(makeCheckRequest({ airLine, outlets }))
    expect(answer).toMatchObject({
      verdict: 'falls-short',
      reason: 'choked:whip',
      operatingPoint: null,
      atTarget: null,
    })
    expect(answer.waterToDrainLPerHour).toBeNull()
  })

  it('to hoods that take all the air is that it cannot run', () => {
    const answer = answerCheck(makeCheckRequest({ airTakenFirst: [{ name: 'hoods', freeAirM3Min: 5.24 }] }))
    expect(answer).toMatchObject({
      verdict: 'cannot-run',
      reason: 'air-taken-first',
      operatingPoint: null,
      atTarget: null,
    })
    expect(answer.outlets[0]).toEqual({
      limitBoreMm: null,
      limitedBy: 'air',
      reason: 'air-taken-first',
      noGoBit: null,
      orderBit: null,
    })
  })

  it('to a rig without a nozzle is that it cannot run', () => {
    const request = checkRequestSchema.parse(makeCheckRequest({ outlets: [] }))
    expect(answerCheck(request)).toMatchObject({
      verdict: 'cannot-run',
      reason: 'no-nozzle',
      operatingPoint: null,
      atTarget: null,
      outlets: [],
    })
  })

  it('to a pot in the outlet’s line that the target would choke names the pot', () => {
    const pot = { name: 'pot', insideDiameterMm: 10, lossK: 8 }
    const outlets = [{ line: [pot], nozzle: { boreMm: 14 } }]
    const answer = answerCheck(makeCheckRequest({ outlets, targetNozzlePressureKpa: 400 }))
    expect(answer).toMatchObject({ verdict: 'falls-short', reason: 'choked:pot', atTarget: null })
  })

  it('to any body the contract lets through keeps the contract, with finite numbers alone', () => {
    const bodies = fc.oneof(
      checkBodies('declared', { withJumps: true }),
      checkBodies('declared', { withJumps: true }),
      checkBodies('realistic'),
    )
    fc.assert(
      fc.property(bodies, (body) => {
        const request = checkRequestSchema.parse(body)
        const answer = checkAnswerSchema.parse(answerCheck(request))
        // a number that is not finite does not survive JSON
        expect(JSON.parse(JSON.stringify(answer))).toEqual(answer)
        expect(answer.outlets).toHaveLength(request.outlets.length)
      }),
      { seed, numRuns: 6_000 },
    )
  })

  it('to a curve that falls off a cliff between two numbers next to each other is still an answer', () => {
    const curve = [
      { pressureKpa: 300, freeAirM3Min: 100 },
      { pressureKpa: 300.00000000000006, freeAirM3Min: 0.05 },
    ]
    const compressor = { curve, setPressureKpa: 690, unloadPressureKpa: 830 }
    const answer = answerCheck(
      makeCheckRequest({ compressor, outlets: [{ line: [], nozzle: { boreMm: 12 } }] }),
    )
    expect(answer.operatingPoint!.compressorPressureKpa).toBeCloseTo(300, 6)
  })
})

describe('the bits of a limit bore', () => {
  it.each([
    // 10 mm lies between 25/64 (9.9219) and 13/32 (10.3187)
    [10, 9.525, '13/32', '25/64'],
    // no bit between a new No. 6 and a limit of 9.8 mm: order now
    [9.8, 9.525, '25/64', null],
    // a bit at the limit is the order bit
    [9.921875, 9.525, '13/32', '25/64'],
  ])('limit %d mm, new bore %d mm: no-go %s, order %s', (limit, newBore, noGo, order) => {
    const bits = bitsFor(limit, newBore, 'fractional-64')
    expect([bits.noGoBit?.name ?? null, bits.orderBit?.name ?? null]).toEqual([noGo, order])
  })

  it('are both null where no bit helps: no limit, or one under the new bore', () => {
    expect(bitsFor(null, 9.525, 'fractional-64')).toEqual({ noGoBit: null, orderBit: null })
    expect(bitsFor(9.5, 9.525, 'fractional-64')).toEqual({ noGoBit: null, orderBit: null })
  })
})

describe('the sentence of a caution', () => {
  it('is there in both languages for every code, with its size', () => {
    for (const code of cautionCodes) {
      for (const language of ['en', 'es'] as const) {
        expect(cautionSentences[language][code]).toContain('{size}')
        expect(sentenceOfCaution(code, 12.6, language)).toContain('13 %')
        expect(sentenceOfCaution(code, 9.96, language)).toContain('10 %')
        expect(sentenceOfCaution(code, 4.2, language)).toContain('4.2 %')
        expect(sentenceOfCaution(code, 4, language)).toContain('4 %')
      }
    }
  })
})
