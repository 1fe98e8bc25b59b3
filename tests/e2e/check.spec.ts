import { askApi, CheckScreen, kpaOfPsi, lowestPressureKpa, makeRigOfTheForm } from './support/checkScreen.ts'
import { expect, test } from './support/test.ts'

const verdictWords = {
  holds: ['Holds', 'Aguanta'],
  'barely-holds': ['Barely holds', 'Apenas aguanta'],
  'falls-short': ['Falls short', 'No alcanza'],
  'cannot-run': ['Can’t run', 'No puede trabajar'],
} as const

test('a visitor changes the nozzle and reads the new verdict', async ({ check, request }) => {
  await check.open()
  await expect(check.verdict).toHaveText('Holds')
  await check.type('Bore now', '')
  for (const [typed, newInch] of [
    ['No. 9', 9 / 16],
    ['5/16', 5 / 16],
  ] as const) {
    await check.type('Nozzle, new', typed)
    const answer = await askApi(request, makeRigOfTheForm({ newInch }))
    await expect(check.verdict).toHaveText(verdictWords[answer.verdict][0])
    await expect(check.pressure).toHaveText((lowestPressureKpa(answer) / kpaOfPsi).toFixed(0))
    await expect(check.field('Nozzle, new')).toHaveValue(typed)
  }
  await expect(check.page.getByTestId('no-go-bit')).toBeVisible()
})

test('the figures on the screen are those that the API answers', async ({ check, request }) => {
  await check.open()
  const answer = await askApi(request, makeRigOfTheForm({ newInch: 7 / 16, nowInch: 29 / 64 }))
  const outlet = answer.outlets[0]!
  await expect(check.verdict).toHaveText(verdictWords[answer.verdict][0])
  await expect(check.pressure).toHaveText((lowestPressureKpa(answer) / kpaOfPsi).toFixed(0))
  const needed = answer.atTarget!.requiredFreeAirM3Min / 0.3048 ** 3
  const compressor = answer.atTarget!.requiredCompressorPressureKpa / kpaOfPsi
  const sentence = check.page.getByTestId('sentence')
  await expect(sentence).toContainText(`${answer.atTarget!.airMarginPct.toFixed(0)} % air margin`)
  await expect(sentence).toContainText(`needs ${needed.toFixed(0)} cfm`)
  await expect(sentence).toContainText(`at ${compressor.toFixed(0)} psi`)
  await expect(check.page.getByTestId('no-go-bit')).toHaveText(outlet.noGoBit!.name)
  await expect(check.page.getByTestId('order-bit')).toHaveText(outlet.orderBit!.name)
})

test('units and language change in Settings and the check is still there', async ({
  check,
  page,
  request,
}) => {
  await check.open()
  await check.type('Bore now', '')
  await check.type('Nozzle, new', '5/16')
  await check.goTo('settings')
  await page.getByText('Metric: bar').click()
  await page.getByText('Español').click()
  await expect(page.getByRole('heading', { level: 1 })).not.toHaveText('Settings')
  await check.goTo('check')

  const answer = await askApi(request, makeRigOfTheForm({ newInch: 5 / 16 }))
  const bar = (lowestPressureKpa(answer) / 100).toFixed(1)
  await expect(check.verdict).toHaveText(verdictWords[answer.verdict][1])
  await expect(check.pressure).toHaveText(bar)
  await expect(page.getByTestId('sentence')).toContainText('6.9')
  await expect(page.locator('html')).toHaveAttribute('lang', 'es')

  await page.reload()
  await expect(check.verdict).toHaveText(verdictWords[answer.verdict][1])
  await expect(check.pressure).toHaveText(bar)

  await check.goTo('settings')
  await page.getByText('US: psi').or(page.getByText('psi, cfm')).first().click()
  await page.getByText('English').click()
  await check.goTo('check')
  await expect(check.field('Nozzle, new')).toHaveValue('5/16')
  await expect(check.verdict).toHaveText(verdictWords[answer.verdict][0])
})

test('a colleague opens the link in a clean profile and sees the same figures', async ({
  check,
  page,
  context,
  newProfile,
}) => {
  await context.grantPermissions(['clipboard-read', 'clipboard-write'])
  await check.open()
  await check.type('Nozzle, new', 'No. 8')
  await check.type('Bore now', '17/32')
  await check.type('Target at the nozzle', '95 psi')
  await check.openGroup('Air line')
  await check.type('Length', '150 ft')
  await expect(page).toHaveURL(/#1\./)
  const seen = [await check.verdict.textContent(), await check.pressure.textContent()]
  const sentence = await page.getByTestId('sentence').textContent()
  await page.getByTestId('share').click()
  await expect(page.getByText('Link copied')).toBeVisible()
  const link = await page.evaluate(() => navigator.clipboard.readText())

  const colleague = new CheckScreen(await (await newProfile()).newPage())
  await colleague.open(link)
  expect([await colleague.verdict.textContent(), await colleague.pressure.textContent()]).toEqual(seen)
  expect(await colleague.page.getByTestId('sentence').textContent()).toBe(sentence)
  await expect(colleague.field('Nozzle, new')).toHaveValue('No. 8')
  await expect(colleague.field('Bore now')).toHaveValue('17/32')
  await expect(colleague.group('Air line')).toContainText('150 ft')
})

test('what was typed is there again after a reload, unfinished fields too', async ({ check, page }) => {
  await check.open()
  await check.type('Nozzle, new', 'No. 6')
  await check.type('Bore now', 'seven sixteenths or so, from what I remember')
  await expect(check.staleNote).toContainText('last whole answer')
  await page.waitForTimeout(400)
  await page.reload()
  await expect(check.field('Nozzle, new')).toHaveValue('No. 6')
  await expect(check.field('Bore now')).toHaveValue('seven sixteenths or so, from what I remember')
})

test('a tap on Settings right after a field is obeyed, and going back finds the check as it was left', async ({
  check,
  page,
}) => {
  await check.open()
  await page.route(/SettingsView/, async (route) => {
    await new Promise((resolve) => setTimeout(resolve, 600))
    await route.continue()
  })
  await check.type('Bore now', '1/2')
  await check.goTo('settings')
  await expect(page.getByRole('heading', { level: 1 })).toHaveText('Settings')
  await page.goBack()
  await expect(check.field('Bore now')).toHaveValue('1/2')
  await page.reload()
  await expect(check.field('Bore now')).toHaveValue('1/2')
})

test('starting over brings the first rig back', async ({ check, page }) => {
  await check.open()
  const first = await check.pressure.textContent()
  await check.type('Bore now', '5/8')
  await expect(check.pressure).not.toHaveText(first!)
  await page.getByRole('button', { name: 'Start over' }).click()
  await expect(check.pressure).toHaveText(first!)
  await expect(check.field('Bore now')).toHaveValue('29/64')
  await expect(page).toHaveURL(/\/$/)
})

test('the address of a page that is not there says so', async ({ page }) => {
  await page.goto('/no-such-page')
  await expect(page.getByRole('heading', { level: 1 })).toHaveText('Nothing here')
  await page.getByRole('link', { name: 'To the pressure check' }).click()
  await expect(page.getByTestId('verdict')).toBeVisible()
})

test('each of two nozzles has its own bits and the lower pressure is the verdict', async ({
  check,
  page,
}) => {
  await check.open()
  await check.type('Nozzle, new', 'No. 4')
  await check.type('Bore now', '')
  await page.getByRole('button', { name: 'Add a nozzle' }).click()
  await expect(page.getByRole('heading', { name: 'Nozzle 2' })).not.toHaveCount(0)
  await expect(page.locator('.bore')).toHaveCount(2)
  await check.field('Nozzle, new').nth(1).fill('No. 5')
  const eachPressure = page.locator('.others b')
  await expect(eachPressure).toHaveCount(2)
  await expect(check.verdict).toHaveText('Holds')
  const pressures = (await eachPressure.allTextContents()).map((text) => parseFloat(text))
  await expect(check.pressure).toHaveText(String(Math.min(...pressures)))
  // A wider nozzle on a line like the other's sees less pressure.
  expect(pressures[1]!).toBeLessThan(pressures[0]!)

  await check.field('Nozzle, new').nth(1).fill('No. 12')
  await expect(check.verdict).toHaveText('Falls short')
  await page.getByRole('button', { name: 'Remove nozzle 2' }).click()
  await expect(check.verdict).toHaveText('Holds')
  await expect(page.locator('.bore')).toHaveCount(1)
})
