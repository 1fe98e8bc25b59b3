import { afterEach, describe, expect, it, vi } from 'vitest'
import { createOutlet } from '#shared/form/checkForm.ts'
import type { CheckForm } from '#shared/form/checkForm.ts'
import AirUseChart from '../../../src/components/results/AirUseChart.vue'
import DrawCurveChart from '../../../src/components/results/DrawCurveChart.vue'
import FitPanel from '../../../src/components/results/FitPanel.vue'
import HourPanel from '../../../src/components/results/HourPanel.vue'
import PressureLossBar from '../../../src/components/results/PressureLossBar.vue'
import { answerForm, brokenFigure, makeForm, mountPanel, rawKey, us } from './mountPanel.ts'

/* There is no canvas to draw on here: the chart itself is looked at in a browser. */
vi.mock('vue-chartjs', () => ({
  Line: { name: 'LineChart', props: ['data', 'options'], render: () => null },
}))

afterEach(() => {
  document.body.innerHTML = ''
})

const panels = { AirUseChart, DrawCurveChart, FitPanel, HourPanel, PressureLossBar }

const rigs: Record<string, (form: CheckForm) => void> = {
  'that holds': () => {},
  'as new': (form) => (form.outlets[0]!.boreNow = us('')),
  'out of air': (form) => (form.compressor.freeAir = us('90 cfm')),
  'whose hoods take it all': (form) => {
    form.compressor.freeAir = us('90 cfm')
    form.hoods = { count: 8, flowEach: us('15 cfm') }
  },
  'with a choked whip': (form) => {
    form.outlets[0]!.whip.bore = us('1/4 in')
    form.outlets[0]!.newBore = us('No. 8')
    form.outlets[0]!.boreNow = us('')
  },
  'with a regulator': (form) => (form.outlets[0]!.regulator = us('80 psi')),
  'without a hose': (form) => {
    form.airLine.isUsed = form.pot.isUsed = false
    form.outlets[0]!.hose.isUsed = form.outlets[0]!.whip.isUsed = false
  },
  'with two nozzles, wet, high up': (form) => {
    form.outlets.push(createOutlet())
    form.site.altitude = us('9000 ft')
    form.compressor.engine = 'natural'
    form.hour.isWet = true
  },
}

describe.each([
  ['en', 'us'],
  ['es', 'metric'],
] as const)('every panel in %s, %s', (language, units) => {
  for (const [rig, change] of Object.entries(rigs)) {
    it.each(Object.keys(panels) as (keyof typeof panels)[])(
      `of a rig ${rig}: %s has words and figures`,
      (name) => {
        const form = makeForm(change)
        const { check, values, problems } = answerForm(form)
        const extra = name === 'HourPanel' ? { hour: form.hour, values, problems } : {}
        const panel = mountPanel(panels[name], { check, ...extra }, { language, units })
        expect(panel.get('h2').text()).not.toBe('')
        expect(panel.html()).not.toMatch(rawKey)
        expect(panel.text()).not.toMatch(brokenFigure)
        panel.unmount()
      },
    )
  }
})
