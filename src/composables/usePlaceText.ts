import { ref, watch } from 'vue'
import type { Ref } from 'vue'

/** A text that belongs to a page as it was left: the back key finds it again, a new visit begins without it. */
export function usePlaceText<Text extends string>(name: string, initial: Text): Ref<Text> {
  const state = (history.state ?? {}) as Record<string, unknown>
  const text = ref(typeof state[name] === 'string' ? state[name] : initial) as Ref<Text>
  watch(text, (next) => history.replaceState({ ...history.state, [name]: next }, ''), { flush: 'sync' })
  return text
}
