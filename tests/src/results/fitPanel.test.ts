import { describe, expect, it } from 'vitest'
import { checkPressure, solveOperatingPoint, withBore } from '#shared/airflow/index.ts'
import { createOutlet } from '#shared/form/checkForm.ts'
import type { CheckForm } from '#shared/form/checkForm.ts'
import FitPanel from '../../../src/components/results/FitPanel.vue'
import { answerForm, makeForm, mountPanel, us } from './mountPanel.ts'
import type { PanelSettings } from './mountPanel.ts'

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

  const saysOf = (change: (form: CheckForm) => void, settings: PanelSettings = {}) =>
    mountPanel(FitPanel, { check: answerForm(makeForm(change)).check }, settings).text()

  it('blames the regulator, the whip or the compressor for what each of them does', () => {
    const held = saysOf((form) => (form.outlets[0]!.regulator = us('80 psi')))
    expect(held).toContain('The regulator is set at 80\u00a0psi, under the target')
    expect(held).not.toContain('This compressor does not hold')
    const choked = saysOf((form) => {
      form.outlets[0]!.whip.bore = us('0.12 in')
      form.outlets[0]!.boreNow = us('')
    })
    expect(choked).toContain('This rig does not hold even a new No. 2 at 100\u00a0psi.')
    expect(choked).not.toContain('This compressor does not hold')
    const short = saysOf((form) => (form.compressor.freeAir = us('20 cfm')))
    expect(short).toContain('This compressor does not hold even a new No. 2 at 100\u00a0psi.')
  })

  it('names no nozzle wider than the whip', () => {
    const text = saysOf((form) => {
      form.compressor.freeAir = us('1600 cfm')
      form.compressor.setPressure = us('150 psi')
      form.outlets[0]!.hose.isUsed = form.pot.isUsed = false
      form.outlets[0]!.whip.bore = us('1/4 in')
      form.outlets[0]!.whip.length = us('1 ft')
      form.outlets[0]!.newBore = us('No. 3')
      form.outlets[0]!.boreNow = us('')
      form.target = us('40 psi')
    })
    expect(text).toContain(
      'holds a new No. 4 at 40\u00a0psi; one sixteenth worn it would be wider than its own hose.',
    )
  })

  it('says that a class holds though its engine is short, and not that it barely does', () => {
    const text = saysOf((form) => {
      form.site.altitude = us('13,000 ft')
      form.compressor.engine = 'natural'
    })
    expect(text).toMatch(
      /This size class holds 100\u00a0psi .* none in the list does so with an engine that is not/,
    )
    expect(text).not.toContain('barely')
  })

  it('never says that a worn nozzle falls to the target itself', () => {
    // machines in small steps, to one that brings a No. 6 worn to 7/16 to within half a psi under 100
    const { rig, site, ambientPa } = answerForm(makeForm()).check.question
    const seenPsi = (cfm: number) => {
      const compressor = { ...rig.compressor, freeAir: (cfm * 0.028316846592) / 60 }
      const worn = withBore({ ...rig, compressor }, 0, 7 * sixteenthM)
      return (solveOperatingPoint(worn, site).operatingPoint!.outlets[0]!.nozzlePressurePa - ambientPa) / psi
    }
    let cfm = 200
    while (seenPsi(cfm) <= 99.6) cfm += 0.5
    expect(seenPsi(cfm)).toBeLessThan(99.99)
    const text = saysOf((form) => (form.compressor.freeAir = us(`${cfm} cfm`)))
    const [, target, fallen] =
      /at ([\d.]+)\u00a0psi; one sixteenth worn that falls to ([\d.]+)\u00a0psi/.exec(text)!
    expect(Number(fallen)).toBeLessThan(Number(target))
  })

  it('writes the usual set pressures in the person’s units', () => {
    expect(saysOf(() => {})).toContain('size classes at 100, 125 or 150\u00a0psi')
    // 100, 125 and 150 psi of 0.0689476 bar
    expect(saysOf(() => {}, { units: 'metric' })).toContain('size classes at 6.9, 8.6 or 10.3\u00a0bar')
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
