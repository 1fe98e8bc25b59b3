import { largestBoreM } from '#shared/airflow/limitBore.ts'
import { boreMmOfNumber, nozzleNumberOf } from '#shared/catalogue/nozzleNumbers.ts'
import { formatBoreFraction } from '#shared/units/format.ts'
import type { UnitSystem } from '#shared/units/quantities.ts'

/** What is marked on a bore ruler. */
export interface RulerBores {
  newBoreMm: number
  boreMm: number
  limitBoreMm: number | null
}

export interface RulerRange {
  from: number
  to: number
}

export interface Tick {
  mm: number
  height: number
  name?: string
  size?: string
}

export interface RulerLabel {
  /** where it would stand, px from the left */
  x: number
  /** half of its width, px */
  half: number
}

export const majorTickHeight = 26
const sixteenthMm = boreMmOfNumber(1)
const largestBoreMm = largestBoreM * 1000
const leastNameSpacing = 52
const leastTickSpacing = 3
const nameHalf = 22
const labelGap = 8
const wallHalf = 6

/** A sixteenth past whatever is drawn; a limit so far off that sixteenths would run together is named only. */
export function rangeOf({ newBoreMm, boreMm, limitBoreMm }: RulerBores): RulerRange {
  const marks = [newBoreMm, boreMm]
  if (limitBoreMm !== null && limitBoreMm <= newBoreMm + 8 * sixteenthMm) marks.push(limitBoreMm)
  const from = Math.max(0.2, Math.min(...marks) - 0.5 * sixteenthMm)
  const last = Math.max(...marks, newBoreMm + 2 * sixteenthMm)
  return { from, to: last + Math.max(0.8 * sixteenthMm, 0.05 * (last - from)) }
}

/** The frame is drawn a pixel inside the paper. */
export function xOf(mm: number, { from, to }: RulerRange, width: number): number {
  return Math.min(1, Math.max(0, (mm - from) / (to - from))) * (width - 2) + 1
}

export function mmOfX(x: number, { from, to }: RulerRange, width: number): number {
  return from + ((x - 1) / (width - 2)) * (to - from)
}

/** How far a nozzle can be dragged: its handle still on the page, and no wider than a check can be asked for. */
export function widestDragMm(newBoreMm: number, range: RulerRange): number {
  const onPage = range.to - 0.03 * (range.to - range.from)
  return Math.max(newBoreMm, Math.min(largestBoreMm, onPage))
}

/** Ticks at 64ths of an inch or half millimetres; fewer, and fewer names, where they would run together. */
export function ticksOf(range: RulerRange, width: number, system: UnitSystem, newBoreMm: number): Tick[] {
  const isUs = system === 'us'
  const perMajor = isUs ? 4 : 2
  const majorMm = isUs ? sixteenthMm : 1
  const majorSpacing = (majorMm / (range.to - range.from)) * (width - 2)
  const every = (isUs ? [1, 2, 4, 8] : [1, 2, 5, 10]).find((n) => n * majorSpacing >= leastNameSpacing) ?? 20
  const firstNamed = isUs ? (nozzleNumberOf(newBoreMm) ?? 0) % every : 0
  const stride = [1, 2].find((n) => (n * majorSpacing) / perMajor >= leastTickSpacing) ?? perMajor
  const list: Tick[] = []
  const stepMm = majorMm / perMajor
  for (let i = Math.ceil(range.from / stepMm / stride) * stride; i * stepMm <= range.to; i += stride) {
    const mm = i * stepMm
    const isMajor = i % perMajor === 0
    const isHalf = isUs && i % 2 === 0
    const tick: Tick = { mm, height: isMajor ? majorTickHeight : isHalf ? 15 : 10 }
    const major = i / perMajor
    const x = xOf(mm, range, width)
    if (isMajor && major % every === firstNamed && x > nameHalf && x < width - nameHalf) {
      tick.name = isUs ? `No. ${major}` : `${major} mm`
      if (isUs) tick.size = formatBoreFraction(mm) ?? ''
    }
    list.push(tick)
  }
  return list
}

/** On the generous side: the page may be drawn before its typeface is there. */
export function textWidth(text: string, fontSize: number): number {
  return (text.length * 0.55 + 0.7) * fontSize
}

/**
 * The middles of one or two labels, left to right: each as near its mark as lets them stay whole on the paper, apart,
 * and clear of the line at `wall`.
 */
export function placeLabels(labels: RulerLabel[], width: number, wall: number | null): number[] {
  const whole = spread(labels, 0, width) ?? labels.map(({ x }) => x)
  if (wall === null) return whole
  let placed = whole
  let leastShift = Infinity
  for (let count = 0; count <= labels.length; count++) {
    const left = spread(labels.slice(0, count), 0, wall - wallHalf)
    const right = spread(labels.slice(count), wall + wallHalf, width)
    if (!left || !right) continue
    const middles = [...left, ...right]
    const shift = labels.reduce((sum, { x }, i) => sum + Math.abs(middles[i]! - x), 0)
    if (shift < leastShift) [placed, leastShift] = [middles, shift]
  }
  return placed
}

/** Null where there is no room for them. */
function spread(labels: RulerLabel[], from: number, to: number): number[] | null {
  const [first, second] = labels
  if (!first) return []
  const clamp = (x: number, least: number, most: number) => Math.min(most, Math.max(least, x))
  if (!second) return to - from < 2 * first.half ? null : [clamp(first.x, from + first.half, to - first.half)]
  const apart = first.half + labelGap + second.half
  if (to - from < first.half + apart + second.half) return null
  const overlap = Math.max(0, first.x + apart - second.x)
  const firstX = clamp(first.x - overlap / 2, from + first.half, to - second.half - apart)
  return [firstX, clamp(second.x + overlap / 2, firstX + apart, to - second.half)]
}
