import { describe, expect, it } from 'vitest'
import { nextTick, reactive } from 'vue'
import { createOutlet } from '#shared/form/checkForm.ts'
import BoreNowField from '../../../../src/components/check/BoreNowField.vue'
import { mountInApp } from '../mountInApp.ts'

const us = (text: string) => ({ text, system: 'us' as const })
const longEnoughMs = 200

function mountField() {
  const outlet = reactive({ ...createOutlet(), boreNow: us('25/64 in') })
  const { wrapper } = mountInApp(BoreNowField, { modelValue: outlet, problem: undefined })
  const input = wrapper.get('input')
  return { outlet, input, shown: () => (input.element as HTMLInputElement).value }
}

const wait = () => new Promise((resolve) => setTimeout(resolve, longEnoughMs))

describe('the field of the bore now', () => {
  it('shows in the end what was dragged', async () => {
    const { outlet, shown } = mountField()
    for (const text of ['13/32 in', '27/64 in', '7/16 in']) {
      outlet.boreNow = us(text)
      await nextTick()
    }
    await wait()
    expect(shown()).toBe('7/16 in')
  })

  it('loses no letter that is typed while a drag is still to be shown', async () => {
    const { outlet, input, shown } = mountField()
    outlet.boreNow = us('7/16 in')
    await nextTick()
    await input.setValue('2')
    await input.setValue('27')
    await wait()
    await input.setValue('27/64')
    expect(shown()).toBe('27/64')
    expect(outlet.boreNow.text).toBe('27/64')
    await wait()
    expect(shown()).toBe('27/64')
  })
})
