import { describe, expect, it } from 'vitest'
import { answerCheck } from '#shared/check/answerCheck.ts'
import { cautionsOfForm } from '#shared/form/cautionsOfForm.ts'
import { createCheckForm } from '#shared/form/checkForm.ts'
import type { MediaLoading, NozzleShape } from '#shared/form/checkForm.ts'
import { readForm } from '#shared/form/readForm.ts'

function sizeOf(loading: MediaLoading, shape: NozzleShape, coefficient = '') {
  const form = createCheckForm()
  Object.assign(form.outlets[0]!, { loading, shape, coefficient: { text: coefficient, system: 'us' } })
  const { cautions } = answerCheck(readForm(form).request!)
  return cautionsOfForm(cautions, form).find(({ code }) => code === 'air-only-reading-low')?.sizePct
}

describe('how much more air a nozzle draws with its media shut off', () => {
  it('is 0.97 over the coefficient of its loading, whatever its shape', () => {
    expect(sizeOf('normal', 'venturi')).toBeCloseTo(19.75, 2)
    expect(sizeOf('normal', 'straight')).toBeCloseTo(19.75, 2)
    expect(sizeOf('lean', 'straight')).toBeCloseTo(11.49, 2)
  })

  it('is nothing to speak of where only air is blown', () => {
    expect(sizeOf('clean', 'venturi')).toBeUndefined()
    expect(sizeOf('clean', 'straight')).toBeUndefined()
  })

  it('is taken from a coefficient that was typed', () => {
    expect(sizeOf('normal', 'venturi', '0.9')).toBeCloseTo(7.78, 2)
  })
})
