import { distribute, inner } from './gridDistribution.ts'
import type { Cell, GridDistribution } from './gridDistribution.ts'

/** e^−30 of the highest is left out. */
const depth = 30
const reachSigmas = 9
const mostReachSigmas = 200
/** of ln w: a rate stays a number that can be divided by */
const mostReach = 250
const firstCells = 20
const mostSeeds = 128
const mostCells = 1500
const mostHalvings = 60
/** of the logarithm, over half a cell, and off the parabola through its ends and middle */
const mostStep = 1.2
const mostMisfit = 0.08

/**
 * Grid around a density of x that is known but for a factor.
 *
 * Cells are halved where the logarithm moves more than the polynomial can follow (`mostStep`, `mostMisfit`); what could not reach e^−30 of the highest is left alone. Both ends move out until
 * that holds there too. The work ends: at most 1,500 cells, 60 halvings.
 *
 * Inputs   logDensity finite at every x · middle and sigma of the prior · seeds: where narrow parts may hide
 * Result   probabilities to about 1e-6
 * Checked  tests/shared/wear/forecast.test.ts
 */
export function makeGrid(
  logDensity: (x: number) => number,
  middle: number,
  sigma: number,
  seeds: readonly number[],
): GridDistribution {
  const furthest = Math.min(mostReach, mostReachSigmas * sigma)
  const usable = seeds.filter((x) => Math.abs(x - middle) < furthest).sort((a, b) => a - b)
  const kept = thin(usable)
  let low = Math.min(middle - reachSigmas * sigma, (kept[0] ?? Infinity) - sigma)
  let high = Math.max(middle + reachSigmas * sigma, (kept.at(-1) ?? -Infinity) + sigma)
  let top = Math.max(logDensity(middle), ...kept.map(logDensity))
  const stretch = (from: number, by: number): number => {
    let x = from
    for (;;) {
      const value = logDensity(x)
      top = Math.max(top, value)
      if (value < top - depth || Math.abs(x - middle) >= furthest) return x
      kept.push(x)
      x += by
    }
  }
  low = stretch(low, -2 * sigma)
  high = stretch(high, 2 * sigma)
  const step = (high - low) / firstCells
  const starts = [...kept, ...Array.from({ length: firstCells + 1 }, (_, i) => low + i * step)]
  const cells = refine(logDensity, starts, top)
  return distribute(cells)
}

function thin(sorted: readonly number[]): number[] {
  if (sorted.length <= mostSeeds) return [...sorted]
  return Array.from({ length: mostSeeds }, (_, i) => {
    return sorted[Math.round((i * (sorted.length - 1)) / (mostSeeds - 1))]!
  })
}

function refine(logDensity: (x: number) => number, starts: number[], startTop: number): Cell[] {
  let top = startTop
  const makeCell = (a: number, b: number, atA: number, atB: number): Cell => {
    const atMiddle = logDensity((a + b) / 2)
    top = Math.max(top, atMiddle)
    return { a, b, atA, atLow: NaN, atMiddle, atHigh: NaN, atB, isNegligible: false }
  }
  const sorted = starts.sort((a, b) => a - b).filter((x, i, all) => i === 0 || x - all[i - 1]! > 1e-9)
  const values = sorted.map(logDensity)
  top = Math.max(top, ...values)
  let cells = sorted.slice(1).map((b, i) => makeCell(sorted[i]!, b, values[i]!, values[i + 1]!))
  for (let round = 0; round < mostHalvings; round++) {
    const next: Cell[] = []
    for (const cell of cells) {
      const isFull = next.length + cells.length > 2 * mostCells
      if (isFull || !needsHalving(cell, top, logDensity)) {
        next.push(cell)
        continue
      }
      const middle = (cell.a + cell.b) / 2
      next.push(makeCell(cell.a, middle, cell.atA, cell.atMiddle))
      next.push(makeCell(middle, cell.b, cell.atMiddle, cell.atB))
    }
    if (next.length === cells.length) break
    cells = next
  }
  for (const cell of cells) {
    cell.isNegligible = highestPossible(cell) < top - depth
    if (!cell.isNegligible) fillCell(cell, logDensity)
  }
  return scaleCells(cells, top)
}

/** The highest value in the cell, and as much above it as the cell moves. */
function highestPossible({ atA, atMiddle, atB }: Cell): number {
  return Math.max(atA, atMiddle, atB) + Math.max(Math.abs(atMiddle - atA), Math.abs(atB - atMiddle))
}

function fillCell(cell: Cell, logDensity: (x: number) => number) {
  if (!Number.isNaN(cell.atLow)) return
  const middle = (cell.a + cell.b) / 2
  const offset = (inner * (cell.b - cell.a)) / 2
  cell.atLow = logDensity(middle - offset)
  cell.atHigh = logDensity(middle + offset)
}

function needsHalving(cell: Cell, top: number, logDensity: (x: number) => number): boolean {
  if (cell.b - cell.a < 1e-12 * Math.max(1, Math.abs(cell.a)) || highestPossible(cell) < top - depth)
    return false
  const { atA, atMiddle, atB } = cell
  if (Math.abs(atMiddle - atA) > mostStep || Math.abs(atB - atMiddle) > mostStep) return true
  fillCell(cell, logDensity)
  const bend = ((atA + atB) / 2 - atMiddle) * inner * inner
  const lean = ((atB - atA) / 2) * inner
  return (
    Math.abs(cell.atLow - (atMiddle - lean + bend)) > mostMisfit ||
    Math.abs(cell.atHigh - (atMiddle + lean + bend)) > mostMisfit
  )
}

/** Logarithms become densities, the highest 1. */
function scaleCells(cells: readonly Cell[], top: number): Cell[] {
  const density = (value: number) => Math.exp(value - top)
  const scaled = cells.map((cell) =>
    cell.isNegligible
      ? { ...cell, atA: 0, atLow: 0, atMiddle: 0, atHigh: 0, atB: 0 }
      : {
          ...cell,
          atA: density(cell.atA),
          atLow: density(cell.atLow),
          atMiddle: density(cell.atMiddle),
          atHigh: density(cell.atHigh),
          atB: density(cell.atB),
        },
  )
  const first = scaled.findIndex((cell) => !cell.isNegligible)
  const last = scaled.findLastIndex((cell) => !cell.isNegligible)
  return scaled.slice(first, last + 1)
}
