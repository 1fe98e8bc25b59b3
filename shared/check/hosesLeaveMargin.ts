import type { CheckAnswer, CheckRequest } from '../contracts/check.ts'

/**
 * Is this a check whose air margin and limit bore do not depend on the hoses?
 *
 * With a flat nameplate and the compressor under its set pressure at the target, a thin hose only raises the pressure
 * at the compressor; as much air is delivered there as anywhere below set.
 */
export function hosesLeaveMargin({ compressor }: CheckRequest, { atTarget }: CheckAnswer): boolean {
  return (
    compressor.curve === undefined &&
    atTarget !== null &&
    atTarget.requiredCompressorPressureKpa < compressor.setPressureKpa
  )
}
