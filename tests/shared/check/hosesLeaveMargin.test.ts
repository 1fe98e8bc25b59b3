import { describe, expect, it } from 'vitest'
import { answerCheck } from '#shared/check/answerCheck.ts'
import { hosesLeaveMargin } from '#shared/check/hosesLeaveMargin.ts'
import type { CheckRequest } from '#shared/contracts/check.ts'
import { makeCheckRequest } from '../../support/checkRequest.ts'

const hose = (insideDiameterMm: number) => ({ insideDiameterMm, lengthM: 15 })
const outlet = (insideDiameterMm: number) => ({ line: [hose(insideDiameterMm)], nozzle: { boreMm: 8 } })
const compressor = { ratedFreeAirM3Min: 10, setPressureKpa: 1000, unloadPressureKpa: 1140 }

function makeRequest(airLineMm: number, outletsMm: number[]): CheckRequest {
  return makeCheckRequest({
    compressor,
    airLine: [hose(airLineMm)],
    outlets: outletsMm.map(outlet),
    targetNozzlePressureKpa: 500,
  })
}

const says = (request: CheckRequest, place: 'air-line' | 'outlet-line') =>
  hosesLeaveMargin(request, answerCheck(request), place)
const margin = (request: CheckRequest) => answerCheck(request).atTarget!.airMarginPct

describe('whether a hose changes the margin', () => {
  it('one outlet below set: no hose does', () => {
    const [wide, thin] = [makeRequest(32, [32]), makeRequest(25, [25])]
    expect([says(wide, 'air-line'), says(wide, 'outlet-line')]).toEqual([true, true])
    expect(margin(thin)).toBeCloseTo(margin(wide), 9)
  })

  it('two outlets: the air line does not, a hose of one of them does', () => {
    const [wide, thinAir, thinHose] = [
      makeRequest(38, [32, 32]),
      makeRequest(32, [32, 32]),
      makeRequest(38, [20, 32]),
    ]
    expect([says(wide, 'air-line'), says(wide, 'outlet-line')]).toEqual([true, false])
    expect(margin(thinAir)).toBeCloseTo(margin(wide), 9)
    expect(margin(thinHose)).toBeLessThan(margin(wide) - 0.5)
  })

  it('above set, or by a curve, every hose does', () => {
    const above = { ...makeRequest(32, [32]), compressor: { ...compressor, setPressureKpa: 450 } }
    const curve = [
      { pressureKpa: 300, freeAirM3Min: 10 },
      { pressureKpa: 900, freeAirM3Min: 9 },
    ]
    const { ratedFreeAirM3Min: _, ...rest } = compressor
    const byCurve = { ...makeRequest(32, [32]), compressor: { ...rest, curve } }
    expect([says(above, 'air-line'), says(byCurve, 'air-line')]).toEqual([false, false])
  })
})
