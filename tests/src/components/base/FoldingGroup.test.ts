import { describe, expect, it } from 'vitest'
import FoldingGroup from '../../../../src/components/base/FoldingGroup.vue'
import { mountInApp, textOf } from '../mountInApp.ts'

function mountGroup(props: Record<string, unknown> = {}) {
  const { wrapper } = mountInApp(
    FoldingGroup,
    { label: 'Whip', summary: '1 in, 10 ft', ...props },
    {},
    { default: '<input id="bore" />' },
  )
  return { wrapper, button: wrapper.get('h3 button') }
}

describe('a folding group', () => {
  it('says its fields in a line until it is opened', async () => {
    const { wrapper, button } = mountGroup()
    expect(textOf(button)).toBe('Whip1 in, 10 ft')
    expect(button.attributes('aria-expanded')).toBe('false')
    expect(wrapper.find('#bore').exists()).toBe(false)
    await button.trigger('click')
    expect(button.attributes('aria-expanded')).toBe('true')
    expect(
      wrapper
        .get(`[id="${button.attributes('aria-controls')}"]`)
        .find('#bore')
        .exists(),
    ).toBe(true)
    await button.trigger('click')
    expect(wrapper.find('#bore').exists()).toBe(false)
  })

  it('follows its summary', async () => {
    const { wrapper, button } = mountGroup()
    await wrapper.setProps({ summary: '1 1/4 in, 25 ft' })
    expect(textOf(button)).toContain('1 1/4 in, 25 ft')
  })

  it('shows that something inside is wrong', async () => {
    const { wrapper } = mountGroup()
    expect(wrapper.find('.has-problem').exists()).toBe(false)
    await wrapper.setProps({ hasProblem: true })
    expect(wrapper.find('.has-problem').exists()).toBe(true)
  })
})
