/* What the built page weighs and how quickly it answers. It prints figures and judges nothing. */
import { chromium } from '@playwright/test'
import { startBuiltServer } from './builtServer.ts'
import { measureDrag } from './dragBench.ts'
import { measureScripts } from './firstLoad.ts'
import { measureLighthouse } from './lighthouse.ts'
import { describeTimes } from './statistics.ts'
import { chromiumArguments, findChromium } from '../support/chromium.ts'

const debuggingPort = 9333

const server = await startBuiltServer()
const browser = await chromium.launch({
  executablePath: findChromium(),
  args: [...chromiumArguments, `--remote-debugging-port=${debuggingPort}`],
})
try {
  const scripts = await measureScripts(browser, server.address)
  const kilobytes = (bytes: number) => `${(bytes / 1000).toFixed(1)} kB`
  console.log(
    `Scripts of the first load, gzipped: ${kilobytes(scripts.firstBytes)} in ${scripts.first.length} files`,
  )
  console.log(
    `Fetched once the verdict stands, gzipped: ${kilobytes(scripts.laterBytes)} in ${scripts.later.length} files, ` +
      `the chart's ${kilobytes(scripts.chartBytes)} among them`,
  )
  console.log(
    `First paint with the verdict ${scripts.firstPaintMs.toFixed(0)} ms, chart asked for ${scripts.chartAskedMs.toFixed(0)} ms after the start ` +
      `(${scripts.chartAskedMs > scripts.firstPaintMs ? 'after' : 'BEFORE'} the verdict)`,
  )

  const drag = await measureDrag(browser, server.address)
  console.log(`Dragging the bore, processor slowed ${drag.slowdown} times:`)
  console.log(`  phone, ${drag.answerTimes.length} moves that change it`)
  console.log(`    number and ruler, script and layout: ${describeTimes(drag.answerTimes)}`)
  console.log(`    the same with painting: ${describeTimes(drag.answerFrameTimes)}`)
  console.log(`    chart, fields and panels after it, script and layout: ${describeTimes(drag.restTimes)}`)
  console.log(`  desk, ${drag.chartDelays.length} moves that change it`)
  console.log(`    from the move to the chart on the screen: ${describeTimes(drag.chartDelays)}`)

  const { scores, metrics, runs } = await measureLighthouse(debuggingPort, server.address)
  console.log(`Lighthouse, mobile, median of ${runs}:`)
  for (const [name, score] of Object.entries(scores)) console.log(`  ${name}: ${score}`)
  for (const [name, text] of Object.entries(metrics)) console.log(`  ${name}: ${text}`)
} finally {
  await browser.close()
  await server.stop()
}
