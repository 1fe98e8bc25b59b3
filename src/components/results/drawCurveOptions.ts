import type { ChartData, ChartOptions } from 'chart.js'
import type { AnnotationOptions } from 'chartjs-plugin-annotation'
import { spreadApart } from './spreadApart.ts'
import type { TokenColours } from './useTokenColours.ts'

export interface ChartPoint {
  x: number
  y: number
}

export interface ChartLine {
  label: string
  points: ChartPoint[]
  colour: string
  dash: number[]
  width: number
  /** a word where the line stops before the chart does */
  endWord: string | null
  operatingPoint: ChartPoint | null
}

export interface ChartPicture {
  delivery: ChartPoint[]
  deliveryLabel: string
  /** a word where the delivery stops before the chart does */
  deliveryEndWord: string | null
  lines: ChartLine[]
  lowest: number
  highest: number
  target: number
  targetLabel: string
}

export const chartHeight = 300
/** the chart less its axis and the room above it */
const plotHeight = 250
const labelGap = 16
const labelRoom = 86

/** The part of a line between two x, ends put in where it crosses them. */
export function clipLine(points: readonly ChartPoint[], lowest: number, highest: number): ChartPoint[] {
  return points.flatMap((point, index) => {
    const clipped = point.x >= lowest && point.x <= highest ? [point] : []
    const next = points[index + 1]
    if (!next) return clipped
    for (const x of [lowest, highest]) {
      if (point.x < x && next.x > x) {
        clipped.push({ x, y: point.y + ((next.y - point.y) * (x - point.x)) / (next.x - point.x) })
      }
    }
    return clipped
  })
}

/**
 * Air from a little under the least draw to a little over the most, with all of the delivery that is not throttled and
 * every operating point in it; but never so far that the delivery lies flat.
 */
export function airRange({ delivery, lines, lowest, highest }: ChartPicture) {
  const delivered = Math.max(0, ...clipLine(delivery, lowest, highest).map(({ y }) => y))
  const drawn = lines.flatMap(({ points }) => points.map(({ y }) => y))
  const met = lines.flatMap(({ operatingPoint }) => (operatingPoint ? [operatingPoint.y] : []))
  const most = Math.max(delivered, ...met, Math.min(Math.max(0, ...drawn), 3.2 * (delivered || Infinity)))
  // with no draw to compare it with, the delivery is shown down to nothing
  const least = drawn.length > 0 ? Math.min(delivered || most, ...met, ...drawn) : 0
  return { min: 0.8 * least, max: 1.08 * most || 1 }
}

/** A line's last point that is still on the chart. */
function endOf(points: readonly ChartPoint[], max: number): ChartPoint | undefined {
  return points.findLast(({ y }) => y <= max)
}

export function chartData(
  { delivery, lines }: ChartPicture,
  colours: TokenColours,
): ChartData<'line', ChartPoint[]> {
  const plain = { pointRadius: 0, borderJoinStyle: 'round' as const }
  return {
    labels: [],
    datasets: [
      { label: 'delivery', data: delivery, borderColor: colours.ink, borderWidth: 3.5, ...plain },
      ...lines.map(({ label, points, colour, dash, width }) => ({
        label,
        data: points,
        borderColor: colour,
        borderDash: dash,
        borderWidth: width,
        ...plain,
      })),
    ],
  }
}

/** The labels at the line ends, the operating points and the target. */
function annotationsOf(picture: ChartPicture, colours: TokenColours, max: number, min: number) {
  const { delivery, lines, lowest, highest, target } = picture
  const font = { family: colours.font, size: 12, weight: 600 as const }
  // on a ground of their own, so that no line strikes them through
  const backed = { font, backgroundColor: colours.ground, borderRadius: 3 }
  const found: Record<string, AnnotationOptions> = {
    target: {
      type: 'line',
      scaleID: 'x',
      value: target,
      borderColor: colours.muted,
      borderDash: [3, 4],
      borderWidth: 1.5,
    },
    targetLabel: {
      type: 'label',
      xValue: target,
      yValue: max,
      content: picture.targetLabel,
      position: { x: target > (lowest + highest) / 2 ? 'end' : 'start', y: 'end' },
      color: colours.muted,
      ...backed,
      padding: { left: 2, right: 2, top: 0, bottom: 3 },
    },
  }
  // At its right end where the delivery is still flat there, else where it begins.
  const inRange = clipLine(delivery, lowest, highest).filter(({ y }) => y >= min)
  const [start, end] = [inRange[0], inRange[inRange.length - 1]]
  if (start && end) {
    const runsThrough = end.y > 0.95 * start.y && end.x >= highest
    found.delivery = {
      type: 'label',
      xValue: runsThrough ? highest : start.x,
      yValue: Math.min(runsThrough ? end.y : start.y, max),
      content: picture.deliveryLabel,
      position: { x: runsThrough ? 'end' : 'start', y: 'end' },
      color: colours.ink,
      ...backed,
      padding: { left: 2, top: 0, right: 2, bottom: 1 },
      yAdjust: -4,
    }
  }
  if (end && picture.deliveryEndWord) {
    const isRight = end.x > lowest + 0.6 * (highest - lowest)
    found.deliveryEnd = {
      type: 'label',
      xValue: end.x,
      yValue: Math.min(end.y, max),
      content: picture.deliveryEndWord,
      position: { x: isRight ? 'end' : 'start', y: 'center' },
      xAdjust: isRight ? -6 : 6,
      color: colours.ink,
      ...backed,
      padding: { left: 2, top: 0, right: 2, bottom: 0 },
    }
  }
  const labelled = lines.flatMap((line) => {
    const end = endOf(line.points, max)
    return end ? [{ line, end }] : []
  })
  const toPixel = (y: number) => ((y - min) / (max - min)) * plotHeight
  const places = spreadApart(
    labelled.map(({ end }) => toPixel(end.y)),
    labelGap,
    plotHeight,
  )
  labelled.forEach(({ line, end }, index) => {
    found[`label${index}`] = {
      type: 'label',
      xValue: end.x,
      yValue: min + (places[index]! / plotHeight) * (max - min),
      content: line.endWord ? `${line.label}: ${line.endWord}` : line.label,
      position: { x: 'start', y: 'center' },
      color: line.colour,
      ...backed,
      xAdjust: line.operatingPoint && line.operatingPoint.x >= end.x - 0.02 * (highest - lowest) ? 8 : 0,
      padding: { left: 5, right: 2, top: 0, bottom: 0 },
    }
  })
  lines.forEach(({ operatingPoint, colour }, index) => {
    if (!operatingPoint) return
    found[`point${index}`] = {
      type: 'point',
      xValue: operatingPoint.x,
      yValue: operatingPoint.y,
      radius: 5.5,
      backgroundColor: colours.ground,
      borderColor: colour,
      borderWidth: 2.5,
    }
  })
  return found
}

export function chartOptions(picture: ChartPicture, colours: TokenColours): ChartOptions<'line'> {
  const { min, max } = airRange(picture)
  const ticks = {
    color: colours.muted,
    font: { family: colours.font, size: 12 },
    includeBounds: false,
    sampleSize: 2,
  }
  return {
    animation: false,
    responsive: true,
    maintainAspectRatio: false,
    parsing: false,
    normalized: true,
    events: [],
    layout: { padding: { right: labelRoom, top: 20 } },
    scales: {
      x: {
        type: 'linear',
        min: picture.lowest,
        max: picture.highest,
        border: { color: colours.line },
        grid: { display: false },
        ticks: { ...ticks, maxTicksLimit: 6, maxRotation: 0 },
      },
      y: {
        type: 'linear',
        min,
        max,
        border: { display: false },
        grid: { color: colours.line, lineWidth: 1 },
        ticks: { ...ticks, maxTicksLimit: 7 },
      },
    },
    plugins: {
      annotation: {
        clip: false,
        animations: undefined,
        annotations: annotationsOf(picture, colours, max, min),
      },
    },
  }
}
