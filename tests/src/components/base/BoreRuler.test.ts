import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import BoreRuler from '../../../../src/components/base/BoreRuler.vue'
import type { UnitSystem } from '#shared/units/quantities.ts'
import { mountInApp, textOf } from '../mountInApp.ts'

const inch = 25.4
const noSix = (6 / 16) * inch

interface Bores {
  newBoreMm: number
  boreMm: number
  limitBoreMm: number | null
  limitedBy?: 'air' | 'line' | 'regulator' | 'air-line' | null
}

function drawRuler(bores: Bores, units: UnitSystem = 'us', language: 'en' | 'es' = 'en') {
  const { wrapper } = mountInApp(BoreRuler, { ...bores }, { units, language })
  const number = (selector: string, name: string) => Number(wrapper.get(selector).attributes(name))
  const ticks = wrapper.findAll('line.tick').map((tick) => Number(tick.attributes('x1')))
  return {
    wrapper,
    ticks,
    width: number('svg', 'width'),
    newX: number('.new-mark', 'x1'),
    nowX: number('.now-mark', 'x') + number('.now-mark', 'width') / 2,
    has: (selector: string) => wrapper.find(selector).exists(),
    number,
    names: wrapper.findAll('text.name').map(textOf),
    sizes: wrapper.findAll('text.size').map(textOf),
    label: wrapper.get('svg').attributes('aria-label')!.replace(/\s/g, ' '),
  }
}

describe('the bore ruler', () => {
  it('stands in the order new, now, limit, each to scale', () => {
    const bores = { newBoreMm: noSix, boreMm: (25 / 64) * inch, limitBoreMm: (29 / 64) * inch }
    const { ticks, newX, nowX, number } = drawRuler(bores)
    // its ticks are 64ths
    const perMm = (ticks[1]! - ticks[0]!) / (inch / 64)
    expect((nowX - newX) / perMm).toBeCloseTo(inch / 64, 6)
    expect((number('.limit-mark', 'x1') - newX) / perMm).toBeCloseTo((5 * inch) / 64, 6)
  })

  it('marks ±4 % about the limit, and what lies past it', () => {
    const limitBoreMm = 10.8
    const { ticks, number, width } = drawRuler({ newBoreMm: noSix, boreMm: noSix, limitBoreMm })
    const perMm = (ticks[1]! - ticks[0]!) / (inch / 64)
    const limitX = number('.limit-mark', 'x1')
    expect((limitX - number('.doubt', 'x')) / perMm).toBeCloseTo(0.04 * limitBoreMm, 6)
    expect(number('.doubt', 'width') / perMm).toBeCloseTo(0.08 * limitBoreMm, 6)
    expect(number('.past', 'x')).toBeCloseTo(limitX, 6)
    expect(number('.past', 'x') + number('.past', 'width')).toBeCloseTo(width, 6)
  })

  it('for any bores keeps the order and stays on the paper', () => {
    const bore = fc.double({ min: 1, max: 40, noNaN: true })
    fc.assert(
      fc.property(
        bore,
        fc.double({ min: 0, max: 8, noNaN: true }),
        fc.option(fc.double({ min: 1, max: 60, noNaN: true })),
        fc.constantFrom('us' as const, 'metric' as const),
        (newBoreMm, worn, limitBoreMm, units) => {
          const drawn = drawRuler({ newBoreMm, boreMm: newBoreMm + worn, limitBoreMm }, units)
          const { newX, nowX, width, ticks } = drawn
          expect(newX).toBeGreaterThan(0)
          expect(nowX).toBeGreaterThanOrEqual(newX - 1e-6)
          expect(nowX).toBeLessThan(width)
          expect(ticks.every((x, i) => x > 0 && x < width && (i === 0 || x > ticks[i - 1]!))).toBe(true)
          if (drawn.has('.limit-mark')) {
            const limitX = drawn.number('.limit-mark', 'x1')
            expect(limitX > 0 && limitX < width).toBe(true)
            expect(Math.sign(limitBoreMm! - newBoreMm) * (limitX - newX)).toBeGreaterThanOrEqual(-1e-6)
          }
          drawn.wrapper.unmount()
        },
      ),
      { numRuns: 50 },
    )
  }, 30_000)

  it('is past the limit all over where no bore reaches the target', () => {
    const { has, number, width, label } = drawRuler({ newBoreMm: noSix, boreMm: noSix, limitBoreMm: null })
    expect(has('.limit-mark')).toBe(false)
    expect(has('.doubt')).toBe(false)
    expect([number('.past', 'x'), number('.past', 'width')]).toEqual([0, width])
    expect(label).toBe('Bore ruler: new 3/8 in, now 3/8 in. No bore reaches the target.')
  })

  it('names a limit that lies beyond the paper, at its right end', () => {
    const bores = { newBoreMm: noSix, boreMm: noSix, limitBoreMm: inch }
    const { wrapper, has, label, number, width } = drawRuler(bores)
    expect([has('.limit-mark'), has('.past'), has('.doubt')]).toEqual([false, false, false])
    expect(textOf(wrapper.get('.limit-label'))).toBe('limit 1 in')
    expect(wrapper.get('.limit-label').attributes('text-anchor')).toBe('end')
    expect(number('.limit-label', 'x')).toBeLessThan(width - 17)
    expect(has('.limit-arrow')).toBe(true)
    expect(label).toContain('limit 1 in')
  })

  it.each([
    ['air', 'At the limit bore this rig just reaches the target.', true],
    ['line', 'The limit here is the hose: no bore wider than its own line counts.', false],
    ['regulator', 'The limit here is the regulator.', true],
    ['air-line', 'The limit here is the air line, which chokes beyond it.', true],
    [null, 'It holds at every bore up to 60 mm (2 3/8 in).', false],
  ] as const)(
    'says what a limit by %s means, and doubts only one that is not exact',
    (by, sentence, isDoubtful) => {
      const bores = { newBoreMm: noSix, boreMm: noSix, limitBoreMm: 10.8, limitedBy: by }
      const { label, has } = drawRuler(bores)
      expect(label).toMatch(/^Bore ruler: new 3\/8 in, now 3\/8 in, limit 0\.425 in\. /)
      expect(label.endsWith(` ${sentence}`)).toBe(true)
      expect([has('.doubt'), has('.doubt-label')]).toEqual([isDoubtful, isDoubtful])
    },
  )

  it('says of a rig that holds every bore that its limit is over the widest', () => {
    const { wrapper } = drawRuler({ newBoreMm: noSix, boreMm: noSix, limitBoreMm: 60, limitedBy: null })
    expect(textOf(wrapper.get('.limit-label'))).toBe('limit over 2.362 in')
  })

  it('writes the limit in a row above new and now, on a paper that is always as high', () => {
    const limits = [8, 9.6, 10.8, 60, null]
    const heights = limits.map((limitBoreMm) => {
      const { wrapper, has, number } = drawRuler({ newBoreMm: noSix, boreMm: 10, limitBoreMm })
      const height = number('svg', 'height')
      // a line of 13 px text
      if (has('.limit-label'))
        expect(number('.new-label', 'y') - number('.limit-label', 'y')).toBeGreaterThan(13)
      wrapper.unmount()
      return height
    })
    expect(new Set(heights).size).toBe(1)
  })

  it('keeps the mark of the bore now where it may not be moved', () => {
    const { nowX, newX } = drawRuler({ newBoreMm: noSix, boreMm: noSix, limitBoreMm: 10.8 })
    expect(nowX).toBeCloseTo(newX, 6)
  })

  it('draws a limit under the new bore, on the left of it', () => {
    const { number, newX } = drawRuler({ newBoreMm: noSix, boreMm: noSix, limitBoreMm: 8 })
    expect(number('.limit-mark', 'x1')).toBeLessThan(newX)
    expect(number('.limit-mark', 'x1')).toBeGreaterThan(0)
  })

  it('is a ruler in sixteenths by number and inch', () => {
    const { names, sizes } = drawRuler({ newBoreMm: noSix, boreMm: noSix, limitBoreMm: 10.8 })
    expect(names).toEqual(['No. 6', 'No. 7', 'No. 8'])
    expect(sizes).toEqual(['3/8', '7/16', '1/2'])
  })

  it('or in millimetres, a tick each half', () => {
    const { names, sizes, ticks, newX } = drawRuler(
      { newBoreMm: 9.5, boreMm: 9.5, limitBoreMm: 11 },
      'metric',
    )
    // 9 mm is too near the edge for its name
    expect(names).toEqual(['10 mm', '11 mm', '12 mm', '13 mm'])
    expect(sizes).toEqual([])
    const steps = ticks.slice(1).map((x, i) => x - ticks[i]!)
    for (const step of steps) expect(step).toBeCloseTo(steps[0]!, 6)
    expect(ticks.some((x) => Math.abs(x - newX) < 1e-6)).toBe(true)
  })

  it('says new and now in one where the nozzle is as new', () => {
    const asNew = drawRuler({ newBoreMm: noSix, boreMm: noSix, limitBoreMm: 10.8 })
    expect(textOf(asNew.wrapper.get('.new-label'))).toBe('new = now')
    expect(asNew.has('.now-label')).toBe(false)
    asNew.wrapper.unmount()
    const worn = drawRuler({ newBoreMm: noSix, boreMm: 10, limitBoreMm: 10.8 }, 'us', 'es')
    expect(textOf(worn.wrapper.get('.new-label'))).toBe('nueva')
    expect(textOf(worn.wrapper.get('.now-label'))).toBe('hoy')
  })

  it('lets the bore be dragged only where it may be moved', async () => {
    const fixed = drawRuler({ newBoreMm: noSix, boreMm: noSix, limitBoreMm: 10.8 })
    expect(fixed.has('[role="slider"]')).toBe(false)
    fixed.wrapper.unmount()
    const { wrapper } = mountInApp(BoreRuler, {
      newBoreMm: noSix,
      boreMm: noSix,
      limitBoreMm: 10.8,
      isMovable: true,
    })
    await wrapper.get('[role="slider"]').trigger('keydown', { key: 'ArrowRight' })
    const [[moved] = []] = wrapper.emitted('move') as [number][]
    expect(moved).toBeCloseTo((25 / 64) * inch, 9)
    await wrapper.get('[role="slider"]').trigger('keydown', { key: 'ArrowLeft' })
    expect(wrapper.emitted('move')).toHaveLength(1)
  })

  it('lets no bore be dragged over 60 mm, nor under the new one', async () => {
    const bores = { newBoreMm: 50, boreMm: 59.5, limitBoreMm: 10.8, isMovable: true }
    const { wrapper } = mountInApp(BoreRuler, bores, { units: 'metric' })
    await wrapper.get('[role="slider"]').trigger('keydown', { key: 'End' })
    await wrapper.get('[role="slider"]').trigger('keydown', { key: 'Home' })
    expect(wrapper.emitted('move')).toEqual([[60], [50]])
  })
})
