import type { CheckAnswer, CheckRequest } from '../contracts/check.ts'

/**
 * Is this a check whose air margin and limit bore do not depend on the hoses?
 *
 * With a flat nameplate and the compressor under its set pressure at the target, a thin hose only raises the pressure
 * at the compressor; as much air is delivered there as anywhere below set. With several outlets that holds of the air
 * line alone: a thin hose of one outlet makes the others run above the target, and so draw more.
 *
 * Checked  tests/shared/check/hosesLeaveMargin.test.ts
 */
export function hosesLeaveMargin(
  { compressor, outlets }: CheckRequest,
  { atTarget }: CheckAnswer,
  place: 'air-line' | 'outlet-line',
): boolean {
  return (
    compressor.curve === undefined &&
    (place === 'air-line' || outlets.length === 1) &&
    atTarget !== null &&
    atTarget.requiredCompressorPressureKpa < compressor.setPressureKpa
  )
}
