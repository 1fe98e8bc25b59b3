import { describe, expect, it } from 'vitest'
import { answerCheck } from '#shared/check/answerCheck.ts'
import { findRentalFit, rentalCompressors } from '#shared/check/fitOfCheck.ts'
import { questionOfCheck } from '#shared/check/rigOfCheck.ts'
import type { CheckRequest } from '#shared/contracts/check.ts'
import { makeCheckRequest } from '../../support/checkRequest.ts'

const cfm = 0.028316846592
const psi = 6.894757293168361
const fitOf = (request: CheckRequest) => findRentalFit(questionOfCheck(request))

/** The same rig behind a size class, asked the way anyone would ask it. */
function verdictWith(request: CheckRequest, ratedCfm: number, setPsi: number) {
  const compressor = {
    ratedFreeAirM3Min: ratedCfm * cfm,
    setPressureKpa: setPsi * psi,
    unloadPressureKpa: (setPsi + 20) * psi,
  }
  return answerCheck({ ...request, compressor }).verdict
}

describe('the smallest size class that fits', () => {
  const [outlet] = makeCheckRequest().outlets
  const request = makeCheckRequest({
    targetNozzlePressureKpa: 90 * psi,
    outlets: [{ ...outlet!, nozzle: { boreMm: 9.525 } }],
  })

  it('holds, and no smaller one does', () => {
    const fit = fitOf(request)!
    const at = rentalCompressors.indexOf(fit.candidate)
    const words = ({ ratedFreeAirM3Min, setPressureKpa }: (typeof rentalCompressors)[number]) =>
      [Math.round(ratedFreeAirM3Min / cfm), Math.round(setPressureKpa / psi)] as const
    expect(verdictWith(request, ...words(fit.candidate))).toBe('holds')
    expect(at).toBeGreaterThan(0)
    for (const smaller of rentalCompressors.slice(0, at)) {
      expect(verdictWith(request, ...words(smaller))).not.toBe('holds')
    }
  })
  it('is asked for by size first: 90 cfm at 150 psi comes before 185 cfm at 100 psi', () => {
    const words = rentalCompressors
      .slice(0, 4)
      .map(({ ratedFreeAirM3Min, setPressureKpa }) => [
        Math.round(ratedFreeAirM3Min / cfm),
        Math.round(setPressureKpa / psi),
      ])
    expect(words).toEqual([
      [90, 100],
      [90, 125],
      [90, 150],
      [185, 100],
    ])
  })
  it('ignores how worn the machine in the yard is', () => {
    const tired = { ...request, compressor: { ...request.compressor, conditionFactor: 0.5 } }
    expect(fitOf(tired)!.candidate).toEqual(fitOf(request)!.candidate)
  })
  it('says by how much a naturally aspirated engine would be short where the engine is not known', () => {
    const high = { ...request, site: { altitudeM: 2500, airTemperatureC: 20 } }
    expect(fitOf(high)!.naturalShortfall).toBeGreaterThan(0)
    const turbo = { ...high, compressor: { ...high.compressor, engine: 'turbo' as const } }
    expect(fitOf(turbo)!.naturalShortfall).toBe(0)
    expect(fitOf(request)!.naturalShortfall).toBe(0)
  })
  it('is none where a regulator stands in the way', () => {
    expect(fitOf({ ...request, outlets: [{ ...outlet!, regulatorKpa: 300 }] })).toBeNull()
  })
})
