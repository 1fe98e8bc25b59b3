import { bitsOf } from '../catalogue/drillBits.ts'
import type { Bit } from '../catalogue/drillBits.ts'
import { nearestNumberAtOrUnder } from '../catalogue/nozzleNumbers.ts'
import type { BitSetName, OutletAnswer } from '../contracts/check.ts'
import { BORE_TOLERANCE_MM } from '../units/quantities.ts'
import { bitsFor } from './answerCheck.ts'

/** Why no bit helps a nozzle that is over its limit when new. */
export type OverLimit = 'compressor' | 'rig' | 'other-nozzles' | 'own-line'

export type BitAdvice =
  | { isOver: true; because: OverLimit; fittingNumber: number | null; hasReason: boolean }
  | {
      isOver: false
      orderBit: Bit | null
      /** the largest bit at or under the limit, which a new nozzle already passes where there is no order bit */
      passedBit: Bit | null
      noGoBit: Bit | null
    }

const airReasons = ['short-of-air', 'above-unload', 'air-taken-first']

/**
 * What the bits in the box can tell of one nozzle.
 *
 * Inputs   the check's answer for this outlet · new bore mm · the set in the box · how many outlets the rig has
 * Result   the two bits; or, where a new nozzle is over the limit already, what is to blame and which number fits
 * Checked  tests/shared/check/adviseBits.test.ts
 */
export function adviseBits(
  { limitBoreMm, limitedBy, reason }: OutletAnswer,
  newBoreMm: number,
  set: BitSetName,
  outletCount: number,
): BitAdvice {
  if (limitBoreMm !== null && limitBoreMm >= newBoreMm) {
    const passedBit =
      bitsOf(set).findLast(({ mm }) => mm <= Math.min(limitBoreMm, newBoreMm) + BORE_TOLERANCE_MM) ?? null
    return { isOver: false, passedBit, ...bitsFor(limitBoreMm, newBoreMm, set) }
  }
  if (limitBoreMm === null) {
    const isAir = airReasons.includes(reason ?? '') && outletCount === 1
    return {
      isOver: true,
      because: isAir ? 'compressor' : 'rig',
      fittingNumber: null,
      hasReason: reason !== null,
    }
  }
  // a limit a hair under the new bore has its number: that nozzle is the one that does not hold
  const fittingNumber = nearestNumberAtOrUnder(Math.min(limitBoreMm, newBoreMm - 2 * BORE_TOLERANCE_MM))
  const byAir = outletCount === 1 ? 'compressor' : 'other-nozzles'
  const because = limitedBy === 'line' ? 'own-line' : limitedBy === 'air' ? byAir : 'rig'
  return { isOver: true, because, fittingNumber, hasReason: false }
}
