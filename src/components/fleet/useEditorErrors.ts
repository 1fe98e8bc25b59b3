import { computed, provide, reactive, ref, watch } from 'vue'
import type { Ref } from 'vue'
import type { FieldError } from '#shared/contracts/problems.ts'
import type { ApiProblem } from '../../api/request.ts'
import { errorAt, formErrorsKey, refusalSentence } from '../account/formErrors.ts'
import { useFleetWords } from '../../composables/useFleetWords.ts'
import { useWords } from '../../composables/useWords.ts'
import { useFieldErrorWords } from './useFieldErrorWords.ts'

/**
 * What an editor says of a refusal: beside the fields that show their own, and the others by name in one list.
 *
 * Inputs   why it was refused · the fields that may not be left blank, by their place
 */
export function useEditorErrors(
  refusal: Readonly<Ref<ApiProblem | null>>,
  isBusy: Readonly<Ref<boolean>>,
  texts: () => Record<string, string>,
) {
  const { t } = useWords()
  const { fieldLabel } = useFleetWords()
  const sentenceOf = useFieldErrorWords()
  const claimed = reactive(new Set<string>())
  const forgotten = reactive(new Set<string>())
  /** whether somebody has tried to save: nobody is scolded for what they have not come to yet */
  const isTried = ref(false)
  watch(refusal, () => forgotten.clear())

  const errors = computed(() => refusal.value?.problem?.errors ?? [])
  const hasBlank = computed(() => Object.values(texts()).some((text) => text.trim() === ''))

  const others = computed(() =>
    errors.value
      .filter(({ path }) => ![...claimed].some((pointer) => errorAt([{ path } as FieldError], pointer)))
      .map((error) => {
        const path = error.path.slice(1).replaceAll('/', '.')
        return path === '' ? sentenceOf(error) : `${fieldLabel(path)}: ${sentenceOf(error)}`
      }),
  )
  /** whether a field still says what the server found */
  const hasShown = computed(() => errors.value.some(({ path }) => !forgotten.has(path)))
  /** Why the whole was refused, and where no field is in sight that there is one. */
  const summary = computed(() => {
    if (!refusal.value || refusal.value.code === 'version-conflict') return ''
    const { code } = refusal.value
    if (code === 'offline') return t('kit.notSaved')
    if (code === 'invalid-fields' && errors.value.length > 0 && others.value.length === 0)
      return hasShown.value ? t('kit.unfinished') : ''
    return t(`accounts.refusals.${refusalSentence(refusal.value.code)}`)
  })

  provide(formErrorsKey, {
    isBusy: isBusy as Ref<boolean>,
    sentenceAt(pointer) {
      if (isTried.value && texts()[pointer]?.trim() === '') return t('kit.errors.required')
      const error = forgotten.has(pointer) ? undefined : errorAt(errors.value, pointer)
      return error ? sentenceOf(error) : ''
    },
    forget: (pointer) => forgotten.add(pointer),
    claim(pointer) {
      claimed.add(pointer)
      return () => claimed.delete(pointer)
    },
  })

  return { summary, others, isTried, hasBlank }
}
