/**
 * Moves positions apart until neighbours keep a gap, each as little as may be, within 0 and a most.
 *
 * Result   the new positions, in the order given
 */
export function spreadApart(positions: readonly number[], gap: number, most: number): number[] {
  const order = positions.map((at, index) => ({ at, index })).sort((a, b) => a.at - b.at)
  let least = 0
  for (const label of order) {
    label.at = Math.max(label.at, least)
    least = label.at + gap
  }
  let highest = most
  for (const label of order.reverse()) {
    label.at = Math.min(label.at, highest)
    highest = label.at - gap
  }
  const spread: number[] = []
  for (const { at, index } of order) spread[index] = at
  return spread
}
