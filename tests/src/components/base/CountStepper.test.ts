import { describe, expect, it } from 'vitest'
import CountStepper from '../../../../src/components/base/CountStepper.vue'
import { mountInApp, textOf } from '../mountInApp.ts'

function mountStepper(count: number, language: 'en' | 'es' = 'en') {
  const { wrapper } = mountInApp(
    CountStepper,
    {
      label: 'Hoods',
      max: 3,
      min: 1,
      hint: 'Breathing air first.',
      modelValue: count,
      'onUpdate:modelValue': (modelValue: number) => wrapper.setProps({ modelValue }),
    },
    { language },
  )
  const [fewer, more] = wrapper.findAll('button')
  return { wrapper, fewer: fewer!, more: more!, count: () => textOf(wrapper.get('output')) }
}

describe('a count', () => {
  it('goes up and down by one, and stops at its ends', async () => {
    const { fewer, more, count } = mountStepper(2)
    await more.trigger('click')
    expect(count()).toBe('3')
    expect(more.attributes('disabled')).toBeDefined()
    await more.trigger('click')
    expect(count()).toBe('3')
    await fewer.trigger('click')
    await fewer.trigger('click')
    await fewer.trigger('click')
    expect(count()).toBe('1')
    expect(fewer.attributes('disabled')).toBeDefined()
    expect(more.attributes('disabled')).toBeUndefined()
  })

  it('says to the ear what it counts and what its buttons do', () => {
    const { wrapper, fewer, more } = mountStepper(2)
    const group = wrapper.get('[role="group"]')
    expect(textOf(wrapper.get(`[id="${group.attributes('aria-labelledby')}"]`))).toBe('Hoods')
    expect([fewer, more].map((button) => button.attributes('aria-label'))).toEqual(['One less', 'One more'])
    expect(wrapper.get('output').attributes('aria-live')).toBe('polite')
    expect(wrapper.text()).toContain('Breathing air first.')
  })

  it('in Spanish too', () => {
    const { fewer, more } = mountStepper(2, 'es')
    expect([fewer, more].map((button) => button.attributes('aria-label'))).toEqual(['Uno menos', 'Uno más'])
  })
})
