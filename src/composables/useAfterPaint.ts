import { onBeforeUnmount, shallowRef, watch } from 'vue'
import type { ShallowRef } from 'vue'

const leastPauseMs = 60

/** A copy that follows a moment behind: what is expensive to draw never holds up the number under the thumb. */
export function useAfterPaint<T>(source: () => T): Readonly<ShallowRef<T>> {
  const copy = shallowRef(source())
  let pause: ReturnType<typeof setTimeout> | undefined
  watch(source, () => {
    pause ??= setTimeout(() => {
      pause = undefined
      copy.value = source()
    }, leastPauseMs)
  })
  onBeforeUnmount(() => clearTimeout(pause))
  return copy
}
