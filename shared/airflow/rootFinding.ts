export interface RootSearch {
  /** residual, rising with x; NaN where x is closed, which only the high end of the range may be */
  evaluate: (x: number) => number
  /** the next guess after an open x, the high end included; anything outside is answered by bisection */
  propose: (x: number, residual: number) => number
  /** residual below zero (or x = 0) at low, zero or above (or closed) at high */
  low: number
  high: number
  guess: number
  /** the bracket ends at this part of x + offset */
  widthTolerance: number
  /** and the residual at this */
  residualTolerance: number
  /** a residual this small stops at once, as an exact zero does */
  zeroTolerance: number
  /** added to x when the width is judged: the ambient pressure where x is gauge */
  offset?: number
  /** the residual is known to rise at least this steeply, which closes the bracket from one side alone; absent 0 */
  leastSlope?: number
}

export interface Root {
  x: number
  residual: number
  evaluations: number
  /** false when the root lies in the closed part */
  isMet: boolean
  low: number
  high: number
}

const mostEvaluations = 200

/**
 * Safeguarded search for the root of a rising function.
 *
 * Guesses come from the caller, who knows the shape of the function; the bracket keeps every one of them honest. When
 * a guess moves less than the width allowed, it is pushed across the root, so that the bracket closes in one more
 * step. Three steps that neither halve the bracket nor leave a hundredth of the residual are followed by a bisection, and
 * from then on one is: guesses that were wrong so long know the function badly.
 *
 * Ends     bracket ≤ widthTolerance and residual ≤ residualTolerance, or residual ≤ zeroTolerance, or nothing left
 *          between the ends (the function jumps there: the root is the jump); never more than 200 evaluations
 * Result   the best x seen, and the bracket: both ends are x itself after an exact zero
 */
export function findRoot(search: RootSearch): Root {
  const { evaluate, propose, widthTolerance, residualTolerance, zeroTolerance } = search
  const offset = search.offset ?? 0
  const leastSlope = search.leastSlope ?? 0
  let { low, high } = search
  let isHighClosed = false
  let isHighTried = false
  let x = search.guess > low && search.guess <= high ? search.guess : (low + high) / 2
  let bestX = x
  let bestResidual = Infinity
  let checkedWidth = high - low
  let checkedResidual = Infinity
  let sinceHalved = 0
  let patience = 3
  let isPushed = false
  let evaluations = 0
  while (evaluations < mostEvaluations) {
    const residual = evaluate(x)
    evaluations++
    let next = NaN
    if (Number.isNaN(residual)) {
      high = x
      isHighTried = isHighClosed = true
    } else {
      if (Math.abs(residual) < Math.abs(bestResidual)) {
        bestX = x
        bestResidual = residual
      }
      if (Math.abs(residual) <= zeroTolerance) {
        low = high = x
        break
      }
      const farthest = leastSlope > 0 ? Math.abs(residual) / leastSlope : Infinity
      if (residual < 0) {
        low = x
        high = Math.min(high, x + farthest)
      } else {
        high = x
        low = Math.max(low, x - farthest)
        isHighTried = true
        isHighClosed = false
      }
      const allowed = widthTolerance * (high + offset)
      if (high - low <= allowed && Math.abs(bestResidual) <= residualTolerance) break
      next = propose(x, residual)
      isPushed = !isPushed && Math.abs(next - x) < 0.4 * allowed
      if (isPushed) next = residual < 0 ? x + 0.8 * allowed : x - 0.8 * allowed
    }
    const width = high - low
    const size = Math.abs(bestResidual)
    if (width <= checkedWidth / 2 || size <= checkedResidual / 100) {
      checkedWidth = Math.min(width, checkedWidth)
      checkedResidual = size
      sinceHalved = 0
    } else if (!isPushed && ++sinceHalved >= patience) {
      next = NaN
      patience = 1
    }
    if (!(next > low && (next < high || (next === high && !isHighTried)))) {
      next = low + width / 2
      sinceHalved = 0
      if (next <= low || next >= high) break
    }
    x = next
  }
  return {
    x: bestX,
    residual: bestResidual,
    evaluations,
    isMet: !isHighClosed || Math.abs(bestResidual) <= residualTolerance,
    low,
    high,
  }
}
