import { ref, shallowRef } from 'vue'
import { onBeforeRouteLeave, onBeforeRouteUpdate } from 'vue-router'

export type LeaveAnswer = 'stay' | 'keep' | 'discard'

/** Asks before a page with unsaved changes is left inside the application. What is kept waits on this device. */
export function useLeaveGuard(isChanged: () => boolean, discard: () => void) {
  const isAsking = ref(false)
  const settle = shallowRef<(mayLeave: boolean) => void>(() => {})

  function ask(): boolean | Promise<boolean> {
    if (!isChanged()) return true
    isAsking.value = true
    return new Promise<boolean>((resolve) => (settle.value = resolve))
  }

  function answer(said: LeaveAnswer) {
    isAsking.value = false
    if (said === 'discard') discard()
    settle.value(said !== 'stay')
  }

  onBeforeRouteLeave(ask)
  onBeforeRouteUpdate(ask)
  return { isAsking, answer }
}
