import type { Page } from '@playwright/test'
import { CheckScreen } from './support/checkScreen.ts'
import { expect, test } from './support/test.ts'

const places = ['.verdict', '.number', '.ruler', '.bits', 'h1', 'nav']

async function whereThingsStand(page: Page) {
  await page.evaluate(() => document.fonts.ready)
  return page.evaluate(
    (selectors) =>
      selectors.map((selector) => {
        const { x, y, width, height } = document.querySelector(selector)!.getBoundingClientRect()
        return [selector, ...[x, y, width, height].map((value) => Math.round(value * 2) / 2)].join(' ')
      }),
    places,
  )
}

test('the verdict is in the page before any script runs, where it will stay', async ({
  check,
  browser,
  page,
}) => {
  const context = await browser.newContext({ javaScriptEnabled: false })
  const drawn = await context.newPage()
  await drawn.goto('/')
  const still = new CheckScreen(drawn)
  await expect(still.verdict).toHaveText('Holds')
  await expect(drawn.getByRole('img', { name: /Bore ruler/ })).toBeVisible()
  await expect(drawn.getByTestId('no-go-bit')).toBeVisible()

  await check.open()
  await expect(check.pressure).toHaveText((await still.pressure.textContent())!)
  await expect(check.page.getByTestId('sentence')).toHaveText(
    (await drawn.getByTestId('sentence').textContent())!.trim(),
  )
  const positions = await whereThingsStand(drawn)
  expect(await whereThingsStand(page)).toEqual(positions)
  await context.close()
})

interface Shift {
  value: number
  what: string
}

/** Every shift of what is in view, those right after a key included. */
async function recordShifts(page: Page) {
  await page.addInitScript(() => {
    const shifts: Shift[] = []
    Object.assign(window, { shifts })
    new PerformanceObserver((list) => {
      for (const entry of list.getEntries() as (PerformanceEntry & {
        value: number
        sources?: { node?: Element }[]
      })[]) {
        const nodes = entry.sources?.map(({ node }) => `${node?.nodeName}.${node?.className ?? ''}`) ?? []
        shifts.push({ value: entry.value, what: nodes.join(' ') })
      }
    }).observe({ type: 'layout-shift', buffered: true })
  })
}

function readShifts(page: Page) {
  return page.evaluate(() => (window as unknown as { shifts: Shift[] }).shifts)
}

test('nothing jumps while the page loads', async ({ check, page }) => {
  await recordShifts(page)
  await check.open()
  await check.waitForPanels()
  await page.waitForTimeout(300)
  const shifts = await readShifts(page)
  const sum = shifts.reduce((total, { value }) => total + value, 0)
  expect(sum, JSON.stringify(shifts)).toBeLessThan(0.02)
})

test('nothing jumps while a bore is typed', async ({ check, page }) => {
  await recordShifts(page)
  await check.open()
  await check.waitForPanels()
  await check.field('Bore now').scrollIntoViewIfNeeded()
  await page.waitForTimeout(300)
  const before = (await readShifts(page)).length
  await check.field('Bore now').fill('')
  for (const letter of '15/32') await page.keyboard.type(letter, { delay: 60 })
  await page.waitForTimeout(300)
  const shifts = (await readShifts(page)).slice(before)
  expect(Math.max(0, ...shifts.map(({ value }) => value)), JSON.stringify(shifts)).toBeLessThan(0.02)
})

test('a check that is open still answers without a network', async ({ check, context }) => {
  await check.open()
  await check.waitForPanels()
  const before = await check.pressure.textContent()
  await context.setOffline(true)
  await check.type('Bore now', '17/32')
  await expect(check.pressure).not.toHaveText(before!)
  await check.openGroup('Pot')
  await expect(check.field('Piping')).toBeVisible()
})

test('the first scripts come without the chart, the panels or rare units', async ({
  check,
  page,
  request,
}) => {
  const first = await (await request.get('/')).text()
  const named = [...first.matchAll(/\/assets\/[\w-]+\.js/g)].map(([name]) => name)
  expect(named.length).toBeGreaterThan(1)
  expect(named.filter((name) => /chart|panel|readOtherUnit/i.test(name))).toEqual([])
  const asked: string[] = []
  page.on('request', (each) => asked.push(new URL(each.url()).pathname))
  await check.open()
  await check.waitForPanels()
  expect(asked.some((name) => /chart/i.test(name))).toBe(true)
  expect(asked.filter((name) => /readOtherUnit/.test(name))).toEqual([])
})

test('the theme and language of the device are there from the first paint', async ({
  browser,
  complaints,
}) => {
  const context = await browser.newContext({ colorScheme: 'dark', locale: 'es-MX' })
  const page = await context.newPage()
  page.on('console', (message) => {
    if (message.type() === 'error') complaints.push(message.text())
  })
  await page.goto('/')
  await expect(page.locator('html')).toHaveAttribute('data-theme', 'dark')
  await expect(page.getByTestId('verdict')).toHaveText('Aguanta')
  await expect(page.getByTestId('verdict')).toBeVisible()
  await context.close()
})
