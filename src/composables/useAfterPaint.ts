import { onBeforeUnmount, shallowRef, watch } from 'vue'
import type { ShallowRef } from 'vue'

type Follower = () => void

/** Who waits for the next frame, by the pause after it: a frame and a few timers serve the whole page. */
const waiting = new Map<number, Follower[]>()

function startPauses() {
  for (const [pauseMs, followers] of waiting) {
    setTimeout(() => followers.forEach((follow) => follow()), pauseMs)
  }
  waiting.clear()
}

function runAfterPaint(follow: Follower, pauseMs: number) {
  if (waiting.size === 0) {
    // a page in the background draws no frames, and follows at once
    if (document.hidden) setTimeout(startPauses)
    else requestAnimationFrame(startPauses)
  }
  const followers = waiting.get(pauseMs)
  if (followers) followers.push(follow)
  else waiting.set(pauseMs, [follow])
}

/**
 * A copy that follows once the frame with the change has been drawn: what is expensive to draw never holds up the number
 * under the thumb. The shorter the pause after that frame, the sooner a part is drawn.
 */
export function useAfterPaint<T>(source: () => T, pauseMs: number): Readonly<ShallowRef<T>> {
  const copy = shallowRef(source())
  let isWaiting = false
  let isGone = false

  function follow() {
    isWaiting = false
    if (!isGone) copy.value = source()
  }

  watch(source, () => {
    if (isWaiting) return
    isWaiting = true
    runAfterPaint(follow, pauseMs)
  })
  onBeforeUnmount(() => (isGone = true))
  return copy
}
