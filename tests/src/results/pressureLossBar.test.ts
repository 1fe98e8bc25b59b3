import { describe, expect, it } from 'vitest'
import PressureLossBar from '../../../src/components/results/PressureLossBar.vue'
import { answerForm, makeForm, mountPanel, us } from './mountPanel.ts'

const psiIn = (text: string) => Number(/([\d.]+)\u00a0psi/.exec(text)?.[1])

describe('where the pressure goes', () => {
  it('names each element with its loss, and the losses are what lies between the two gauges', () => {
    const { check } = answerForm(makeForm())
    const panel = mountPanel(PressureLossBar, { check })
    const names = panel.findAll('dt').map((name) => name.text().replaceAll('\u00a0', ' '))
    expect(names).toEqual(['Air line, 1 1/2 in', 'Pot, 1 1/4 in', 'Blast hose, 1 1/4 in', 'Whip, 1 in'])
    const total = panel.findAll('dd').reduce((sum, loss) => sum + psiIn(loss.text()), 0)
    const point = check.answer.operatingPoint!
    const between = (point.compressorPressureKpa - point.outlets[0]!.nozzlePressureKpa) / 6.894757293168361
    expect(Math.abs(total - between)).toBeLessThan(0.05 * names.length)
  })

  it('names a hose in metric as the form does', () => {
    const { check } = answerForm(makeForm())
    const panel = mountPanel(PressureLossBar, { check }, { units: 'metric' })
    // 1 1/4 in of 25.4 mm
    expect(panel.findAll('dt')[2]!.text()).toBe('Blast hose, 31.75\u00a0mm')
  })

  it('gives the plain remedy: the thin hose one size wider, and what a check with it gains', () => {
    const hose = (bore: string) =>
      answerForm(
        makeForm((form) => {
          form.compressor.freeAir = us('900 cfm')
          form.outlets[0]!.hose.bore = us(bore)
        }),
      ).check
    const thin = hose('3/4 in')
    const sentence = mountPanel(PressureLossBar, { check: thin }).get('[data-testid=remedy]').text()
    expect(sentence.replaceAll('\u00a0', ' ')).toMatch(
      /^Blast hose: 1 in here instead of 3\/4 in gains [\d.]+ psi at the nozzle\.$/,
    )
    const nozzle = (check: typeof thin) => check.answer.operatingPoint!.outlets[0]!.nozzlePressureKpa
    const gain = (nozzle(hose('1 in')) - nozzle(thin)) / 6.894757293168361
    expect(gain).toBeGreaterThan(1)
    expect(Math.abs(psiIn(sentence.slice(sentence.indexOf('gains'))) - gain)).toBeLessThan(0.51)
  })

  it('says that the machine is out of air where no hose helps', () => {
    const { check } = answerForm(makeForm((form) => (form.compressor.freeAir = us('185 cfm'))))
    expect(mountPanel(PressureLossBar, { check }).get('[data-testid=remedy]').text()).toContain(
      'the machine is out of air, not the hose',
    )
  })

  it('says that the regulator holds where it does', () => {
    const { check } = answerForm(makeForm((form) => (form.outlets[0]!.regulator = us('80 psi'))))
    const panel = mountPanel(PressureLossBar, { check })
    expect(panel.findAll('dt').map((name) => name.text())).toContain('Regulator')
    expect(panel.get('[data-testid=remedy]').text()).toContain('The regulator holds')
  })

  it('says why there is nothing to show where nothing flows', () => {
    const { check } = answerForm(
      makeForm((form) => {
        form.compressor.freeAir = us('90 cfm')
        form.hoods = { count: 8, flowEach: us('15 cfm') }
      }),
    )
    const panel = mountPanel(PressureLossBar, { check })
    expect(panel.text()).toContain('Hoods and tools take all the air there is')
    expect(panel.find('.bar').exists()).toBe(false)
  })
})
