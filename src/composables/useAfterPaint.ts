import { onBeforeUnmount, shallowRef, watch } from 'vue'
import type { ShallowRef } from 'vue'

/**
 * A copy that follows once the frame with the change has been drawn: what is expensive to draw never holds up the number
 * under the thumb. The shorter the pause after that frame, the sooner a part is drawn.
 */
export function useAfterPaint<T>(source: () => T, pauseMs: number): Readonly<ShallowRef<T>> {
  const copy = shallowRef(source())
  let isWaiting = false
  let frame = 0
  let pause: ReturnType<typeof setTimeout> | undefined

  function follow() {
    isWaiting = false
    copy.value = source()
  }

  watch(source, () => {
    if (isWaiting) return
    isWaiting = true
    // a page in the background draws no frames, and follows at once
    if (document.hidden) pause = setTimeout(follow, pauseMs)
    else frame = requestAnimationFrame(() => (pause = setTimeout(follow, pauseMs)))
  })
  onBeforeUnmount(() => {
    cancelAnimationFrame(frame)
    clearTimeout(pause)
  })
  return copy
}
