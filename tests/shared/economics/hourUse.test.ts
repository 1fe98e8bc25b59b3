import { describe, expect, it } from 'vitest'
import { fuelAtLoad, useOfHour } from '#shared/economics/hourUse.ts'
import type { HourUseInput } from '#shared/economics/hourUse.ts'

/* Expected values are worked by hand from 45 % idling and 55 % with the load (common practice, no source). */

function makeInput(overrides: Partial<HourUseInput> = {}): HourUseInput {
  return {
    freeAirM3Min: 6,
    fullLoadFreeAirM3Min: 10,
    fullLoadFuelLPerH: 20,
    mediaKgPerH: 360,
    bagMassKg: 25,
    waterLPerMin: 0,
    tankL: 400,
    ...overrides,
  }
}

describe('fuel at a part of the full load', () => {
  it('is 45 % of the full-load fuel when nothing is drawn', () => {
    expect(fuelAtLoad(20, 0)).toBeCloseTo(9, 12)
  })
  it('is the full-load fuel at full load', () => {
    expect(fuelAtLoad(20, 1)).toBeCloseTo(20, 12)
  })
  it('at 60 % of the load is 0.45 + 0.55 · 0.6 = 0.78 of it', () => {
    expect(fuelAtLoad(20, 0.6)).toBeCloseTo(15.6, 12)
  })
  it('never goes past the two ends', () => {
    expect(fuelAtLoad(20, 1.4)).toBeCloseTo(20, 12)
    expect(fuelAtLoad(20, -1)).toBeCloseTo(9, 12)
  })
})

describe('what an hour uses', () => {
  it('is sixty minutes of free air', () => {
    expect(useOfHour(makeInput()).freeAirM3).toBeCloseTo(360, 12)
  })
  it('burns fuel by the load the draw makes', () => {
    const use = useOfHour(makeInput())
    expect(use.load).toBeCloseTo(0.6, 12)
    expect(use.fuelL).toBeCloseTo(15.6, 12)
  })
  it('counts media in bags, broken ones too', () => {
    const use = useOfHour(makeInput())
    expect(use.mediaKg).toBe(360)
    expect(use.bags).toBeCloseTo(14.4, 12)
  })
  it('takes no water and empties no tank when dry', () => {
    const use = useOfHour(makeInput())
    expect(use.waterL).toBe(0)
    expect(use.tankHours).toBeNull()
  })
  it('empties a 400 L tank at 2 L a minute in three hours and twenty minutes', () => {
    const use = useOfHour(makeInput({ waterLPerMin: 2 }))
    expect(use.waterL).toBeCloseTo(120, 12)
    expect(use.tankHours).toBeCloseTo(10 / 3, 12)
  })
  it('idles where the compressor delivers nothing, instead of dividing by it', () => {
    const use = useOfHour(makeInput({ freeAirM3Min: 0, fullLoadFreeAirM3Min: 0 }))
    expect(use.load).toBe(0)
    expect(use.fuelL).toBeCloseTo(9, 12)
  })
})
