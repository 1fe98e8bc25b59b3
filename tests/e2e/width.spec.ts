import type { Page } from '@playwright/test'
import { makeCrew, walkBeforeTheDoor, walkBehindTheDoor } from './support/rooms.ts'
import { expect, takeRefusals, test } from './support/test.ts'

/** What reaches past the right edge, by how far; what scrolls in a box of its own does not count. */
function findWide(page: Page): Promise<string[]> {
  return page.evaluate(() => {
    const width = document.documentElement.clientWidth
    const isBoxed = (element: Element) => {
      for (let box = element.parentElement; box && box !== document.body; box = box.parentElement) {
        if (/auto|scroll|hidden/.test(getComputedStyle(box).overflowX)) return true
      }
      return false
    }
    const wide = [...document.body.querySelectorAll('*')]
      .filter((element) => element.getBoundingClientRect().right > width + 0.5 && !isBoxed(element))
      .map(
        (element) => `${element.tagName} ${element.className}: ${element.textContent?.trim().slice(0, 40)}`,
      )
    const page = document.documentElement.scrollWidth
    return page > width ? [`the page is ${page} px wide in ${width}`, ...wide] : wide
  })
}

const sizes = [
  ['at 360 px', 360, '100%'],
  ['with text at 200 %', 390, '200%'],
  ['at 320 px, as a desk magnified to 400 % shows it', 320, '100%'],
] as const

const softly = expect.configure({ soft: true })

/** Nothing is cut off or scrolls sideways, at any of the sizes. */
async function expectNothingWide(page: Page, name: string) {
  for (const [size, width, rootSize] of sizes) {
    await page.setViewportSize({ width, height: 780 })
    await page.evaluate((text) => (document.documentElement.style.fontSize = text), rootSize)
    // A chart follows the width of its place a moment later.
    await softly.poll(() => findWide(page), `${name}, ${size}`).toEqual([])
  }
}

for (const language of ['en', 'es']) {
  test.describe(`in ${language}`, () => {
    test.beforeEach(async ({ page }) => {
      await page.addInitScript((chosen) => {
        localStorage.setItem('sixteenth.preferences', JSON.stringify({ language: chosen }))
      }, language)
      await page.setViewportSize({ width: 360, height: 780 })
    })
    test.afterEach(async ({ page }) => expect(page.locator('html')).toHaveAttribute('lang', language))

    test('nothing of the check is cut off or scrolls sideways', async ({ check, page }) => {
      await check.open()
      await check.waitForPanels()
      await expectNothingWide(page, 'the check')
      await check.openEverything()
      await expectNothingWide(page, 'the check with all open')
      for (const other of ['settings', 'sources'] as const) {
        await check.goTo(other)
        await expect(page.getByRole('heading', { level: 1 })).toBeVisible()
        await expectNothingWide(page, other)
      }
    })

    test('nor anything of accounts and fleet', async ({ baseURL, complaints, desk, page }) => {
      test.slow()
      const crew = await makeCrew(desk)
      const inspect = (room: string) => expectNothingWide(page, room)
      await walkBeforeTheDoor(page, crew, inspect)
      await takeRefusals(complaints, 422)
      await walkBehindTheDoor(page, crew, baseURL!, inspect)
    })
  })
}
