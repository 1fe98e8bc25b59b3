import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  placeLabels,
  rangeOf,
  ticksOf,
  widestDragMm,
  xOf,
} from '../../../../src/components/base/boreRulerScale.ts'

const bore = fc.double({ min: 1, max: 60, noNaN: true })
const width = fc.integer({ min: 240, max: 900 })

/** Inter's `No. 16` and `52 mm` at 13 px semibold are 41 and 44 px wide, measured in Chromium. */
const widestName = 44

describe('the scale of the bore ruler', () => {
  it('names ticks evenly, never run together, whole on the paper, and at least one', () => {
    fc.assert(
      fc.property(
        bore,
        fc.double({ min: 0, max: 20, noNaN: true }),
        fc.option(bore),
        width,
        fc.constantFrom('us' as const, 'metric' as const),
        (newBoreMm, worn, limitBoreMm, paper, system) => {
          const range = rangeOf({ newBoreMm, boreMm: newBoreMm + worn, limitBoreMm })
          const named = ticksOf(range, paper, system, newBoreMm).filter((tick) => tick.name)
          const xs = named.map((tick) => xOf(tick.mm, range, paper))
          const steps = xs.slice(1).map((x, i) => x - xs[i]!)
          expect(xs.length).toBeGreaterThan(0)
          for (const step of steps) {
            expect(step).toBeGreaterThan(widestName + 2)
            expect(step).toBeCloseTo(steps[0]!, 6)
          }
          for (const x of xs) expect(x >= widestName / 2 && x <= paper - widestName / 2).toBe(true)
        },
      ),
      { numRuns: 500 },
    )
  })

  it('names the number of the new nozzle where numbers are left out', () => {
    const range = rangeOf({ newBoreMm: (25.4 * 5) / 16, boreMm: 20, limitBoreMm: null })
    const names = ticksOf(range, 328, 'us', (25.4 * 5) / 16).flatMap((tick) => tick.name ?? [])
    expect(names.every((name) => Number(name.slice(4)) % 2 === 1)).toBe(true)
  })

  it('keeps labels whole, apart, in order and off the line of the limit', () => {
    const label = fc.record({
      at: fc.double({ min: 0, max: 1, noNaN: true }),
      half: fc.double({ min: 8, max: 22, noNaN: true }),
    })
    const at = fc.double({ min: 0, max: 1, noNaN: true })
    fc.assert(
      fc.property(
        fc.array(label, { minLength: 1, maxLength: 2 }),
        fc.option(at),
        width,
        (drawn, limitAt, paper) => {
          const labels = drawn.map(({ at, half }) => ({ x: at * paper, half })).sort((a, b) => a.x - b.x)
          const wall = limitAt === null ? null : limitAt * paper
          const middles = placeLabels(labels, paper, wall)
          let before = 0
          labels.forEach(({ half }, i) => {
            const [left, right] = [middles[i]! - half, middles[i]! + half]
            expect(left).toBeGreaterThanOrEqual(before - 1e-9)
            expect(right).toBeLessThanOrEqual(paper + 1e-9)
            if (wall !== null) expect(wall <= left - 2 || wall >= right + 2).toBe(true)
            before = right
          })
        },
      ),
      { numRuns: 1000 },
    )
  })

  it('can be dragged on and on, up to 60 mm', () => {
    fc.assert(
      fc.property(
        bore,
        fc.double({ min: 0, max: 59, noNaN: true }),
        fc.option(bore),
        (newBoreMm, worn, limitBoreMm) => {
          const boreMm = Math.min(60, newBoreMm + worn)
          const widest = widestDragMm(newBoreMm, rangeOf({ newBoreMm, boreMm, limitBoreMm }))
          expect(widest).toBeLessThanOrEqual(60)
          expect(boreMm > 59.9 || widest > boreMm).toBe(true)
        },
      ),
    )
  })

  it('moves no label that has room', () => {
    const labels = [
      { x: 60, half: 15 },
      { x: 140, half: 15 },
    ]
    expect(placeLabels(labels, 328, 200)).toEqual([60, 140])
    expect(placeLabels(labels, 328, null)).toEqual([60, 140])
  })

  it('ends a drag on the paper, at 60 mm, and never under the new bore', () => {
    const range = { from: 9, to: 16 }
    const x = xOf(widestDragMm(10, range), range, 328)
    // half of the 48 px handle, less the 16 px margin of a phone's page
    expect(x).toBeLessThan(328 - 8)
    expect(x).toBeGreaterThan(300)
    expect(widestDragMm(55, { from: 50, to: 66 })).toBe(60)
    expect(widestDragMm(60, { from: 58, to: 59 })).toBe(60)
  })
})
