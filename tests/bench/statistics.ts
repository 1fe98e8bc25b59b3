export function quantile(values: readonly number[], share: number): number {
  const sorted = values.toSorted((a, b) => a - b)
  return sorted[Math.min(sorted.length - 1, Math.floor(sorted.length * share))] ?? NaN
}

export function describeTimes(milliseconds: readonly number[]): string {
  const text = (share: number) => `${quantile(milliseconds, share).toFixed(1)} ms`
  return `median ${text(0.5)}, 95 % within ${text(0.95)}`
}
