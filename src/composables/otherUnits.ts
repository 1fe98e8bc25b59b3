import { shallowRef } from 'vue'
import type { OtherUnit } from '#shared/form/readForm.ts'

/** The reader of rarer units (yd, kPa in other spellings): absent until somebody types one. */
export const otherUnit = shallowRef<OtherUnit | undefined>()

export async function loadOtherUnits(): Promise<void> {
  if (otherUnit.value) return
  const { readOtherUnit } = await import('./readOtherUnit.ts')
  otherUnit.value = readOtherUnit
}
