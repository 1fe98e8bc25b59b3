/** Decimals of a percent: whole ones, tenths below 10, so that 4.6 is not read as 5. */
export function percentDigits(percent: number): number {
  return Math.abs(percent) < 9.95 ? 1 : 0
}
