import { describe, expect, it } from 'vitest'
import type { CheckForm, HourForm } from '#shared/form/checkForm.ts'
import HourPanel from '../../../src/components/results/HourPanel.vue'
import { answerForm, makeForm, mountPanel, us } from './mountPanel.ts'

function mountHour(change: (form: CheckForm) => void = () => {}) {
  const form = makeForm(change)
  return mountPanel(HourPanel, { ...answerForm(form), hour: form.hour })
}

const row = (panel: ReturnType<typeof mountHour>, label: string) =>
  panel.get(`[role=group][aria-label="${label}"]`)

describe('what an hour uses', () => {
  it('works with the figures typed in place of the defaults', () => {
    const panel = mountHour((form) => {
      form.hour.mediaRate = us('900 lb/h')
      form.hour.bagMass = us('60 lb')
    })
    expect(row(panel, 'Media').get('.figure').text()).toBe('900 lb15.0 bags of 60\u00a0lb')
    expect(row(panel, 'Media').text()).toContain('As typed here.')
  })

  it('burns all the fuel of a machine that gives all it has', () => {
    const panel = mountHour((form) => {
      form.compressor.freeAir = us('185 cfm')
      form.hour.fullLoadFuel = us('4.0 gal/h')
    })
    expect(row(panel, 'Free air').text()).toContain('100\u00a0% of full load')
    expect(row(panel, 'Fuel').get('.figure').text()).toBe('4.0 gal')
  })

  it('keeps the last whole figure, dimmed, while a field is half typed', async () => {
    const propsOf = (mediaRate: string) => {
      const form = makeForm((made) => (made.hour.mediaRate = us(mediaRate)))
      return { ...answerForm(form), hour: form.hour }
    }
    const panel = mountPanel(HourPanel, propsOf('500'))
    const figure = () => row(panel, 'Media').get('.figure')
    expect(figure().text()).toMatch(/^500 lb/)
    expect(figure().classes()).not.toContain('stale')
    await panel.setProps(propsOf('500 x'))
    expect(figure().text()).toMatch(/^500 lb/)
    expect(figure().classes()).toContain('stale')
    await panel.setProps(propsOf(''))
    expect(figure().text()).not.toMatch(/^500 lb/)
    expect(figure().text()).toMatch(/^\d/)
    expect(figure().classes()).not.toContain('stale')
  })

  it('has a dash, not the default, for a field that never was whole', () => {
    const panel = mountHour((form) => {
      form.hour.mediaRate = us('500 x')
      form.hour.fullLoadFuel = us('x')
      form.hour.tank = us('x')
      form.hour.isWet = true
    })
    expect(row(panel, 'Media').get('.figure').text()).toBe('–')
    expect(row(panel, 'Fuel').get('.figure').text()).toBe('–')
    expect(row(panel, 'Water for wet blasting').get('.figure').text()).toBe('30 gal')
  })

  it('shows every default as what a blank stands for, with where it comes from', () => {
    const panel = mountHour()
    for (const input of panel.findAll('input:not([type=checkbox])')) {
      expect(input.attributes('placeholder')).toMatch(/^[\d,.]+\u00a0/)
    }
    expect(row(panel, 'Fuel').text()).toContain('(from memory)')
    expect(row(panel, 'Fuel').text()).toContain('(common practice, no source)')
    expect(row(panel, 'Water to drain').text()).toContain('(computed)')
  })

  it('shows water and tank hours only when wet: 100 gal at 0.5 gal/min is 3.3 h', async () => {
    expect(mountHour().text()).not.toContain('Water for wet blasting')
    const panel = mountHour((form) => (form.hour.isWet = true))
    expect(row(panel, 'Water for wet blasting').get('.figure').text()).toBe(
      '30 galone tank of 100\u00a0gal lasts 3.3\u00a0h',
    )
  })

  it('does not offer silica sand, nor compute with it where a link asks for it', () => {
    const panel = mountHour()
    expect(panel.findAll('option').map((option) => option.attributes('value'))).not.toContain('silica-sand')
    const asked = mountHour((form) => (form.hour.abrasive = 'silica-sand'))
    expect(row(asked, 'Media').text()).toContain('no sand with free silica')
    expect(row(asked, 'Media').get('.figure').text()).not.toMatch(/\d/)
  })

  it('hands back the whole hour when one choice changes', async () => {
    const panel = mountHour()
    await panel.get('select').setValue('garnet')
    const [changed] = panel.emitted('update:hour')![0] as [HourForm]
    expect(changed).toEqual({ ...makeForm().hour, abrasive: 'garnet' })
  })
})
