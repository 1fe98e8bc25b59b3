import { computed, shallowRef } from 'vue'
import { ApiProblem } from '../../api/request.ts'
import { useWords } from '../../composables/useWords.ts'
import { refusalSentence } from './formErrors.ts'

/** Runs what may be refused, one at a time, and keeps why it was. */
export function useRefusal() {
  const { t } = useWords()
  const refusal = shallowRef<ApiProblem | null>(null)
  const isBusy = shallowRef(false)
  const sentence = computed(() =>
    refusal.value ? t(`accounts.refusals.${refusalSentence(refusal.value.code)}`) : '',
  )

  /** Whether it was done. */
  async function attempt(act: () => Promise<unknown>): Promise<boolean> {
    if (isBusy.value) return false
    isBusy.value = true
    try {
      await act()
      refusal.value = null
      return true
    } catch (error) {
      refusal.value = error instanceof ApiProblem ? error : new ApiProblem('internal-error', null)
      if (!(error instanceof ApiProblem)) console.error(error)
      return false
    } finally {
      isBusy.value = false
    }
  }

  return { refusal, isBusy, sentence, attempt }
}
