import { describe, expect, it, vi } from 'vitest'
import { nextTick } from 'vue'
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
  datasets: { label: string; borderColor: string; borderDash?: number[]; data: { x: number; y: number }[] }[]
}
const drawn = (panel: ReturnType<typeof mountChart>['panel']) =>
  panel.getComponent({ name: 'LineChart' }).props('data') as Drawn

interface DrawnOptions {
  scales: Record<'x' | 'y', { min: number; max: number }>
  plugins: { annotation: { annotations: Record<string, DrawnAnnotation> } }
}
interface DrawnAnnotation {
  type: string
  value?: number
  xValue?: number
  yValue?: number
  content?: string
}
const options = (panel: ReturnType<typeof mountChart>['panel']) =>
  panel.getComponent({ name: 'LineChart' }).props('options') as DrawnOptions
const annotations = (panel: ReturnType<typeof mountChart>['panel']) =>
  options(panel).plugins.annotation.annotations

function chokedWhip(form: CheckForm) {
  form.outlets[0]!.whip.bore = us('1/4 in')
  form.outlets[0]!.newBore = us('No. 8')
  form.outlets[0]!.boreNow = us('')
}
const awkwardRigs: Record<string, (form: CheckForm) => void> = {
  'an ordinary one': () => {},
  'a choked whip': chokedWhip,
  'a large machine, a narrow whip, a low target': (form) => {
    form.compressor.freeAir = us('1600 cfm')
    form.compressor.setPressure = us('150 psi')
    form.outlets[0]!.whip.bore = us('1/2 in')
    form.outlets[0]!.newBore = us('No. 10')
    form.outlets[0]!.boreNow = us('')
    form.target = us('30 psi')
  },
  'a small machine on a large nozzle': (form) => {
    form.compressor.freeAir = us('90 cfm')
    form.outlets[0]!.newBore = us('No. 12')
    form.outlets[0]!.boreNow = us('')
  },
  'a target far over the unload pressure, through a choked whip': (form) => {
    chokedWhip(form)
    form.compressor.setPressure = us('60 psi')
    form.target = us('400 psi')
  },
  'a target far under what the nozzle sees': (form) => {
    form.compressor.freeAir = us('1600 cfm')
    form.target = us('10 psi')
  },
}

async function openFigures(panel: ReturnType<typeof mountChart>['panel']) {
  panel.get('details').element.open = true
  await panel.get('details').trigger('toggle')
}

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

  it('says in words where the bore now is in balance, as the answer does', async () => {
    const { check, panel } = mountChart()
    await openFigures(panel)
    const point = check.answer.operatingPoint!
    const psi = (point.outlets[0]!.nozzlePressureKpa / 6.894757293168361).toFixed(0)
    const cfm = (point.freeAirM3Min / 0.028316846592).toFixed(0)
    expect(panel.text()).toContain(`now 25/64\u00a0in: balance at ${psi}\u00a0psi and ${cfm}\u00a0cfm.`)
  })

  it('has the figures of its lines in a table', async () => {
    const { panel } = mountChart()
    await openFigures(panel)
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

  it('says so where the whip chokes at every pressure', () => {
    const { panel } = mountChart(chokedWhip)
    expect(panel.text()).toContain('now No. 8: no line, the whip chokes at every pressure here')
  })

  it('shows the whole delivery where there is no draw beside it', () => {
    const { panel } = mountChart(chokedWhip)
    expect(options(panel).scales.y.min).toBe(0)
  })

  it('says where the delivery ends because the other nozzle takes all', () => {
    const taken = 'where the other nozzles take all the air'
    const beside = (bore: string) =>
      mountChart((form) => {
        form.compressor.freeAir = us('260 cfm')
        form.outlets.push({ ...createOutlet(), newBore: us(bore), boreNow: us('') })
      }).panel
    expect(beside('No. 8').text()).toContain(taken)
    expect(annotations(beside('No. 8')).deliveryEnd?.content).toBe('others take it all')
    expect(mountChart().panel.text()).not.toContain(taken)
    expect(annotations(mountChart().panel).deliveryEnd).toBeUndefined()
  })

  it.each(Object.entries(awkwardRigs))(
    'has delivery, target and balances inside its axes: %s',
    (_, change) => {
      const { panel } = mountChart(change)
      const { x, y } = options(panel).scales
      const isInside = (point: { x: number; y: number }) =>
        point.x >= x.min && point.x <= x.max && point.y >= y.min && point.y <= y.max
      const [delivery, ...draws] = drawn(panel).datasets
      expect(delivery!.data.filter(isInside).length).toBeGreaterThan(1)
      const target = annotations(panel).target!.value!
      expect(target).toBeGreaterThan(x.min)
      expect(target).toBeLessThan(x.max)
      for (const [name, { xValue, yValue }] of Object.entries(annotations(panel))) {
        if (name.startsWith('point')) expect(isInside({ x: xValue!, y: yValue! })).toBe(true)
      }
      for (const draw of draws) if (draw.data.length > 0) expect(draw.data.some(isInside)).toBe(true)
    },
  )

  it('keeps its labels on a ground of their own', () => {
    const labels = Object.values(annotations(mountChart().panel)).filter(({ type }) => type === 'label')
    expect(labels.length).toBeGreaterThan(3)
    for (const label of labels) expect(label).toHaveProperty('backgroundColor')
  })

  it('takes its colours from where it stands, and again when that has gone stale', async () => {
    // the cascade is the browser's: here only whose style is asked for
    const styleOf = vi.spyOn(window, 'getComputedStyle').mockImplementation((element) => {
      const colour = element.closest('.stale') ? 'rgb(7, 8, 9)' : 'rgb(1, 2, 3)'
      return { getPropertyValue: () => colour } as unknown as CSSStyleDeclaration
    })
    const { panel } = mountChart()
    const ink = () => drawn(panel).datasets[0]!.borderColor
    expect(ink()).toBe('rgb(1, 2, 3)')
    document.body.classList.add('stale')
    await panel.setProps({ isStale: true })
    await nextTick()
    expect(ink()).toBe('rgb(7, 8, 9)')
    document.body.classList.remove('stale')
    await panel.setProps({ isStale: false })
    await nextTick()
    expect(ink()).toBe('rgb(1, 2, 3)')
    styleOf.mockRestore()
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
