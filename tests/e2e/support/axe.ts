import type { Page } from '@playwright/test'
import axe from 'axe-core'
import { expect } from './test.ts'

export const otherThemes = ['dark', 'sun']

/** Serious and critical findings, each with the places it stands. */
function findBarriers(page: Page, rules?: string[]): Promise<string[]> {
  return page.evaluate(async (runOnly) => {
    const { axe: inPage } = window as unknown as { axe: typeof axe }
    const options = { resultTypes: ['violations' as const], preload: false, ...(runOnly && { runOnly }) }
    const { violations } = await inPage.run(document, options)
    return violations
      .filter(({ impact }) => impact === 'serious' || impact === 'critical')
      .map(({ id, nodes }) => `${id}: ${nodes.map(({ html }) => html).join(' ')}`)
  }, rules)
}

/** axe comes into a page once; a colour that is on its way to another is no finding. */
async function prepare(page: Page) {
  if (await page.evaluate(() => 'axe' in window)) return
  await page.evaluate(axe.source)
  await page.evaluate(() => {
    const sheet = new CSSStyleSheet()
    sheet.replaceSync('* { transition: none !important }')
    document.adoptedStyleSheets.push(sheet)
  })
}

/** Nothing in the page as it stands, in any of the themes: of what axe looks for, a theme changes only the colours. */
export async function expectNoBarriers(page: Page, name: string, themes = otherThemes) {
  await prepare(page)
  const root = page.locator('html')
  await expect(root).toHaveAttribute('data-theme', 'light')
  expect.soft(await findBarriers(page), `${name}, light`).toEqual([])
  for (const theme of themes) {
    await root.evaluate((element, chosen) => (element.dataset.theme = chosen), theme)
    expect.soft(await findBarriers(page, ['color-contrast']), `${name}, ${theme}`).toEqual([])
  }
  await root.evaluate((element) => (element.dataset.theme = 'light'))
}
