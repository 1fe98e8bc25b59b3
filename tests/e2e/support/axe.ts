import AxeBuilder from '@axe-core/playwright'
import type { Page } from '@playwright/test'
import type { CheckScreen } from './checkScreen.ts'
import { expect } from './test.ts'

/** Serious and critical findings, each with the first place it stands. */
async function findBarriers(page: Page): Promise<string[]> {
  const { violations } = await new AxeBuilder({ page }).options({ resultTypes: ['violations'] }).analyze()
  return violations
    .filter(({ impact }) => impact === 'serious' || impact === 'critical')
    .map(({ id, nodes }) => `${id}: ${nodes.map(({ html }) => html).join(' ')}`)
}

/** Every page in one theme, the check with all open and two fields wrong. */
export async function expectNoBarriers(check: CheckScreen, page: Page, theme: string) {
  await page.addInitScript((name) => {
    localStorage.setItem('sixteenth.preferences', JSON.stringify({ theme: name }))
  }, theme)
  await check.open()
  await check.waitForPanels()
  await check.openEverything()
  await check.type('Target at the nozzle', 'a lot')
  await check.type('Nozzle, new', '9')
  expect(await findBarriers(page), 'the check with all open and two fields wrong').toEqual([])
  await check.goTo('settings')
  await expect(page.getByRole('heading', { level: 1 })).toHaveText('Settings')
  expect(await findBarriers(page), 'settings').toEqual([])
  await check.goTo('sources')
  await expect(page.getByRole('heading', { level: 1 })).toHaveText('Where the figures come from')
  expect(await findBarriers(page), 'sources').toEqual([])
}
