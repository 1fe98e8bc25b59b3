import { KG_PER_POUND, KPA_PER_PSI, M3_PER_CUBIC_FOOT, MM_PER_INCH } from '#shared/units/quantities.ts'
import type { Sourced } from './source.ts'

export const SAND_FLOW_SOURCE: Sourced = {
  source: 'default tables of California air-district permit handbooks for abrasive blasting',
  status: 'from memory',
}

const PRESSURES_PSI = [30, 40, 50, 60, 70, 80, 90, 100] as const
/** Bore in inches, then silica sand in lb/h at each pressure. From memory, not confirmed: an editable default. */
const SAND_LB_PER_H: readonly (readonly [number, readonly number[]])[] = [
  [1 / 8, [28, 35, 42, 49, 55, 63, 70, 77]],
  [3 / 16, [65, 80, 94, 107, 122, 135, 149, 165]],
  [1 / 4, [109, 138, 168, 195, 221, 255, 280, 309]],
  [5 / 16, [205, 247, 292, 354, 377, 420, 462, 507]],
  [3 / 8, [285, 355, 417, 477, 540, 600, 657, 720]],
  [7 / 16, [385, 472, 560, 645, 755, 820, 905, 940]],
  [1 / 2, [503, 615, 725, 835, 945, 1050, 1160, 1265]],
  [5 / 8, [820, 990, 1170, 1336, 1510, 1680, 1850, 2030]],
  [3 / 4, [1140, 1420, 1670, 1915, 2160, 2400, 2630, 2880]],
  [1, [2030, 2460, 2900, 3340, 3780, 4200, 4640, 5060]],
]
/** the sand of the table: the middle of 90 to 100 lb/ft³ */
const SAND_KG_M3 = (95 * KG_PER_POUND) / M3_PER_CUBIC_FOOT
const SEA_LEVEL_PSI = 101.325 / KPA_PER_PSI

/**
 * Media through a blast nozzle, an editable default.
 *
 *   ṁ = sand(bore, pressure) · ρ / ρ_sand        kg/h
 *
 * Inputs   bore mm · nozzle pressure kPa gauge · ρ bulk density kg/m³, ρ_sand 95 lb/ft³
 * Valid    1/8 to 1 in and 30 to 100 psi: between grid points linear in pressure, a power of the bore between bores
 * Beyond   proportional to the bore squared past the smallest and largest bore, to absolute pressure (sea level)
 *          past the lowest and highest pressure; nothing at no pressure
 * Ignores  the metering valve: a person sets what really flows
 * Source   as SAND_FLOW_SOURCE, from memory        Checked  tests/shared/catalogue/sandFlow.test.ts
 */
export function mediaFlowKgPerH(input: {
  boreMm: number
  nozzleKpaGauge: number
  bulkDensityKgM3: number
}): number {
  const psi = input.nozzleKpaGauge / KPA_PER_PSI
  const inches = input.boreMm / MM_PER_INCH
  if (!(psi > 0) || !(inches > 0)) return 0
  return sandLbPerH(inches, psi) * KG_PER_POUND * (input.bulkDensityKgM3 / SAND_KG_M3)
}

function sandLbPerH(inches: number, psi: number): number {
  const bores = SAND_LB_PER_H.map(([bore]) => bore)
  const [below, above, share] = bracket(bores.map(Math.log), Math.log(inches))
  const low = rowAt(below, psi)
  const high = rowAt(above, psi)
  const smallest = bores[0] as number
  const largest = bores[bores.length - 1] as number
  const beyond = inches / Math.min(largest, Math.max(smallest, inches))
  return low * (high / low) ** share * beyond ** 2
}

/** The row of one bore at a pressure. */
function rowAt(index: number, psi: number): number {
  const flows = (SAND_LB_PER_H[index] as (typeof SAND_LB_PER_H)[number])[1]
  const inside = Math.min(100, Math.max(30, psi))
  const [below, above, share] = bracket(PRESSURES_PSI, inside)
  const low = flows[below] as number
  const high = flows[above] as number
  return ((low + share * (high - low)) * (psi + SEA_LEVEL_PSI)) / (inside + SEA_LEVEL_PSI)
}

/** The grid points on either side of a value, and how far it is from the first to the second, 0 to 1. */
function bracket(grid: readonly number[], value: number): [number, number, number] {
  const last = grid.length - 1
  const above = Math.min(
    last,
    Math.max(
      1,
      grid.findIndex((point) => point >= value),
    ),
  )
  const over = value > (grid[last] as number) ? last : above
  const from = grid[over - 1] as number
  const to = grid[over] as number
  return [over - 1, over, Math.min(1, Math.max(0, (value - from) / (to - from)))]
}
