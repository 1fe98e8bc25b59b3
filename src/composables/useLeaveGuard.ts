import { onBeforeUnmount, ref, shallowRef } from 'vue'
import { onBeforeRouteLeave, onBeforeRouteUpdate } from 'vue-router'

export type LeaveAnswer = 'stay' | 'keep' | 'discard'

/** Asks before a page with unsaved changes is left inside the application. What is kept waits on this device. */
export function useLeaveGuard(isChanged: () => boolean, discard: () => void) {
  const isAsking = ref(false)
  let isGone = false
  const settle = shallowRef<(mayLeave: boolean) => void>(() => {})

  function ask(): boolean | Promise<boolean> {
    if (isGone || !isChanged()) return true
    isAsking.value = true
    return new Promise<boolean>((resolve) => (settle.value = resolve))
  }

  function answer(said: LeaveAnswer) {
    isAsking.value = false
    if (said === 'discard') discard()
    settle.value(said !== 'stay')
  }

  // a record that was deleted under its editor has nothing left to ask about
  onBeforeUnmount(() => {
    isGone = true
    settle.value(true)
  })
  onBeforeRouteLeave(ask)
  onBeforeRouteUpdate(ask)
  return { isAsking, answer }
}
