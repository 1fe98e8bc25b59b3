import lighthouse from 'lighthouse'
import { quantile } from './statistics.ts'

const runs = 5
const categories = ['performance', 'accessibility', 'best-practices', 'seo']
const timings = ['first-contentful-paint', 'largest-contentful-paint', 'total-blocking-time', 'speed-index']

type Result = NonNullable<Awaited<ReturnType<typeof lighthouse>>>

/** Lighthouse as it measures a phone, so many visits, each by a visitor who has never been here. */
export async function measureLighthouse(port: number, address: string) {
  const found: Result['lhr'][] = []
  for (let run = 0; run < runs; run++) {
    const result = await lighthouse(address, { port, onlyCategories: categories, logLevel: 'error' })
    if (!result) throw new Error('Lighthouse gave no result.')
    found.push(result.lhr)
  }
  const medianOf = (read: (lhr: Result['lhr']) => number) => quantile(found.map(read), 0.5)
  const scores = Object.fromEntries(
    categories.map((name) => [name, Math.round(100 * medianOf((lhr) => lhr.categories[name]?.score ?? NaN))]),
  )
  const metrics: Record<string, string> = Object.fromEntries(
    timings.map((name) => [
      name,
      `${medianOf((lhr) => lhr.audits[name]?.numericValue ?? NaN).toFixed(0)} ms`,
    ]),
  )
  const shift = medianOf((lhr) => lhr.audits['cumulative-layout-shift']?.numericValue ?? NaN)
  metrics['cumulative-layout-shift'] = shift.toFixed(4)
  const failing = Object.values(found[0]!.audits).filter(
    ({ score, scoreDisplayMode }) => scoreDisplayMode === 'binary' && score === 0,
  )
  metrics['audits not passed'] = failing.map(({ id }) => id).join(', ') || 'none'
  return { runs, scores, metrics }
}
