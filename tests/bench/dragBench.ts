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
/** Longer than the panels wait, shorter than the address does, which is written once the thumb rests. */
const pauseMs = 220

const phone = { width: 390, height: 844 }
/** Where the chart is seen while the bore is dragged: on a phone it lies below the form. */
const desk = { width: 1440, height: 900 }

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

const framesCategory = 'disabled-by-default-devtools.timeline.frame'
const frameName = 'SubmitCompositorFrameToPresentationCompositorFrame'

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

/** What the browser did on the page's behalf at each move of the bore. */
async function traceMoves(browser: Browser, address: string, viewport: typeof phone, categories: string[]) {
  const context = await browser.newContext({ viewport })
  const page = await context.newPage()
  await page.goto(address)
  await page.getByTestId('hour').waitFor()
  await page.locator('.curve').first().scrollIntoViewIfNeeded()
  await page.getByTestId('draw-curve').locator('canvas').waitFor()
  const session = await context.newCDPSession(page)
  await session.send('Emulation.setCPUThrottlingRate', { rate: slowdown })
  await browser.startTracing(page, { categories: ['devtools.timeline', ...categories] })
  await drag(page)
  const trace = JSON.parse((await browser.stopTracing()).toString()) as { traceEvents: TraceEvent[] }
  await context.close()

  const isMove = ({ name, args }: TraceEvent) =>
    name === 'EventDispatch' && args?.data?.type === 'pointermove'
  const inOrder = trace.traceEvents.toSorted((a, b) => a.ts - b.ts)
  const starts = inOrder.filter(isMove)
  const { pid, tid } = starts[0]!
  const ofPage = inOrder.filter((event) => event.pid === pid)
  return starts.map((start, index) => {
    const next = starts[index + 1]?.ts ?? start.ts + pauseMs * 1000
    const all = ofPage.filter(({ ts }) => ts >= start.ts && ts < next)
    return { start, all, ofMainThread: all.filter((event) => event.tid === tid && event.ph === 'X') }
  })
}

/**
 * The times of each move on a phone's screen: its work up to the first timer is the number, the ruler and the frame that
 * shows them, what follows is all the rest. Moves that snap to the bore they came from do nothing and are left out.
 */
async function measureAnswer(browser: Browser, address: string) {
  const answerTimes: number[] = []
  const answerFrameTimes: number[] = []
  const restTimes: number[] = []
  for (const { ofMainThread } of await traceMoves(browser, address, phone, [])) {
    const work = ofMainThread.filter(isWork)
    const timer = work.find(({ name }) => name === 'TimerFire')
    if (!timer) continue
    const ofAnswer = work.filter(({ ts }) => ts < timer.ts)
    answerTimes.push(coveredMs(ofAnswer.filter(isScriptOrLayout)))
    answerFrameTimes.push(coveredMs(ofAnswer))
    restTimes.push(coveredMs(work.filter(({ ts }) => ts >= timer.ts).filter(isScriptOrLayout)))
  }
  return { answerTimes, answerFrameTimes, restTimes }
}

/** From each move to the frame with the drawn canvas on the screen. A canvas is painted without a `Paint` of the page. */
async function measureChart(browser: Browser, address: string) {
  const categories = ['blink', 'disabled-by-default-devtools.timeline', framesCategory]
  const delays: number[] = []
  for (const { start, all, ofMainThread } of await traceMoves(browser, address, desk, categories)) {
    const drawn = ofMainThread.find(({ name }) => name === 'CanvasRenderingContext2D::FinalizeFrame')
    const committed = ofMainThread.find(({ name, ts }) => drawn && name === 'Commit' && ts > drawn.ts)
    const ofFrame = all.filter(({ name, ts }) => committed && name === frameName && ts > committed.ts)
    const submitted = ofFrame.find(({ ph }) => ph === 'b')
    const presented = ofFrame.find(({ ph, ts }) => submitted && ph === 'e' && ts >= submitted.ts)
    if (presented) delays.push((presented.ts - start.ts) / 1000)
  }
  return delays
}

export async function measureDrag(browser: Browser, address: string) {
  const answer = await measureAnswer(browser, address)
  const chartDelays = await measureChart(browser, address)
  return { slowdown, ...answer, chartDelays }
}
