import { checkPrepared } from './pressureCheck.ts'
import type { PressureCheck } from './pressureCheck.ts'
import { withPreparedBore } from './preparedBore.ts'
import type { PreparedRig } from './preparedRig.ts'

export interface AirUseRow {
  /** bore in sixteenths of an inch; null for a bore between two numbers */
  number: number | null
  boreM: number
  /** is this the bore the nozzle has now */
  isNow: boolean
}

export interface AirUseCell {
  targetGaugePa: number
  check: PressureCheck
  /** m³/s, air taken first and every other outlet included; null where the target cannot be marched to */
  requiredFreeAirM3S: number | null
}

const sixteenthM = 0.0254 / 16
const sameBoreM = 0.5e-6
const smallestNumber = 3
const largestNumber = 12
const numbersBelow = 2
const numbersAbove = 3

/**
 * The rows of an air use table: the nozzle numbers around a bore, and the bore itself where it is none of them.
 *
 * Inputs   bore now m
 * Result   six numbers within No. 3 to No. 12, rising; with a row for the bore now at most seven
 * Checked  tests/shared/airflow/airUse.test.ts
 */
export function listAirUseRows(boreNowM: number): AirUseRow[] {
  const count = numbersBelow + 1 + numbersAbove
  const under = Math.floor((boreNowM + sameBoreM) / sixteenthM)
  const first = Math.min(largestNumber + 1 - count, Math.max(smallestNumber, under - numbersBelow))
  const rows: AirUseRow[] = Array.from({ length: count }, (_, step) => {
    const boreM = (first + step) * sixteenthM
    return { number: first + step, boreM, isNow: Math.abs(boreM - boreNowM) <= sameBoreM }
  })
  if (rows.some((row) => row.isNow)) return rows
  return [...rows, { number: null, boreM: boreNowM, isNow: true }].sort((a, b) => a.boreM - b.boreM)
}

/**
 * What a rig at its site needs for each bore of one outlet at each target, and whether it holds.
 *
 * Inputs   rig, prepared · which outlet changes its bore · bores m · targets Pa gauge, positive
 * Result   one row a bore, one cell a target, each the full check of that pair
 * Checked  tests/shared/airflow/airUse.test.ts
 */
export function tabulateAirUse(
  rig: PreparedRig,
  outletIndex: number,
  boresM: readonly number[],
  targetsGaugePa: readonly number[],
): AirUseCell[][] {
  return boresM.map((boreM) => {
    const trial = withPreparedBore(rig, outletIndex, boreM)
    return targetsGaugePa.map((targetGaugePa) => {
      const check = checkPrepared(trial, targetGaugePa)
      const required = check.atTarget?.requiredMassFlow
      return {
        targetGaugePa,
        check,
        requiredFreeAirM3S: required === undefined ? null : required / rig.ambient.dryAirDensity,
      }
    })
  })
}
