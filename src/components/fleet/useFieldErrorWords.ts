import { recordLimits } from '#shared/contracts/limits.ts'
import type { FieldError, FieldErrorCode } from '#shared/contracts/problems.ts'
import { useWords } from '../../composables/useWords.ts'

/** The codes that have a sentence of their own on the fleet's screens. */
const keys: Partial<Record<FieldErrorCode, string>> = {
  required: 'kit.errors.required',
  'name-in-use': 'kit.errors.nameInUse',
  'not-a-number': 'kit.errors.notANumber',
  'wrong-type': 'kit.errors.notANumber',
  'too-small': 'kit.errors.tooSmall',
  'too-big': 'kit.errors.tooBig',
  'too-long': 'kit.errors.tooLong',
  'too-few': 'kit.errors.tooFew',
  'too-many': 'kit.errors.tooMany',
  'not-a-choice': 'kit.errors.notAChoice',
  'unknown-reference': 'kit.errors.unknownReference',
  'unknown-column': 'kit.errors.unknownColumn',
  'unload-too-near-set': 'kit.errors.unloadTooNear',
  'curve-pressure-not-rising': 'kit.errors.curvePressure',
  'curve-free-air-rising': 'kit.errors.curveAir',
  'bore-now-under-new': 'kit.errors.boreUnderNew',
  'number-and-bore-differ': 'kit.errors.numberAndBore',
  'measured-in-part': 'kit.errors.measuredInPart',
  'dates-reversed': 'kit.errors.datesReversed',
  'not-a-time-zone': 'kit.errors.notATimeZone',
}

/** What is wrong with a field, in the person's language. */
export function useFieldErrorWords() {
  const { t } = useWords()
  return ({ code }: Pick<FieldError, 'code'>) =>
    t(keys[code] ?? 'kit.errors.other', { most: recordLimits.name })
}
