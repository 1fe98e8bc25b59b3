import { bringIn } from './support/crewDesk.ts'
import { expect, test } from './support/test.ts'

function fragmentOf(text: string): string {
  return `#1.${Buffer.from(text).toString('base64url')}`
}

const brokenLinks: Record<string, string> = {
  garbage: '#hello%20there',
  'a cut link': fragmentOf('{"target":{"text":"90 psi"}}').slice(0, -6),
  'a later version': fragmentOf('{}').replace('#1.', '#9.'),
  'a script in a field of its own': fragmentOf('{"html":"<script>alert(1)</script>"}'),
  'a prototype': fragmentOf('{"__proto__":{"isUsed":true}}'),
  'a number where a text belongs': fragmentOf('{"target":{"text":100}}'),
  'a huge one': `#1.${'A'.repeat(200_000)}`,
  'a hundred nozzles': fragmentOf(`{"outlets":[${Array(100).fill('{}').join()}]}`),
}

test('a broken link opens a clean check with one sentence', async ({ check, page }) => {
  for (const [name, fragment] of Object.entries(brokenLinks)) {
    await test.step(name, async () => {
      await page.goto('about:blank')
      await check.open(`/${fragment}`)
      await expect(page.getByRole('alert')).toHaveCount(1)
      await expect(page.getByRole('alert')).toContainText('held no check')
      await expect(check.field('Target at the nozzle')).toHaveValue('100 psi')
      await expect(check.verdict).toHaveText('Holds')
    })
  }
})

test('a script that is sent as the text of a field is shown as text', async ({ check, page }) => {
  const text = '<img src=x onerror=alert(1)>'
  let hasAsked = false
  page.on('dialog', () => (hasAsked = true))
  await check.open(`/${fragmentOf(JSON.stringify({ target: { text } }))}`)
  await expect(check.field('Target at the nozzle')).toHaveValue(text)
  await expect(page.locator('img')).toHaveCount(0)
  expect(hasAsked).toBe(false)
})

test('signing in leads to no other site, whatever the address asks for', async ({
  page,
  context,
  desk,
  baseURL,
}) => {
  const asked = ['https://elsewhere.test/', '//elsewhere.test/rigs', '/\\elsewhere.test']
  await page.goto(`/sign-in?next=${encodeURIComponent(asked[0]!)}`)
  await page.getByRole('button', { name: /^Ida Marsh/ }).click()
  await expect(page.getByTestId('verdict')).toBeVisible()
  await expect(page).toHaveURL(`${baseURL}/`)

  await context.clearCookies()
  await bringIn(context, desk.makePerson(desk.makeCompany()), baseURL!)
  for (const next of asked.slice(1)) {
    await page.goto(`/sign-in?next=${encodeURIComponent(next)}`)
    await expect(page.getByTestId('verdict')).toBeVisible()
    await expect(page).toHaveURL(`${baseURL}/`)
  }
  await page.goto('/sign-in?next=%2Frigs')
  await expect(page).toHaveURL(`${baseURL}/rigs`)
})
