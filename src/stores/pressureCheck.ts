import { defineStore } from 'pinia'
import { ref } from 'vue'
import { createCheckForm } from '#shared/form/checkForm.ts'
import { readFragment, writeFragment } from '#shared/form/fragment.ts'

/** The check on the screen, as typed; it lives in the address's fragment. */
export const usePressureCheckStore = defineStore('pressureCheck', () => {
  const form = ref(createCheckForm())
  const isLinkBroken = ref(false)

  function open(fragment: string) {
    const read = readFragment(fragment)
    form.value = read.form
    isLinkBroken.value = read.isBroken
  }

  function startOver() {
    open('')
  }

  return { form, isLinkBroken, open, startOver, fragment: () => writeFragment(form.value) }
})
