import type { Browser, Page } from '@playwright/test'

interface TraceEvent {
  name: string
  ph: string
  pid: number
  tid: number
  /** µs */
  ts: number
  dur?: number
  args?: { data?: { type?: string } }
}

const slowdown = 4
const moves = 100
/** Longer than the chart waits, shorter than the address does, which is written once the thumb rests. */
const pauseMs = 220

const scriptAndLayout = new Set([
  'EventDispatch',
  'FunctionCall',
  'RunMicrotasks',
  'TimerFire',
  'FireAnimationFrame',
  'UpdateLayoutTree',
  'Layout',
])
const painting = new Set(['PrePaint', 'Paint', 'Layerize', 'Commit'])

const isScriptOrLayout = ({ name }: TraceEvent) => scriptAndLayout.has(name)
const isWork = (event: TraceEvent) => isScriptOrLayout(event) || painting.has(event.name)

/** The time covered by any of the events, nested ones counted once, ms. */
function coveredMs(events: readonly TraceEvent[]): number {
  let covered = 0
  let until = -Infinity
  for (const { ts, dur = 0 } of events) {
    const end = ts + dur
    if (end > until) covered += end - Math.max(ts, until)
    until = Math.max(until, end)
  }
  return covered / 1000
}

async function drag(page: Page) {
  const handle = page.getByTestId('bore-slider')
  await handle.scrollIntoViewIfNeeded()
  const grip = (await handle.boundingBox())!
  const ruler = (await page.locator('.ruler').boundingBox())!
  const y = grip.y + grip.height / 2
  await page.mouse.move(grip.x + grip.width / 2, y)
  await page.mouse.down()
  const ends = { from: ruler.x + 0.2 * ruler.width, to: ruler.x + 0.9 * ruler.width }
  const steps = 10
  for (let i = 0; i < moves; i++) {
    // There and back, each time far enough for another bore.
    const at = Math.abs(((i + steps) % (2 * steps)) - steps)
    await page.mouse.move(ends.from + ((ends.to - ends.from) * at) / steps, y)
    await page.waitForTimeout(pauseMs)
  }
  await page.mouse.up()
}

/**
 * The times of each move of the bore on a phone's screen, from the browser's own trace.
 *
 * A move's work up to the panels' timer is the number, the ruler and the frame that shows them; what follows is the
 * panels and the chart. Moves that snap to the bore they came from do nothing and are left out.
 */
export async function measureDrag(browser: Browser, address: string) {
  const context = await browser.newContext({ viewport: { width: 390, height: 844 } })
  const page = await context.newPage()
  await page.goto(address)
  await page.getByTestId('hour').waitFor()
  await page.locator('.curve').first().scrollIntoViewIfNeeded()
  await page.getByTestId('draw-curve').locator('canvas').waitFor()
  const session = await context.newCDPSession(page)
  await session.send('Emulation.setCPUThrottlingRate', { rate: slowdown })
  await browser.startTracing(page, { categories: ['devtools.timeline'] })
  await drag(page)
  const trace = JSON.parse((await browser.stopTracing()).toString()) as { traceEvents: TraceEvent[] }
  await context.close()

  const starts = trace.traceEvents
    .filter(({ name, args }) => name === 'EventDispatch' && args?.data?.type === 'pointermove')
    .sort((a, b) => a.ts - b.ts)
  const { pid, tid } = starts[0]!
  const events = trace.traceEvents
    .filter((event) => event.pid === pid && event.tid === tid && event.ph === 'X' && isWork(event))
    .sort((a, b) => a.ts - b.ts)

  const answerTimes: number[] = []
  const answerFrameTimes: number[] = []
  const panelTimes: number[] = []
  const chartDelays: number[] = []
  starts.forEach((start, index) => {
    const next = starts[index + 1]?.ts ?? start.ts + pauseMs * 1000
    const own = events.filter(({ ts }) => ts >= start.ts && ts < next)
    const timer = own.find(({ name }) => name === 'TimerFire')
    if (!timer) return
    const shown = own.find(({ name, ts }) => name === 'Paint' && ts > timer.ts + (timer.dur ?? 0))
    if (!shown) return
    const isOfPanels = ({ ts }: TraceEvent) => ts >= timer.ts && ts <= shown.ts
    const ofAnswer = own.filter(({ ts }) => ts < timer.ts)
    answerTimes.push(coveredMs(ofAnswer.filter(isScriptOrLayout)))
    answerFrameTimes.push(coveredMs(ofAnswer))
    panelTimes.push(coveredMs(own.filter(isOfPanels).filter(isScriptOrLayout)))
    chartDelays.push((shown.ts + (shown.dur ?? 0) - start.ts) / 1000)
  })
  return { slowdown, moves: answerTimes.length, answerTimes, answerFrameTimes, panelTimes, chartDelays }
}
