import { describe, expect, it } from 'vitest'
import { listAirUseRows, tabulateAirUse } from '#shared/airflow/airUse.ts'
import { checkPressure, nozzleMassFlow, resolveAmbient, withBore } from '#shared/airflow/index.ts'
import { prepareRig } from '#shared/airflow/preparedRig.ts'
import type { Rig, Site } from '#shared/airflow/rig.ts'

const psi = 6894.757293168361
const cfm = 0.028316846592 / 60
const inch = 0.0254
const site: Site = { altitudeM: 300, airTemperatureK: 300, relativeHumidity: 0.4 }
const ambientPa = resolveAmbient(site).pressurePa

function makeRig(outletCount = 1): Rig {
  return {
    compressor: {
      freeAir: 375 * outletCount * cfm,
      setPressurePa: ambientPa + 110 * psi,
      unloadPressurePa: ambientPa + 130 * psi,
      lineTemperatureRiseK: 10,
    },
    airLine: [{ name: 'air-line', insideDiameterM: 1.5 * inch, lengthM: 8, lossK: 2 }],
    outlets: Array.from({ length: outletCount }, (_, index) => ({
      line: [{ name: 'whip', insideDiameterM: inch, lengthM: 3 + index, lossK: 1, mediaFactor: 1.3 }],
      nozzle: { boreM: (6 * inch) / 16 },
    })),
    airTakenFirst: [{ name: 'hood', freeAirM3S: 15 * cfm }],
  }
}

const numbersOf = (boreM: number) => listAirUseRows(boreM).map((row) => row.number)

describe('the rows of an air use table', () => {
  it('are the numbers around a new No. 6, which is the bore now', () => {
    expect(numbersOf((6 * inch) / 16)).toEqual([4, 5, 6, 7, 8, 9])
    expect(listAirUseRows((6 * inch) / 16).filter((row) => row.isNow)).toHaveLength(1)
  })
  it('take in a bore between two numbers where it belongs', () => {
    expect(numbersOf((25 * inch) / 64)).toEqual([4, 5, 6, null, 7, 8, 9])
  })
  it('stay within No. 3 and No. 12', () => {
    expect(numbersOf((2 * inch) / 16)).toEqual([null, 3, 4, 5, 6, 7, 8])
    expect(numbersOf(inch)).toEqual([7, 8, 9, 10, 11, 12, null])
  })
})

describe('the cells of an air use table', () => {
  const targets = [60 * psi, 90 * psi, 120 * psi, 140 * psi]
  const bores = [4, 6, 7.3, 9].map((sixteenths) => (sixteenths * inch) / 16)

  it.each([1, 2])('say of %i outlets what a pressure check of that bore and pressure says', (outlets) => {
    const rig = makeRig(outlets)
    const cells = tabulateAirUse(prepareRig(rig, site), 0, bores, targets)
    const verdicts = new Set<string>()
    bores.forEach((boreM, row) =>
      targets.forEach((target, column) => {
        const expected = checkPressure(withBore(rig, 0, boreM), site, ambientPa + target)
        const cell = cells[row]![column]!
        verdicts.add(cell.check.verdict)
        expect(cell.check.verdict).toBe(expected.verdict)
        expect(cell.check.reason).toBe(expected.reason)
        const { dryAirDensity } = resolveAmbient(site)
        expect(cell.requiredFreeAirM3S).toBeCloseTo(expected.atTarget!.requiredMassFlow / dryAirDensity, 9)
      }),
    )
    expect(verdicts).toContain('holds')
    expect(verdicts).toContain('falls-short')
  })

  it('of one nozzle are its own flow and the hood’s air, whatever the hoses', () => {
    const rig = makeRig()
    const cells = tabulateAirUse(prepareRig(rig, site), 0, bores, targets)
    const warm: Site = { ...site, airTemperatureK: 310, barometerPa: ambientPa }
    bores.forEach((boreM, row) => {
      const flow = nozzleMassFlow({ boreM }, ambientPa + 90 * psi, warm)
      const expected = flow / resolveAmbient(site).dryAirDensity + 15 * cfm
      expect(cells[row]![1]!.requiredFreeAirM3S).toBeCloseTo(expected, 9)
    })
  })

  it('have no figure where the hose is too narrow for the nozzle', () => {
    const rig = makeRig()
    // 0.81 · 0.6847 · (d/D)² passes 1 at d = 1.343 D: the flow is sonic in the hose itself
    const [[cell] = []] = tabulateAirUse(prepareRig(rig, site), 0, [1.35 * inch], [90 * psi])
    expect(cell?.requiredFreeAirM3S).toBeNull()
    expect(cell?.check.reason).toBe('choked:whip')
  })
})
