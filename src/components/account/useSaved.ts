import { onBeforeUnmount, ref } from 'vue'

const shownMs = 4000

/** Says for a moment that something was saved. */
export function useSaved() {
  const isSaved = ref(false)
  let pause: ReturnType<typeof setTimeout> | undefined

  function saySaved() {
    isSaved.value = true
    clearTimeout(pause)
    pause = setTimeout(() => (isSaved.value = false), shownMs)
  }

  onBeforeUnmount(() => clearTimeout(pause))
  return { isSaved, saySaved }
}
