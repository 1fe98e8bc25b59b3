import { storeToRefs } from 'pinia'
import { computed, watch } from 'vue'
import type { Ref } from 'vue'
import { answerCheck } from '#shared/check/answerCheck.ts'
import { questionOfCheck } from '#shared/check/rigOfCheck.ts'
import type { CheckRequest } from '#shared/contracts/check.ts'
import { readForm } from '#shared/form/readForm.ts'
import type { CheckForm } from '#shared/form/checkForm.ts'
import { usePressureCheckStore } from '../stores/pressureCheck.ts'
import type { AnsweredCheck } from '../stores/pressureCheck.ts'
import { otherUnit, loadOtherUnits } from './otherUnits.ts'

export function answerRequest(request: CheckRequest): AnsweredCheck {
  return { request, question: questionOfCheck(request), answer: answerCheck(request) }
}

/**
 * The answer to a form while it is typed: the last whole one stays, stale, until the fields can be read again, over a
 * visit to another page too.
 */
export function usePressureCheck(form: () => CheckForm) {
  return useAnsweredForm(form, storeToRefs(usePressureCheckStore()).lastAnswered)
}

/** The same for a form of its own, with the place where its last whole answer is kept. */
export function useAnsweredForm(form: () => CheckForm, answered: Ref<AnsweredCheck | null>) {
  const read = computed(() => readForm(form(), otherUnit.value))
  const isStale = computed(() => read.value.request === null)
  watch(
    read,
    ({ request, problems }) => {
      if (request) answered.value = answerRequest(request)
      if (Object.values(problems).some(({ problem }) => problem === 'unknown-unit')) void loadOtherUnits()
    },
    { immediate: true, flush: 'sync' },
  )
  return { read, answered, isStale }
}

export type { AnsweredCheck }
