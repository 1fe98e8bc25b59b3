import type { Page } from '@playwright/test'
import { expect, test } from './support/test.ts'
import { expectLargeTargets } from './support/touch.ts'

test('everything that is touched is 48 px high', async ({ check, page }) => {
  await check.open()
  await check.waitForPanels()
  await check.openEverything()
  await expectLargeTargets(page, 'the check with all open')
})

test('the keyboard alone changes the check, and always shows where it is', async ({ check, page }) => {
  await check.open()
  const focused = page.locator(':focus')
  await page.keyboard.press('Tab')
  await expect(focused).toHaveText('Skip to the verdict')
  await expect(focused).toBeInViewport()
  await page.keyboard.press('Enter')
  await expect(page.locator('#main')).toBeFocused()

  const target = check.field('Target at the nozzle')
  for (let i = 0; i < 20 && !(await target.evaluate((element) => element === document.activeElement)); i++)
    await page.keyboard.press('Tab')
  await expect(target).toBeFocused()
  await page.keyboard.press('Control+A')
  await page.keyboard.type('140 psi')
  await expect(check.verdict).toHaveText('Falls short')
  await page.keyboard.press('Control+A')
  await page.keyboard.type('90 psi')
  await expect(check.verdict).toHaveText('Holds')

  const compressor = check.group('Compressor')
  for (let i = 0; i < 6 && !(await compressor.evaluate((element) => element === document.activeElement)); i++)
    await page.keyboard.press('Tab')
  await expect(compressor).toBeFocused()
  expect(await outlineOf(page)).toBeGreaterThanOrEqual(2)
  await page.keyboard.press('Enter')
  await expect(compressor).toHaveAttribute('aria-expanded', 'true')

  const aftercooled = page.getByRole('radio', { name: 'aftercooled' })
  for (
    let i = 0;
    i < 40 && !(await aftercooled.evaluate((element) => element === document.activeElement));
    i++
  )
    await page.keyboard.press('Tab')
  await expect(aftercooled).toBeFocused()
  expect(await outlineOf(page)).toBeGreaterThanOrEqual(2)
  await page.keyboard.press('ArrowRight')
  await expect(page.getByRole('radio', { name: 'bare' })).toBeChecked()
  await expect(compressor).toContainText('bare')
})

/** The widest line around what has the focus or around the card it stands in, px. */
function outlineOf(page: Page): Promise<number> {
  return page.evaluate(() => {
    let widest = 0
    const closest = [document.activeElement, document.activeElement?.closest('label, .quantity')]
    for (const element of closest) {
      if (!element) continue
      const style = getComputedStyle(element)
      if (style.outlineStyle !== 'none') widest = Math.max(widest, parseFloat(style.outlineWidth))
      const ring = /0px 0px 0px (\d+)px/.exec(style.boxShadow)
      if (ring) widest = Math.max(widest, Number(ring[1]))
    }
    return widest
  })
}

test('each stop of the Tab key can be seen', async ({ check, page }) => {
  await check.open()
  await check.waitForPanels()
  const unseen: string[] = []
  for (let i = 0; i < 60; i++) {
    await page.keyboard.press('Tab')
    const name = await page.evaluate(() => document.activeElement?.outerHTML.slice(0, 100) ?? '')
    if (name.startsWith('<body')) break
    if ((await outlineOf(page)) < 2) unseen.push(name)
  }
  expect(unseen).toEqual([])
})

test('the mark of the bore now is moved by keys and by a thumb', async ({ check, page }) => {
  await check.open()
  const slider = page.getByTestId('bore-slider')
  await slider.focus()
  await page.keyboard.press('Home')
  await expect(check.field('Bore now')).toHaveValue('7/16 in')
  await page.keyboard.press('ArrowRight')
  await expect(check.field('Bore now')).toHaveValue('29/64 in')
  const before = Number(await check.pressure.textContent())
  await page.keyboard.press('PageUp')
  await expect(check.field('Bore now')).toHaveValue('33/64 in')
  expect(Number(await check.pressure.textContent())).toBeLessThan(before)

  const box = (await slider.boundingBox())!
  await page.mouse.move(box.x + box.width / 2, box.y + box.height / 2)
  await page.mouse.down()
  await page.mouse.move(box.x - 400, box.y + box.height / 2, { steps: 5 })
  await page.mouse.up()
  await expect(check.field('Bore now')).toHaveValue('7/16 in')
})
