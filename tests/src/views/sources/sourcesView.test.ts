import { describe, expect, it } from 'vitest'
import { DISCHARGE_COEFFICIENTS } from '#shared/catalogue/media.ts'
import { SAFETY_RULES } from '#shared/catalogue/safetyRules.ts'
import SourcesView from '../../../../src/views/sources/SourcesView.vue'
import { mountInApp, textOf } from '../../components/mountInApp.ts'

function readPage(units: 'us' | 'metric', language: 'en' | 'es') {
  const { wrapper } = mountInApp(SourcesView, {}, { units, language })
  const tables = wrapper.findAll('table').map((table) => ({
    headings: table.findAll('thead th').map(textOf),
    rows: table.findAll('tbody tr').map((row) => ({
      name: textOf(row.get('th')),
      labels: row.findAll('td .label').map(textOf),
      // what is read without the label that only a phone shows
      cells: row
        .findAll('td')
        .map((cell) => textOf({ text: () => cell.element.lastChild?.textContent ?? '' })),
    })),
  }))
  const [checked, defaults, safety] = tables
  return { text: textOf(wrapper), tables, checked: checked!, defaults: defaults!, safety: safety! }
}

const settings = [
  ['us', 'en'],
  ['metric', 'en'],
  ['us', 'es'],
  ['metric', 'es'],
] as const

describe('the page of sources', () => {
  it.each(settings)('is whole in %s and %s: no key, no gap, no broken figure', (units, language) => {
    const { text, tables } = readPage(units, language)
    expect(text).not.toMatch(/\b(pages|fields)\.\w|\{\w+\}|NaN|undefined|Infinity/)
    expect(tables).toHaveLength(3)
    for (const { headings, rows } of tables) {
      expect(rows.length).toBeGreaterThan(5)
      for (const { name, labels, cells } of rows) {
        expect([name, ...cells].every((cell) => cell !== '')).toBe(true)
        expect(labels).toEqual(headings.slice(1))
      }
    }
  })

  it.each([
    ['us', ['1/4 in', '100 psi', '81 cfm', '5/8 in', '548 cfm']],
    // 6.35 and 15.875 mm, 100 · 0.0689476 bar, 81 and 548 · 0.0283168 m³/min
    ['metric', ['6.35 mm', '6.9 bar', '2.29 m³/min', '15.88 mm', '15.5 m³/min']],
  ] as const)('states the two government points, MIL-HDBK-1110 10.3.2, in %s', (units, figures) => {
    const { checked } = readPage(units, 'en')
    const points = checked.rows.filter(({ cells }) => cells[0]!.includes('MIL-HDBK-1110'))
    expect(points).toHaveLength(2)
    const names = points.map(({ name }) => name).join()
    for (const figure of figures) expect(names).toContain(figure)
  })

  it('gives each safety figure its rule and its status', () => {
    const { safety } = readPage('us', 'en')
    expect(safety.rows.map(({ cells }) => cells.slice(1))).toEqual(
      SAFETY_RULES.map(({ citation, status }) => [citation, status]),
    )
    const figures = safety.rows.map(({ cells }) => cells[0])
    expect(figures.filter((figure) => figure === 'no figure')).toHaveLength(
      SAFETY_RULES.filter(({ figure }) => figure === null).length,
    )
  })

  it('calls nothing published that is not', () => {
    const { defaults } = readPage('us', 'en')
    const statusOf = (start: string) => defaults.rows.find(({ name }) => name.startsWith(start))!.cells[1]
    expect(statusOf('Silica sand through')).toMatch(/^from memory/)
    expect(statusOf('Compressor size classes')).toBe('common practice, no source')
    expect(statusOf('Loss of a pot')).toBe('common practice, no source')
    expect(statusOf('Fuel at full load')).toMatch(/^from memory/)
    expect(statusOf('Discharge coefficient, normal')).toMatch(/^computed/)
    const coefficients = defaults.rows.filter(({ name }) => name.startsWith('Discharge coefficient'))
    expect(coefficients.map(({ cells }) => Number(cells[0]))).toEqual(
      DISCHARGE_COEFFICIENTS.map(({ value }) => value),
    )
  })

  it('gives differences of temperature as differences: 10 K are 18 °F', () => {
    const us = readPage('us', 'en').defaults.rows.find(({ name }) => name.endsWith('aftercooled'))!
    expect(us.cells[0]).toBe('18 °F')
  })
})
