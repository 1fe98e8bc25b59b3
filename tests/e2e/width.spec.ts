import type { Page } from '@playwright/test'
import { expect, test } from './support/test.ts'

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

for (const [name, width, rootSize] of [
  ['at 360 px', 360, '100%'],
  ['with text at 200 %', 390, '200%'],
  ['at 320 px, as a desk magnified to 400 % shows it', 320, '100%'],
] as const) {
  for (const language of ['en', 'es']) {
    test(`nothing is cut off or scrolls sideways ${name}, in ${language}`, async ({ check, page }) => {
      await page.setViewportSize({ width, height: 780 })
      await page.addInitScript((chosen) => {
        localStorage.setItem('sixteenth.preferences', JSON.stringify({ language: chosen }))
      }, language)
      await check.open()
      await page.evaluate((size) => (document.documentElement.style.fontSize = size), rootSize)
      await check.waitForPanels()
      expect(await findWide(page)).toEqual([])
      await check.openEverything()
      expect(await findWide(page), 'with all open').toEqual([])
      for (const other of ['settings', 'sources'] as const) {
        await check.goTo(other)
        await expect(page.getByRole('heading', { level: 1 })).toBeVisible()
        expect(await findWide(page), other).toEqual([])
      }
    })
  }
}
