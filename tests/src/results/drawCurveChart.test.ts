import { describe, expect, it, vi } from 'vitest'
import { createOutlet } from '#shared/form/checkForm.ts'
import type { CheckForm } from '#shared/form/checkForm.ts'
import DrawCurveChart from '../../../src/components/results/DrawCurveChart.vue'
import { spreadApart } from '../../../src/components/results/spreadApart.ts'
import { answerForm, makeForm, mountPanel, us } from './mountPanel.ts'

/* There is no canvas to draw on here: the chart itself is looked at in a browser. */
vi.mock('vue-chartjs', () => ({
  Line: { name: 'LineChart', props: ['data', 'options'], render: () => null },
}))

function mountChart(change: (form: CheckForm) => void = () => {}) {
  const { check } = answerForm(makeForm(change))
  return { check, panel: mountPanel(DrawCurveChart, { check }) }
}

interface Drawn {
  datasets: { label: string; borderDash?: number[]; data: { x: number; y: number }[] }[]
}
const drawn = (panel: ReturnType<typeof mountChart>['panel']) =>
  panel.getComponent({ name: 'LineChart' }).props('data') as Drawn

describe('delivery and draw', () => {
  it('draws the delivery, the new bore, the bore now and one sixteenth more, each in its own dashes', () => {
    const { datasets } = drawn(mountChart().panel)
    expect(datasets.map(({ label }) => label)).toEqual([
      'delivery',
      'new No. 6',
      'now 25/64\u00a0in',
      '+1/16\u00a0in',
    ])
    expect(new Set(datasets.slice(1).map(({ borderDash }) => String(borderDash))).size).toBe(3)
  })

  it('draws a new nozzle once', () => {
    const { datasets } = drawn(mountChart((form) => (form.outlets[0]!.boreNow = us(''))).panel)
    expect(datasets.map(({ label }) => label)).toEqual(['delivery', 'now No. 6', '+1/16\u00a0in'])
  })

  it('says in words where the bore now is in balance, as the answer does', () => {
    const { check, panel } = mountChart()
    const point = check.answer.operatingPoint!
    const psi = (point.outlets[0]!.nozzlePressureKpa / 6.894757293168361).toFixed(0)
    const cfm = (point.freeAirM3Min / 0.028316846592).toFixed(0)
    expect(panel.text()).toContain(`now 25/64\u00a0in: balance at ${psi}\u00a0psi and ${cfm}\u00a0cfm.`)
  })

  it('has the figures of its lines in a table', () => {
    const { panel } = mountChart()
    const { datasets } = drawn(panel)
    const row = panel.findAll('tbody tr').find((found) => found.get('th').text() === '100\u00a0psi')!
    const figures = row.findAll('td').map((cell) => Number(cell.text().replace(/\D/g, '')))
    const onLine = datasets.map(({ data }) => {
      const after = data.findIndex(({ x }) => x >= 100)
      const [a, b] = [data[after - 1]!, data[after]!]
      return a.y + ((b.y - a.y) * (100 - a.x)) / (b.x - a.x)
    })
    expect(figures).toHaveLength(4)
    figures.forEach((figure, index) => expect(Math.abs(figure - onLine[index]!)).toBeLessThan(0.51))
  })

  it('ends with a word where the whip chokes', () => {
    const { panel } = mountChart((form) => {
      form.outlets[0]!.whip.bore = us('1/4 in')
      form.outlets[0]!.boreNow = us('')
    })
    expect(panel.text()).toContain('the line ends where the whip chokes')
  })

  it('says that only the first nozzle changes where there are two', () => {
    const { panel } = mountChart((form) => form.outlets.push(createOutlet()))
    expect(panel.text()).toContain('Only the bore of nozzle 1 changes here')
  })
})

describe('labels at the line ends', () => {
  it('keep a gap, in the order of their lines', () => {
    expect(spreadApart([100, 104, 20], 16, 250)).toEqual([100, 116, 20])
  })
  it('are pushed back inside at the top', () => {
    expect(spreadApart([248, 250], 16, 250)).toEqual([234, 250])
  })
})
