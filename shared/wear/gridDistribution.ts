/**
 * A distribution of x = ln w (w in mm per equivalent hour) on a grid that is fine where the distribution is. Each cell
 * has its density at the five points of Gauss and Lobatto, and so a polynomial of the fourth degree between them.
 */
export interface GridDistribution {
  /** edges of the cells, one more than there are cells */
  edges: Float64Array
  /** probability below each edge */
  cumulative: Float64Array
  /** five coefficients a cell, of the density in t from −1 to 1 */
  coefficients: Float64Array
  /** the points of the grid with their probabilities: sums over them are integrals over the distribution */
  points: { x: number; weight: number }[]
}

/** the inner points of a cell, in t from −1 to 1 */
export const inner = Math.sqrt(3 / 7)
const endWeight = 1 / 10
/** the inner points of a cell, in t from −1 to 1 */
export const innerWeight = 49 / 90
const middleWeight = 32 / 45

export interface Cell {
  a: number
  b: number
  /** log density at a, −inner, the middle, +inner, b; the inner ones NaN until they are needed */
  atA: number
  atLow: number
  atMiddle: number
  atHigh: number
  atB: number
  isNegligible: boolean
}

/** Densities at the cells' points become a distribution that sums to 1. */
export function distribute(cells: readonly Cell[]): GridDistribution {
  const edges = new Float64Array(cells.length + 1)
  const cumulative = new Float64Array(cells.length + 1)
  const coefficients = new Float64Array(5 * cells.length)
  const points: { x: number; weight: number }[] = []
  const addPoint = (x: number, weight: number) => {
    const previous = points.at(-1)
    if (previous?.x === x) previous.weight += weight
    else if (weight > 0) points.push({ x, weight })
  }
  let total = 0
  cells.forEach(({ a, b, atA, atLow, atMiddle, atHigh, atB }, i) => {
    const half = (b - a) / 2
    edges[i] = a
    edges[i + 1] = b
    addPoint(a, half * endWeight * atA)
    addPoint(a + half * (1 - inner), half * innerWeight * atLow)
    addPoint(a + half, half * middleWeight * atMiddle)
    addPoint(a + half * (1 + inner), half * innerWeight * atHigh)
    addPoint(b, half * endWeight * atB)
    total += half * (endWeight * (atA + atB) + innerWeight * (atLow + atHigh) + middleWeight * atMiddle)
    cumulative[i + 1] = total
    coefficients.set(quarticThrough(atA, atLow, atMiddle, atHigh, atB), 5 * i)
  })
  for (let i = 0; i < cumulative.length; i++) cumulative[i]! /= total
  for (let i = 0; i < coefficients.length; i++) coefficients[i]! /= total
  for (const point of points) point.weight /= total
  return { edges, cumulative, coefficients, points }
}

/** Coefficients in t of the polynomial through the values at −1, −inner, 0, inner and 1. */
function quarticThrough(atA: number, atLow: number, atMiddle: number, atHigh: number, atB: number): number[] {
  const square = inner * inner
  const evenEnd = (atA + atB) / 2 - atMiddle
  const evenInner = ((atLow + atHigh) / 2 - atMiddle) / square
  const oddEnd = (atB - atA) / 2
  const oddInner = (atHigh - atLow) / 2 / inner
  const fourth = (evenEnd - evenInner) / (1 - square)
  const third = (oddEnd - oddInner) / (1 - square)
  return [atMiddle, oddEnd - third, evenEnd - fourth, third, fourth]
}

/** The cell that holds x; x lies between the ends. */
function findCell({ edges }: GridDistribution, x: number): number {
  let low = 0
  let high = edges.length - 1
  while (high - low > 1) {
    const middle = (low + high) >> 1
    if (edges[middle]! <= x) low = middle
    else high = middle
  }
  return low
}

function quarticAt(c: ArrayLike<number>, i: number, t: number): number {
  return c[i]! + t * (c[i + 1]! + t * (c[i + 2]! + t * (c[i + 3]! + t * c[i + 4]!)))
}

function cumulativeWithin(grid: GridDistribution, cell: number, t: number): number {
  const { edges, cumulative, coefficients: c } = grid
  const i = 5 * cell
  const half = (edges[cell + 1]! - edges[cell]!) / 2
  const square = t * t
  const cubic = square * t
  return (
    cumulative[cell]! +
    half *
      (c[i]! * (t + 1) +
        (c[i + 1]! * (square - 1)) / 2 +
        (c[i + 2]! * (cubic + 1)) / 3 +
        (c[i + 3]! * (square * square - 1)) / 4 +
        (c[i + 4]! * (cubic * square + 1)) / 5)
  )
}

/** Probability of a value up to x. */
export function probabilityBelow(grid: GridDistribution, x: number): number {
  const { edges } = grid
  if (x <= edges[0]!) return 0
  if (x >= edges.at(-1)!) return 1
  const cell = findCell(grid, x)
  const t = (2 * (x - edges[cell]!)) / (edges[cell + 1]! - edges[cell]!) - 1
  return cumulativeWithin(grid, cell, t)
}

/** The x below which so much of the probability lies. */
export function quantileOf(grid: GridDistribution, share: number): number {
  const { edges, cumulative } = grid
  let cell = 0
  while (cell < edges.length - 2 && cumulative[cell + 1]! < share) cell++
  const half = (edges[cell + 1]! - edges[cell]!) / 2
  let low = -1
  let high = 1
  let t = 0
  for (let i = 0; i < 60 && high - low > 1e-14; i++) {
    const excess = cumulativeWithin(grid, cell, t) - share
    if (excess > 0) high = t
    else low = t
    const next = t - excess / (half * quarticAt(grid.coefficients, 5 * cell, t))
    if (Math.abs(next - t) < 1e-14) break
    t = next > low && next < high ? next : (low + high) / 2
  }
  return edges[cell]! + half * (t + 1)
}

const panelPoints = [-Math.sqrt(0.6), 0, Math.sqrt(0.6)] as const
const panelWeights = [5 / 18, 8 / 18, 5 / 18] as const
const negligibleWeight = 1e-8

/**
 * ∫ density · value over x from low to high, Gauss and Legendre's three points a panel.
 *
 * The value is smooth over `scale`: no panel is wider than two, and cells that lie within one share a polynomial of the
 * fourth degree in place of the value itself.
 */
export function integrateOver(
  grid: GridDistribution,
  low: number,
  high: number,
  scale: number,
  value: (x: number) => number,
): number {
  const { edges, cumulative } = grid
  const cellCount = edges.length - 1
  const from = Math.max(low, edges[0]!)
  const to = Math.min(high, edges[cellCount]!)
  if (!(to > from)) return 0
  const isNegligible = (cell: number) => cumulative[cell + 1]! - cumulative[cell]! < negligibleWeight
  let sum = 0
  let cell = findCell(grid, from)
  while (cell < cellCount && edges[cell]! < to) {
    if (isNegligible(cell)) {
      cell++
      continue
    }
    const start = Math.max(edges[cell]!, from)
    let next = cell + 1
    while (next < cellCount && edges[next + 1]! <= Math.min(to, start + scale) && !isNegligible(next)) next++
    if (next > cell + 1) {
      sum += integrateShared(grid, cell, next, start, value)
    } else {
      const end = Math.min(edges[next]!, to)
      const count = Math.min(64, Math.max(1, Math.ceil((end - start) / (2 * scale))))
      const width = (end - start) / count
      for (let panel = 0; panel < count; panel++) {
        sum += integratePanel(grid, cell, start + panel * width, width, value)
      }
    }
    cell = next
  }
  return sum
}

function integratePanel(
  { edges, coefficients }: GridDistribution,
  cell: number,
  start: number,
  width: number,
  value: (x: number) => number,
): number {
  const a = edges[cell]!
  const b = edges[cell + 1]!
  let sum = 0
  for (let i = 0; i < 3; i++) {
    const x = start + (width / 2) * (1 + panelPoints[i]!)
    sum +=
      panelWeights[i]! * width * quarticAt(coefficients, 5 * cell, (2 * (x - a)) / (b - a) - 1) * value(x)
  }
  return sum
}

function integrateShared(
  grid: GridDistribution,
  first: number,
  next: number,
  start: number,
  value: (x: number) => number,
): number {
  const { edges } = grid
  const half = (edges[next]! - start) / 2
  const middle = start + half
  const quartic = quarticThrough(
    value(start),
    value(middle - half * inner),
    value(middle),
    value(middle + half * inner),
    value(edges[next]!),
  )
  const shared = (x: number) => quarticAt(quartic, 0, (x - middle) / half)
  let sum = 0
  for (let cell = first; cell < next; cell++) {
    const a = Math.max(edges[cell]!, start)
    sum += integratePanel(grid, cell, a, edges[cell + 1]! - a, shared)
  }
  return sum
}
