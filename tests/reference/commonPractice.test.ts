import { describe, expect, it } from 'vitest'
import { checkPressure, nozzleMassFlow } from '#shared/airflow/index.ts'
import type { Rig } from '#shared/airflow/index.ts'
import { parseQuantity } from '#shared/units/parse.ts'
import { KPA_PER_PSI, M3_PER_CUBIC_FOOT } from '#shared/units/quantities.ts'

/* Common practice of the trade, no source. */
const inch = 0.0254
const psi = (value: number) => 101325 + value * KPA_PER_PSI * 1000
const site = { altitudeM: 0, airTemperatureK: 293.15 }
const bore = (number: number) => (number * inch) / 16

/** 185 cfm set at 100 psi, short 1 1/4 in hoses with their couplings and a pot between. */
function smallRig(number: number): Rig {
  const hose = (lengthM: number) => ({ insideDiameterM: 1.25 * inch, lengthM, lossK: 2 })
  return {
    compressor: {
      freeAir: (185 * M3_PER_CUBIC_FOOT) / 60,
      setPressurePa: psi(100),
      unloadPressurePa: psi(120),
    },
    airLine: [hose(7.62)],
    outlets: [
      {
        line: [
          { name: 'pot', insideDiameterM: 1.25 * inch, lossK: 8 },
          { ...hose(7.62), mediaFactor: 1.3 },
        ],
        nozzle: { boreM: bore(number) },
      },
    ],
    airTakenFirst: [],
  }
}

describe('common practice', () => {
  it('a No. 5 worn by one sixteenth draws as a No. 6', () => {
    const draw = (typed: string, wornMm = 0) => {
      const read = parseQuantity('bore', typed, { system: 'us' })
      return nozzleMassFlow({ boreM: ((read.ok ? read.value : NaN) + wornMm) / 1000 }, psi(100), site)
    }
    expect(draw('No. 5', 25.4 / 16)).toBeCloseTo(draw('#6'), 12)
    expect(draw('#6')).toBeCloseTo(draw('3/8 in'), 12)
    // and that is 44 % more: bore by the square
    expect(draw('No. 6') / draw('No. 5')).toBeCloseTo(1.44, 10)
  })

  it('a 185 cfm compressor with a hose on it does not hold 50 psi at a No. 8', () => {
    const check = checkPressure(smallRig(8), site, psi(50))
    expect(check.verdict).toBe('falls-short')
    expect(check.reason).toBe('short-of-air')
  })

  it('185 cfm set at 100 psi on short 1 1/4 in hoses holds 100 psi at a No. 4', () => {
    const check = checkPressure(smallRig(4), site, psi(100))
    expect(check.verdict).toBe('holds')
    expect(check.reason).toBeNull()
    expect(check.operatingPoint!.outlets[0]!.nozzlePressurePa).toBeGreaterThan(psi(100))
  })
})
