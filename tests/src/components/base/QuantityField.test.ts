import fc from 'fast-check'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { defineComponent, h, nextTick, ref } from 'vue'
import type { TypedText } from '#shared/form/checkForm.ts'
import { readField } from '#shared/form/readForm.ts'
import type { FieldName } from '#shared/form/readForm.ts'
import type { UnitSystem } from '#shared/units/quantities.ts'
import QuantityField from '../../../../src/components/base/QuantityField.vue'
import { mountInApp, textOf } from '../mountInApp.ts'

beforeEach(() => {
  vi.useFakeTimers()
})
afterEach(() => {
  vi.useRealTimers()
})

/** A field as a form holds it: its problem is read from what is typed. */
function mountField(
  field: FieldName,
  typed: TypedText,
  {
    units = 'us' as UnitSystem,
    language = 'en' as 'en' | 'es',
    ...props
  }: Record<string, unknown> & {
    units?: UnitSystem
    language?: 'en' | 'es'
  } = {},
) {
  const held = ref(typed)
  const host = defineComponent({
    setup: () => () => {
      const read = readField(field, held.value)
      return h(QuantityField, {
        label: 'Quantity',
        field,
        problem: read.ok ? undefined : read,
        ...props,
        modelValue: held.value,
        'onUpdate:modelValue': (value: TypedText) => (held.value = value),
      })
    },
  })
  const { wrapper, preferences } = mountInApp(host, {}, { units, language })
  const input = wrapper.get('input')
  const switchUnits = async (system: UnitSystem) => {
    preferences.units = system
    await nextTick()
  }
  return { held, wrapper, input, switchUnits, problem: () => wrapper.find('.problem') }
}

const us = (text: string): TypedText => ({ text, system: 'us' })
const metric = (text: string): TypedText => ({ text, system: 'metric' })

describe('what was typed', () => {
  it.each([
    // 100 · 6.894757 kPa, by the definition of psi
    ['target', us('100 psi'), '6.89 bar'],
    ['target', us('100'), '6.89 bar'],
    ['target', us('7 bar'), '7 bar'],
    // 7/16 in = 11.1125 mm
    ['bore', us('No. 7'), '11.11 mm'],
    ['hoseBore', us('1 1/4 in'), '31.75 mm'],
    // 1,000 · 0.3048 m
    ['altitude', us('1,000 ft'), '305 m'],
    // (80 − 32) · 5/9
    ['airTemperature', us('80 °F'), '27 °C'],
    // 375 · 0.0283168
    ['freeAir', us('375 cfm'), '10.6 m³/min'],
    ['humidity', us('50 %'), '50 %'],
    ['coefficient', us('0.81'), '0.81'],
  ] as const)(
    '%s %j reads %s under metric units, and comes back as typed',
    async (field, typed, converted) => {
      const { held, input, switchUnits } = mountField(field, typed)
      expect(input.element.value).toBe(typed.text)
      await switchUnits('metric')
      expect(input.element.value).toBe(converted)
      expect(held.value).toEqual(typed)
      await switchUnits('us')
      expect(input.element.value).toBe(typed.text)
    },
  )

  it.each([
    ['target', metric('7 bar'), '101.5 psi'], // 700 / 6.894757 = 101.53
    ['bore', metric('9.5 mm'), '0.374 in'], // 9.5 / 25.4 = 0.3740
    ['bore', metric('9.525'), '3/8 in'],
    ['airTemperature', metric('-10'), '14 °F'],
  ] as const)('%s %j reads %s under US units', async (field, typed, converted) => {
    const { held, input, switchUnits } = mountField(field, typed, { units: 'metric' })
    await switchUnits('us')
    expect(input.element.value).toBe(converted)
    await switchUnits('metric')
    expect(input.element.value).toBe(typed.text)
    expect(held.value).toEqual(typed)
  })

  it('is never changed by any number of switches', async () => {
    await fc.assert(
      fc.asyncProperty(
        fc.constantFrom(us('103.37 psi'), us('1/3 bar'), metric('6,9'), metric('what'), us('')),
        fc.array(fc.constantFrom('us' as const, 'metric' as const), { maxLength: 6 }),
        async (typed, switches) => {
          const { held, input, switchUnits, wrapper } = mountField('target', { ...typed })
          for (const system of switches) await switchUnits(system)
          expect(held.value).toEqual(typed)
          await switchUnits(typed.system)
          expect(input.element.value).toBe(typed.text)
          wrapper.unmount()
        },
      ),
      { numRuns: 40 },
    )
  })

  it('stays where it cannot be read', async () => {
    const { input, switchUnits } = mountField('target', us('about 100'))
    await switchUnits('metric')
    expect(input.element.value).toBe('about 100')
  })

  it('is taken under the units of the moment once it is typed over', async () => {
    const { held, input, switchUnits } = mountField('target', us('100 psi'))
    await switchUnits('metric')
    await input.setValue('6.9')
    expect(held.value).toEqual(metric('6.9'))
    await switchUnits('us')
    // 690 / 6.894757 = 100.08
    expect(input.element.value).toBe('100.1 psi')
  })
})

describe('the sentence of what is wrong', () => {
  it('waits while one types, and comes after a pause', async () => {
    const { input, problem, held } = mountField('target', us('100 psi'))
    await input.setValue('100 p')
    expect(held.value.text).toBe('100 p')
    await vi.advanceTimersByTimeAsync(600)
    expect(problem().exists()).toBe(false)
    await input.setValue('100 ps')
    await vi.advanceTimersByTimeAsync(600)
    expect(problem().exists()).toBe(false)
    await vi.advanceTimersByTimeAsync(200)
    expect(textOf(problem())).toBe('The unit “ps” is not known here: type it like 100 psi.')
    expect(input.element.value).toBe('100 ps')
  })

  it('comes at once on leaving the field, and goes with the next letter', async () => {
    const { input, problem } = mountField('target', us('100 psi'))
    await input.setValue('')
    expect(problem().exists()).toBe(false)
    await input.trigger('blur')
    expect(textOf(problem())).toBe('Fill this in, like 100 psi.')
    await input.setValue('9')
    expect(problem().exists()).toBe(false)
    await input.setValue('90')
    await input.trigger('blur')
    expect(problem().exists()).toBe(false)
  })

  it('stands at once beside what came in a link', () => {
    const { problem, input } = mountField('target', us('5 kg'))
    expect(textOf(problem())).toBe('“kg” is not a unit for this: type it like 100 psi.')
    expect(input.attributes('aria-invalid')).toBe('true')
  })

  it('names the limits in the person’s units', async () => {
    const { problem, switchUnits } = mountField('target', us('600 psi'))
    // 10 and 3,500 kPa over 6.894757
    expect(textOf(problem())).toBe('From 1.5 psi to 507.6 psi can be worked out here.')
    await switchUnits('metric')
    expect(textOf(problem())).toBe('From 0.10 bar to 35.00 bar can be worked out here.')
  })

  it('is said in Spanish to who reads Spanish', () => {
    const { problem } = mountField('target', us('?'), { language: 'es' })
    expect(textOf(problem())).toBe('No se entiende como cantidad; escríbala así: 100 psi.')
  })

  it('is what the field is described by, before its hint', async () => {
    const { wrapper, input } = mountField('target', us('100 psi'), { hint: 'At the needle gauge.' })
    const described = () => wrapper.find(`[id="${input.attributes('aria-describedby')}"]`)
    expect(textOf(described())).toBe('At the needle gauge.')
    expect(input.attributes('aria-invalid')).toBeUndefined()
    await input.setValue('x')
    await input.trigger('blur')
    expect(described().attributes('role')).toBe('alert')
    expect(textOf(described())).toBe('That is not a quantity: type it like 100 psi.')
    expect(wrapper.findAll('.hint')).toHaveLength(0)
  })

  it('describes nothing where there is nothing to say', () => {
    expect(mountField('target', us('100 psi')).input.attributes('aria-describedby')).toBeUndefined()
  })
})

describe('what can be read two ways', () => {
  it('is asked, and a touch answers it', async () => {
    const { wrapper, held, problem } = mountField('bore', us('8'))
    expect(textOf(problem())).toBe('A nozzle number or a bore? Which is it?')
    const buttons = wrapper.findAll('.readings button')
    expect(buttons.map(textOf)).toEqual(['No. 8', '8 mm'])
    await buttons[0]!.trigger('click')
    expect(held.value).toEqual(us('No. 8'))
    expect(problem().exists()).toBe(false)
    expect(wrapper.findAll('.readings button')).toHaveLength(0)
  })

  it('a comma too', async () => {
    const { wrapper, held } = mountField('altitude', metric('1,250 m'), { units: 'metric' })
    expect(wrapper.findAll('.readings button').map(textOf)).toEqual(['1250 m', '1.25 m'])
    await wrapper.findAll('.readings button')[0]!.trigger('click')
    expect(held.value).toEqual(metric('1250 m'))
  })
})

describe('the field', () => {
  it('shows what a blank stands for, and has its label', () => {
    const { wrapper, input } = mountField('humidity', us(''), { placeholder: 'dry', problem: undefined })
    expect(input.attributes('placeholder')).toBe('dry')
    expect(input.element.value).toBe('')
    expect(wrapper.get('label').attributes('for')).toBe(input.attributes('id'))
    expect(textOf(wrapper.get('label'))).toBe('Quantity')
  })

  it('does not speak up after it is gone', async () => {
    const { input, wrapper } = mountField('target', us('100 psi'))
    await input.setValue('x')
    wrapper.unmount()
    expect(vi.getTimerCount()).toBe(0)
  })
})
