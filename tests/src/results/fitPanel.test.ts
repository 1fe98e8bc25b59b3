import { describe, expect, it } from 'vitest'
import { checkPressure, solveOperatingPoint, withBore } from '#shared/airflow/index.ts'
import { createOutlet } from '#shared/form/checkForm.ts'
import FitPanel from '../../../src/components/results/FitPanel.vue'
import { answerForm, makeForm, mountPanel, us } from './mountPanel.ts'

const sixteenthM = 0.0254 / 16
const psi = 6894.757293168361

describe('what to rent, what fits', () => {
  it('names the largest number that holds new, and what it falls to one sixteenth worn', () => {
    const { check } = answerForm(makeForm())
    const { rig, site, targetPa, ambientPa } = check.question
    const holds = (sixteenths: number) =>
      checkPressure(withBore(rig, 0, sixteenths * sixteenthM), site, targetPa).reason === null
    const number = Number(
      /No\. (\d+)/.exec(mountPanel(FitPanel, { check }).get('[data-testid=fit-nozzle]').text())?.[1],
    )
    expect(holds(number)).toBe(true)
    expect(holds(number + 1)).toBe(false)
    const worn = solveOperatingPoint(withBore(rig, 0, (number + 1) * sixteenthM), site).operatingPoint!
    const fallen = ((worn.outlets[0]!.nozzlePressurePa - ambientPa) / psi).toFixed(0)
    const text = mountPanel(FitPanel, { check }).text()
    expect(text).toContain(`holds a new No. ${number} at 100\u00a0psi`)
    expect(text).toContain(`that falls to ${fallen}\u00a0psi`)
    expect(text).toContain(`The largest that still holds one sixteenth worn is a No. ${number - 1}.`)
  })

  it('names a size class with its set pressure and its air margin, and no maker', () => {
    const panel = mountPanel(FitPanel, { check: answerForm(makeForm()).check })
    expect(panel.get('[data-testid=fit-compressor]').text()).toMatch(/^\d+\s*cfm at (100|125|150)\u00a0psi$/)
    expect(panel.text()).toMatch(/with \d+\u00a0% air margin/)
    expect(panel.text()).toContain('common practice, no source')
  })

  it('warns of the engine where the air is thin', () => {
    const high = (engine: 'unknown' | 'natural') =>
      mountPanel(FitPanel, {
        check: answerForm(
          makeForm((form) => {
            form.site.altitude = us('13,000 ft')
            form.compressor.engine = engine
          }),
        ).check,
      }).text()
    expect(high('unknown')).toContain('Its engine is not known')
    expect(high('natural')).toContain('its engine is short of about')
  })

  it('says what each nozzle sees when the other is shut', () => {
    const form = makeForm((made) => {
      made.compressor.freeAir = us('750 cfm')
      made.outlets.push(createOutlet())
    })
    const { check } = answerForm(form)
    const { rig, site, ambientPa } = check.question
    const alone = solveOperatingPoint({ ...rig, outlets: [rig.outlets[1]!] }, site).operatingPoint!
    const sees = ((alone.outlets[0]!.nozzlePressurePa - ambientPa) / psi).toFixed(0)
    const panel = mountPanel(FitPanel, { check })
    expect(panel.get('[data-testid=fit-shut]').text()).toContain(
      `With nozzle 1 shut, nozzle 2 sees ${sees}\u00a0psi.`,
    )
    const single = mountPanel(FitPanel, { check: answerForm(makeForm()).check })
    expect(single.find('[data-testid=fit-shut]').exists()).toBe(false)
  })
})
