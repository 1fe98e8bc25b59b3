import { gzipSync } from 'node:zlib'
import type { Browser } from '@playwright/test'

interface Script {
  name: string
  /** when it was asked for, ms after the start of the visit */
  askedMs: number
  gzipBytes: number
}

/** What a first visit fetches, apart for what the page itself names and what is fetched once the verdict stands. */
export async function measureScripts(browser: Browser, address: string) {
  const context = await browser.newContext({ viewport: { width: 390, height: 844 }, isMobile: true })
  const page = await context.newPage()
  await page.goto(address)
  await page.getByTestId('hour').waitFor()
  await page.locator('.curve').first().scrollIntoViewIfNeeded()
  await page.getByTestId('draw-curve').locator('canvas').waitFor()
  await page.waitForLoadState('networkidle')

  const asked = await page.evaluate(() =>
    performance
      .getEntriesByType('resource')
      .map(({ name, startTime }) => ({ name, askedMs: startTime }))
      .filter(({ name }) => name.endsWith('.js')),
  )
  const firstPaintMs = await page.evaluate(
    () => performance.getEntriesByName('first-contentful-paint')[0]?.startTime ?? NaN,
  )
  const scripts: Script[] = []
  for (const { name, askedMs } of asked) {
    const body = await (await context.request.get(name)).body()
    scripts.push({ name: new URL(name).pathname, askedMs, gzipBytes: gzipSync(body, { level: 9 }).length })
  }
  const html = await (await context.request.get(address)).text()
  await context.close()

  const first = scripts.filter(({ name }) => html.includes(name))
  const later = scripts.filter(({ name }) => !html.includes(name))
  const charts = later.filter(({ name }) => /\/chart-/.test(name))
  const sum = (list: Script[]) => list.reduce((total, { gzipBytes }) => total + gzipBytes, 0)
  return {
    first,
    later,
    firstBytes: sum(first),
    laterBytes: sum(later),
    chartBytes: sum(charts),
    chartAskedMs: Math.min(...charts.map(({ askedMs }) => askedMs)),
    firstPaintMs,
  }
}
