import { onBeforeUnmount, onMounted, ref } from 'vue'
import type { Ref } from 'vue'
import { localDateOf } from './rigVerdicts.ts'

/** The day on this device, also on a page that is left open over midnight. */
export function useLocalDate(): Readonly<Ref<string>> {
  const date = ref(localDateOf(new Date()))
  const look = () => (date.value = localDateOf(new Date()))
  onMounted(() => addEventListener('focus', look))
  onBeforeUnmount(() => removeEventListener('focus', look))
  return date
}
