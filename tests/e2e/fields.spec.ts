import type { Locator } from '@playwright/test'
import { expect, test } from './support/test.ts'

/** The sentence a screen reader would read with the field. */
async function sentenceOf(field: Locator): Promise<string> {
  const id = await field.getAttribute('aria-describedby')
  return id === null ? '' : await field.page().locator(`[id="${id}"]`).innerText()
}

test('nonsense in every field gets its sentence there, loses nothing and leaves the last verdict greyed', async ({
  check,
  page,
}) => {
  await check.open()
  await check.openEverything()
  const pressure = (await check.pressure.textContent())!
  const colourOf = () => check.verdict.evaluate((element) => getComputedStyle(element).color)
  const colour = await colourOf()
  await check.type('Target at the nozzle', 'a lot')
  await expect(check.staleNote).toContainText('last whole answer')
  expect(await colourOf()).not.toBe(colour)

  const fields = await check.form.getByRole('textbox').all()
  expect(fields.length).toBeGreaterThan(20)
  for (const [index, field] of fields.entries()) await field.fill(`nonsense ${index}`)
  await fields[0]!.blur()
  await expect(page.locator('form .problem')).toHaveCount(fields.length)
  const shown = await check.form.evaluate((form) =>
    [...form.querySelectorAll('input[type="text"]')].map((field) => ({
      text: (field as HTMLInputElement).value,
      isInvalid: field.getAttribute('aria-invalid'),
      sentence: document.getElementById(field.getAttribute('aria-describedby') ?? '')?.textContent ?? '',
    })),
  )
  for (const [index, { text, isInvalid, sentence }] of shown.entries()) {
    expect(text).toBe(`nonsense ${index}`)
    expect(isInvalid).toBe('true')
    expect(sentence).toMatch(/type it like .+\.$/)
  }
  await expect(check.pressure).toHaveText(pressure)
  await expect(check.verdict).toHaveText('Holds')

  await page.waitForTimeout(400)
  await page.reload()
  await expect(check.form).toBeVisible()
  await check.openEverything()
  const kept = await check.form
    .getByRole('textbox')
    .evaluateAll((inputs) => inputs.map((input) => (input as HTMLInputElement).value))
  expect(kept).toEqual(shown.map(({ text }) => text))
})

const refused: [field: string, typed: string, sentence: RegExp][] = [
  ['Target at the nozzle', '', /Fill this in/],
  ['Target at the nozzle', '100000 psi', /^From 1\.5\spsi to 507\.6\spsi/],
  ['Target at the nozzle', '100 ft', /“ft” is not a unit for this/],
  ['Altitude', '90 %', /“%” is not a unit for this/],
  ['Altitude', '1e999', /type it like 5,200 ft/],
  ['Air', '-500 °F', /^From /],
  ['Bore now', '3/8', /A bore only grows/],
  ['Nozzle, new', '10', /Which is it/],
  ['Nozzle, new', '🙂', /type it like No\. 6/],
  ['Nozzle, new', '5/0', /type it like No\. 6/],
]
test('what cannot be is answered with a sentence that says what could', async ({ check, page }) => {
  await check.open()
  for (const [name, typed, sentence] of refused) {
    await test.step(`“${typed}” in “${name}”`, async () => {
      const field = check.field(name)
      const before = await field.inputValue()
      await check.type(name, typed)
      await expect(page.locator('.problem')).toHaveCount(1)
      expect(await sentenceOf(field)).toMatch(sentence)
      await expect(field).toHaveValue(typed)
      await check.type(name, before)
      await expect(page.locator('.problem')).toHaveCount(0)
    })
  }
})

test('a half-typed number is not scolded before there is a pause', async ({ check, page }) => {
  await check.open()
  await page.clock.install()
  await page.clock.pauseAt(Date.now() + 60_000)
  await check.field('Target at the nozzle').fill('9 b')
  await page.clock.runFor(500)
  await expect(check.staleNote).toContainText('last whole answer')
  await expect(page.locator('.problem')).toHaveCount(0)
  await page.clock.runFor(500)
  await expect(page.locator('.problem')).toHaveCount(1)
  await check.field('Target at the nozzle').fill('9 bar')
  await page.clock.runFor(100)
  await expect(check.staleNote).toBeEmpty()
  await expect(page.locator('.problem')).toHaveCount(0)
})

test('a metric 1,250 is questioned and one tap settles it', async ({ check, page }) => {
  await page.addInitScript(() => {
    localStorage.setItem('sixteenth.preferences', JSON.stringify({ units: 'metric' }))
  })
  await check.open()
  await check.type('Altitude', '1,250')
  const altitude = check.field('Altitude')
  await expect.poll(() => sentenceOf(altitude)).toContain('two ways')
  const readings = page.locator('.readings button')
  await expect(readings).toHaveText(['1250 m', '1.25 m'])
  await readings.first().click()
  await expect(altitude).toHaveValue('1250 m')
  await expect(altitude).not.toHaveAttribute('aria-invalid', 'true')
  await expect(readings).toHaveCount(0)
  await expect(check.staleNote).toBeEmpty()
})

test('a unit that crews seldom use is fetched and read', async ({ check }) => {
  await check.open()
  const before = await check.pressure.textContent()
  await check.type('Target at the nozzle', '0.689476 MPa')
  await expect(check.staleNote).toBeEmpty()
  await check.openGroup('Blast hose')
  await check.type('Length', '16.6666667 yd')
  await expect(check.staleNote).toBeEmpty()
  await expect(check.pressure).toHaveText(before!)
})

test('a change of units keeps what was typed and shows its value', async ({ check, page }) => {
  await check.open()
  await check.type('Target at the nozzle', '95.55 psi')
  await check.goTo('settings')
  await page.getByText('Metric: bar').click()
  await check.goTo('check')
  await expect(check.field('Target at the nozzle')).toHaveValue(/^6\.59 bar$/)
  await check.goTo('settings')
  await page.getByText('US: psi').click()
  await check.goTo('check')
  await expect(check.field('Target at the nozzle')).toHaveValue('95.55 psi')
})
