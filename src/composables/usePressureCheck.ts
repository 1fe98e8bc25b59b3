import { computed, shallowRef, watch } from 'vue'
import { answerCheck } from '#shared/check/answerCheck.ts'
import { questionOfCheck } from '#shared/check/rigOfCheck.ts'
import type { CheckQuestion } from '#shared/check/rigOfCheck.ts'
import type { CheckAnswer, CheckRequest } from '#shared/contracts/check.ts'
import { readForm } from '#shared/form/readForm.ts'
import type { CheckForm } from '#shared/form/checkForm.ts'
import { otherUnit, loadOtherUnits } from './otherUnits.ts'

/** One answered check: what was asked in the contract's units and in SI, and the answer. */
export interface AnsweredCheck {
  request: CheckRequest
  question: CheckQuestion
  answer: CheckAnswer
}

export function answerRequest(request: CheckRequest): AnsweredCheck {
  return { request, question: questionOfCheck(request), answer: answerCheck(request) }
}

/** The answer to a form while it is typed: the last whole one stays, stale, until the fields can be read again. */
export function usePressureCheck(form: () => CheckForm) {
  const read = computed(() => readForm(form(), otherUnit.value))
  const answered = shallowRef<AnsweredCheck | null>(null)
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
