import { describe, expect, it } from 'vitest'
import { resolveAmbient, viscosity } from '#shared/airflow/ambient.ts'
import {
  cleanAirDischargeCoefficient,
  defaultDischargeCoefficient,
  nozzleMassFlow,
} from '#shared/airflow/index.ts'
import { criticalFlowFunction, criticalRatio } from '#shared/airflow/nozzle.ts'
import { KPA_PER_PSI, M3_PER_CUBIC_FOOT, MM_PER_INCH } from '#shared/units/quantities.ts'

const inch = MM_PER_INCH / 1000

describe('the constants of choked flow of air', () => {
  // Compressible-flow tables for γ = 1.4 at Mach 1 (NACA Report 1135, from memory): p*/p0 0.5283, ṁ√(R T0)/(A p0) 0.6847
  it('are those of the tables at Mach 1', () => {
    expect(criticalRatio).toBeCloseTo(0.5283, 4)
    expect(criticalFlowFunction).toBeCloseTo(0.6847, 4)
  })
})

describe('ISO 9300 beside the clean-air default', () => {
  // ISO 9300, toroidal throat, normally machined: Cd = 0.9959 − 2.72 Re^−0.5, 21 000 ≤ Re ≤ 3.2e7, ± 0.3 %
  it.each([4, 5, 6, 7, 8])(
    'a No. %i at 100 psi in clean air: the residual is stated, not tuned away',
    (number) => {
      const boreM = (number / 16) * inch
      const site = { altitudeM: 0, airTemperatureK: 293.15 }
      const pressure = 101325 + 100 * KPA_PER_PSI * 1000
      const massFlow = nozzleMassFlow(
        { boreM, dischargeCoefficient: cleanAirDischargeCoefficient },
        pressure,
        site,
      )
      const reynolds = (4 * massFlow) / (Math.PI * boreM * viscosity(site.airTemperatureK))
      expect(reynolds).toBeGreaterThan(21_000)
      expect(reynolds).toBeLessThan(3.2e7)
      const standard = 0.9959 - 2.72 / Math.sqrt(reynolds)
      const residual = (cleanAirDischargeCoefficient / standard - 1) * 100
      console.info(
        `ISO 9300 No. ${number}: Cd ${standard.toFixed(4)}, default 0.97 is ${residual.toFixed(2)} %`,
      )
      expect(residual).toBeLessThan(0)
      expect(residual).toBeGreaterThan(-3)
    },
  )
})

describe('blast nozzles in service, government figures', () => {
  // MIL-HDBK-1110 paragraph 10.3.2 (reissued in UFC 3-190-06, 2004): 1/4 to 5/8 in, 81 to 548 cfm at 100 psig; the
  // pairing of the two ends is read from that paragraph. The air's state is not printed: 14.7 psia and 70 °F, dry.
  it.each([
    { bore: '1/4', boreM: inch / 4, cfm: 81, sign: 1 },
    { bore: '5/8', boreM: (5 / 8) * inch, cfm: 548, sign: -1 },
  ])('$bore in at 100 psig: $cfm cfm, at the default coefficient', ({ bore, boreM, cfm, sign }) => {
    const barometerPa = 14.7 * KPA_PER_PSI * 1000
    const site = { altitudeM: 0, airTemperatureK: ((70 + 459.67) * 5) / 9, barometerPa }
    const massFlow = nozzleMassFlow({ boreM }, barometerPa + 100 * KPA_PER_PSI * 1000, site)
    const computed = ((massFlow / resolveAmbient(site).dryAirDensity) * 60) / M3_PER_CUBIC_FOOT
    const residual = (computed / cfm - 1) * 100
    console.info(
      `blast nozzle ${bore} in: ${computed.toFixed(1)} cfm against ${cfm}, ${residual.toFixed(2)} %`,
    )
    expect(defaultDischargeCoefficient).toBe(0.81)
    expect(Math.sign(residual)).toBe(sign)
    expect(Math.abs(residual)).toBeLessThan(5)
  })
})
