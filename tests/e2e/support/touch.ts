import type { Page } from '@playwright/test'
import { expect } from './test.ts'

/** A thumb finds everything that is touched. */
export async function expectLargeTargets(page: Page, name: string) {
  const small = await page.evaluate(() => {
    // A field is touched anywhere on its card, a hidden box by its label, a card anywhere by the link that covers it.
    const areaOf = (element: Element) => element.closest('.quantity, label, .choice, .card') ?? element
    return [...document.querySelectorAll('button, a, summary, input, select, textarea, [role="slider"]')]
      .filter((element) => element.checkVisibility() && !element.matches('.skip'))
      .map((element) => ({ element, height: areaOf(element).getBoundingClientRect().height }))
      .filter(({ height, element }) => {
        const isCell = element.closest('[data-testid="air-use"] td') && innerWidth >= 700
        return height < (isCell ? 32 : 48)
      })
      .map(({ element, height }) => `${height}: ${element.outerHTML.slice(0, 160)}`)
  })
  expect.soft(small, name).toEqual([])
}
