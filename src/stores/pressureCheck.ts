import { defineStore } from 'pinia'
import { computed, ref, shallowRef } from 'vue'
import type { CheckQuestion } from '#shared/check/rigOfCheck.ts'
import type { CheckAnswer, CheckRequest } from '#shared/contracts/check.ts'
import { createCheckForm } from '#shared/form/checkForm.ts'
import { readFragment, writeFragment } from '#shared/form/fragment.ts'
import { toTypedText } from '#shared/units/format.ts'
import { sixtyFourthsOf, snapBoreMm } from '#shared/units/quantities.ts'
import type { UnitSystem } from '#shared/units/quantities.ts'

/** One answered check: what was asked in the contract's units and in SI, and the answer. */
export interface AnsweredCheck {
  request: CheckRequest
  question: CheckQuestion
  answer: CheckAnswer
}

/** A dragged bore is a 64th or a tenth of a millimetre; sums of steps carry crumbs that nobody would type. */
function roundBore(boreMm: number): number {
  return sixtyFourthsOf(boreMm) === null ? Number(boreMm.toFixed(4)) : snapBoreMm(boreMm)
}

/** The check on the screen, as typed; it lives in the address's fragment. */
export const usePressureCheckStore = defineStore('pressureCheck', () => {
  const form = ref(createCheckForm())
  const lastAnswered = shallowRef<AnsweredCheck | null>(null)
  const isLinkBroken = ref(false)
  const leftFragment = ref<string | null>(null)
  const canUndo = computed(() => leftFragment.value !== null && fragment() === '')
  let isOpen = false

  function fragment(): string {
    return writeFragment(form.value)
  }

  function open(said: string) {
    const read = readFragment(said)
    // another check: what was answered before is no longer its last answer
    lastAnswered.value = null
    form.value = read.form
    isLinkBroken.value = read.isBroken
    isOpen = true
  }

  /** Who comes back from another page brings no fragment: the check is as it was left. */
  function resume(said: string) {
    if (said !== '' || !isOpen) open(said)
  }

  /** The bore now as if it had been typed. */
  function typeBoreNow(outletIndex: number, boreMm: number, system: UnitSystem) {
    const outlet = form.value.outlets[outletIndex]
    if (outlet) outlet.boreNow = { text: toTypedText('bore', roundBore(boreMm), system), system }
  }

  /** A clean check; the one left can be had back until something is typed into the new one. */
  function startOver() {
    leftFragment.value = fragment() || null
    open('')
  }

  function undoStartOver() {
    if (leftFragment.value !== null) open(leftFragment.value)
    leftFragment.value = null
  }

  return {
    form,
    lastAnswered,
    isLinkBroken,
    open,
    resume,
    startOver,
    undoStartOver,
    canUndo,
    typeBoreNow,
    fragment,
  }
})
