import { describe, expect, it } from 'vitest'
import { answerCheck } from '#shared/check/answerCheck.ts'
import { defaultHourFigures, hourOfCheck, offeredAbrasives } from '#shared/check/hourOfCheck.ts'
import { questionOfCheck } from '#shared/check/rigOfCheck.ts'
import type { CheckRequest } from '#shared/contracts/check.ts'
import { makeCheckRequest } from '../../support/checkRequest.ts'

const pound = 0.45359237
const psi = 6.894757293168361

const ask = (request: CheckRequest) => ({
  request,
  question: questionOfCheck(request),
  answer: answerCheck(request),
})

/** An answer whose nozzles stand at 100 psi and draw 6 m³/min, so that the rest can be worked by hand. */
function at100Psi(request: CheckRequest) {
  const asked = ask(request)
  const outlets = request.outlets.map(() => ({
    nozzlePressureKpa: 100 * psi,
    freeAirM3Min: 6,
    massFlowKgS: 0.12,
    choked: true,
  }))
  const operatingPoint = { compressorPressureKpa: 650, freeAirM3Min: 6, outlets }
  return { ...asked, answer: { ...asked.answer, operatingPoint } }
}

describe('the defaults of an hour', () => {
  it('count media by the new bore, not by the worn one', () => {
    const [outlet] = makeCheckRequest().outlets
    const worn = at100Psi(
      makeCheckRequest({ outlets: [{ ...outlet!, nozzle: { boreMm: 9.525, newBoreMm: 6.35 } }] }),
    )
    // permit handbooks: 309 lb/h of sand of 95 lb/ft³ through a new 1/4 in at 100 psi; crushed glass 90 lb/ft³
    expect(defaultHourFigures(worn, 'crushed-glass', 'us').mediaKgPerH).toBeCloseTo(
      (309 * pound * 90) / 95,
      6,
    )
  })
  it('add up the outlets', () => {
    const [outlet] = makeCheckRequest().outlets
    const nozzles = [6.35, 9.525].map((boreMm) => ({ ...outlet!, nozzle: { boreMm } }))
    const two = at100Psi(makeCheckRequest({ outlets: nozzles }))
    const sand = (309 + 720) * pound
    expect(defaultHourFigures(two, 'glass-bead', 'us').mediaKgPerH).toBeCloseTo((sand * 97.5) / 95, 6)
  })
  it('never offer silica sand', () => {
    expect(offeredAbrasives.map(({ id }) => id)).not.toContain('silica-sand')
    expect(offeredAbrasives.length).toBeGreaterThan(10)
    expect(defaultHourFigures(at100Psi(makeCheckRequest()), 'silica-sand', 'us').mediaKgPerH).toBe(0)
  })
  it('buy 50 lb bags in US units and 25 kg ones in metric', () => {
    const asked = at100Psi(makeCheckRequest())
    expect(defaultHourFigures(asked, 'garnet', 'us').bagMassKg).toBeCloseTo(50 * pound, 9)
    expect(defaultHourFigures(asked, 'garnet', 'metric').bagMassKg).toBe(25)
  })
})

describe('the hour of a check', () => {
  it('loads a flat nameplate by what is drawn of it', () => {
    const asked = at100Psi(
      makeCheckRequest({
        compressor: {
          ratedFreeAirM3Min: 10,
          setPressureKpa: 690,
          unloadPressureKpa: 830,
          conditionFactor: 0.8,
        },
      }),
    )
    const figures = { ...defaultHourFigures(asked, 'garnet', 'metric'), fullLoadFuelLPerH: 20 }
    const use = hourOfCheck(asked, figures, false)!
    // 6 of the 8 m³/min it still delivers: 0.45 + 0.55 · 0.75 of 20 L/h
    expect(use.load).toBeCloseTo(0.75, 9)
    expect(use.fuelL).toBeCloseTo(17.25, 9)
    expect(use.tankHours).toBeNull()
  })
  it('counts water only when it is wet', () => {
    const asked = at100Psi(makeCheckRequest())
    const figures = { ...defaultHourFigures(asked, 'garnet', 'metric'), waterLPerMin: 2, tankL: 360 }
    expect(hourOfCheck(asked, figures, true)).toMatchObject({ waterL: 120, tankHours: 3 })
    expect(hourOfCheck(asked, figures, false)).toMatchObject({ waterL: 0, tankHours: null })
  })
  it('is not there without an operating point', () => {
    const asked = ask(makeCheckRequest({ airTakenFirst: [{ name: 'hoods', freeAirM3Min: 20 }] }))
    const figures = defaultHourFigures(asked, 'garnet', 'us')
    expect(figures.mediaKgPerH).toBe(0)
    expect(hourOfCheck(asked, figures, false)).toBeNull()
  })
})
