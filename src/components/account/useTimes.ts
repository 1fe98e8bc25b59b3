import { computed } from 'vue'
import { usePreferencesStore } from '../../stores/preferences.ts'
import { useSessionStore } from '../../stores/session.ts'

/** Times as the company's clock shows them, in the person's language. */
export function useTimes() {
  const preferences = usePreferencesStore()
  const session = useSessionStore()
  const timeZone = computed(() => session.session?.company?.timeZone)

  function makeFormat(options: Intl.DateTimeFormatOptions) {
    try {
      return new Intl.DateTimeFormat(preferences.language, { ...options, timeZone: timeZone.value })
    } catch {
      // a zone that this browser does not know: the device's own
      return new Intl.DateTimeFormat(preferences.language, options)
    }
  }

  const dayFormat = computed(() => makeFormat({ dateStyle: 'medium' }))
  const timeFormat = computed(() => makeFormat({ dateStyle: 'medium', timeStyle: 'short' }))

  return {
    timeZone,
    day: (instant: string) => dayFormat.value.format(new Date(instant)),
    time: (instant: string) => timeFormat.value.format(new Date(instant)),
  }
}
