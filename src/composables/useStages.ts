import { onBeforeUnmount, onMounted, ref } from 'vue'
import type { Ref } from 'vue'

const longestWaitMs = 1500

/** Counts up once the page is shown, a step in each idle moment, so that no task of its start holds up a thumb. */
export function useStages(last: number): Readonly<Ref<number>> {
  const stage = ref(0)
  let pause: ReturnType<typeof setTimeout> | undefined

  function step() {
    if (stage.value === last) return
    stage.value += 1
    if ('requestIdleCallback' in window) requestIdleCallback(step, { timeout: longestWaitMs })
    else pause = setTimeout(step, 100)
  }

  onMounted(() => (pause = setTimeout(step)))
  onBeforeUnmount(() => {
    clearTimeout(pause)
    last = stage.value
  })
  return stage
}
