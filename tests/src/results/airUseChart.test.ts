import { afterEach, describe, expect, it } from 'vitest'
import { checkPressure, withBore } from '#shared/airflow/index.ts'
import { createOutlet } from '#shared/form/checkForm.ts'
import AirUseChart from '../../../src/components/results/AirUseChart.vue'
import { answerForm, makeForm, mountPanel, us } from './mountPanel.ts'

const psi = 6894.757293168361
const inch = 0.0254
const verdictWords = {
  holds: 'Holds',
  'barely-holds': 'Barely holds',
  'falls-short': 'Falls short',
  'cannot-run': 'Can’t run',
}

afterEach(() => {
  document.body.innerHTML = ''
})

describe('the air use table', () => {
  it('says in each cell what a pressure check of that bore and pressure says', () => {
    const { check } = answerForm(makeForm())
    const panel = mountPanel(AirUseChart, { check })
    const { rig, site, ambientPa } = check.question
    const bores = [4, 5, 6, 6.25, 7, 8, 9]
    const pressures = [60, 70, 80, 90, 100, 110, 120]
    const rows = panel.findAll('tbody tr')
    expect(rows).toHaveLength(bores.length)
    bores.forEach((sixteenths, row) => {
      const cells = rows[row]!.findAll('td button')
      expect(cells).toHaveLength(pressures.length)
      pressures.forEach((pressure, column) => {
        const trial = withBore(rig, 0, (sixteenths / 16) * inch)
        const expected = checkPressure(trial, site, ambientPa + pressure * psi)
        expect(cells[column]!.attributes('aria-label')).toContain(`, ${verdictWords[expected.verdict]}`)
        expect(cells[column]!.attributes('aria-label')).toContain(`at ${pressure}\u00a0psi`)
        expect(cells[column]!.classes()).toContain(expected.verdict)
      })
    })
    const all = panel.findAll('td button').map((cell) => cell.classes()[0])
    expect(new Set(all).size).toBeGreaterThan(1)
  })

  it('marks the bore now and its target, and has no extra row for a whole number', () => {
    const worn = mountPanel(AirUseChart, { check: answerForm(makeForm()).check })
    expect(worn.get('tr.is-now th').text()).toBe('now 25/64')
    expect(worn.get('th.is-target').text()).toContain('100')
    const form = makeForm((made) => (made.outlets[0]!.boreNow = us('')))
    const fresh = mountPanel(AirUseChart, { check: answerForm(form).check })
    expect(fresh.get('tr.is-now th').text()).toBe('No. 6 3/8')
  })

  it('says why a touched cell falls short', async () => {
    const panel = mountPanel(AirUseChart, { check: answerForm(makeForm()).check })
    const last = panel.findAll('tbody tr').at(-1)!.findAll('button').at(-1)!
    await last.trigger('click')
    const why = panel.get('[data-testid=air-use-why]').text()
    expect(why).toMatch(/^No\. 9 at 120\u00a0psi falls short: it (needs|takes) /)
  })

  it('can be walked by the arrows with one stop for Tab', async () => {
    const panel = mountPanel(AirUseChart, { check: answerForm(makeForm()).check })
    const stops = () => panel.findAll('button[tabindex="0"]')
    expect(stops()).toHaveLength(1)
    expect(stops()[0]!.attributes('aria-label')).toContain('at 100\u00a0psi')
    await panel.get('table').trigger('keydown', { key: 'ArrowRight' })
    expect(stops()).toHaveLength(1)
    expect(stops()[0]!.attributes('aria-label')).toContain('at 110\u00a0psi')
    await panel.get('table').trigger('keydown', { key: 'ArrowDown' })
    expect(stops()[0]!.attributes('aria-label')).toContain('No. 7 at 110')
    expect(document.activeElement).toBe(stops()[0]!.element)
  })

  it('goes from 4 to 8.5 bar in metric', () => {
    const { check } = answerForm(makeForm((form) => (form.target = us('7 bar'))))
    const panel = mountPanel(AirUseChart, { check }, { units: 'metric' })
    const heads = panel.findAll('thead th').slice(1)
    expect(heads.map((head) => head.text().replace('\u00a0bar', ''))).toEqual([
      '4.0',
      '4.5',
      '5.0',
      '5.5',
      '6.0',
      '6.5',
      '7.0',
      '7.5',
      '8.0',
      '8.5',
    ])
  })

  it.each([
    ['150 psi', ['70', '80', '90', '100', '110', '120', '150']],
    ['30 psi', ['30', '60', '70', '80', '90', '100', '110']],
    ['95 psi', ['70', '80', '90', '95', '100', '110', '120']],
    ['101 psi', ['60', '70', '80', '90', '101', '110', '120']],
  ])('gives a target of %s a column of its own, where it starts', (target, expected) => {
    const { check } = answerForm(makeForm((form) => (form.target = us(target))))
    const panel = mountPanel(AirUseChart, { check })
    const heads = panel.findAll('thead th').slice(1)
    expect(heads.map((head) => head.text().replace('\u00a0psi', ''))).toEqual(expected)
    expect(panel.findAll('th.is-target')).toHaveLength(1)
    const start = panel.get('button[tabindex="0"]').attributes('aria-label')
    expect(start).toContain(`at ${target.replace(' ', '\u00a0')}`)
    expect(start).toContain(verdictWords[check.answer.verdict])
  })

  it('goes back to the target when another is asked for', async () => {
    const panel = mountPanel(AirUseChart, { check: answerForm(makeForm()).check })
    await panel.findAll('tbody tr')[0]!.get('button').trigger('click')
    expect(panel.get('[data-testid=air-use-why]').text()).toContain('at 60')
    await panel.setProps({ check: answerForm(makeForm((form) => (form.target = us('150 psi')))).check })
    expect(panel.get('[data-testid=air-use-why]').text()).toContain('at 150')
  })

  it('says that only the first nozzle changes where there are two', () => {
    const form = makeForm((made) => made.outlets.push(createOutlet()))
    const panel = mountPanel(AirUseChart, { check: answerForm(form).check })
    expect(panel.text()).toContain('Only the bore of nozzle 1 changes here')
  })
})
