import type { Page } from '@playwright/test'
import { bringIn, goodPassword, makeRig, readRig } from './support/crewDesk.ts'
import { RigScreen } from './support/rigScreen.ts'
import { expect, takeRefusals, test } from './support/test.ts'

async function deactivate(page: Page, name: string) {
  const row = page
    .getByTestId('people')
    .locator('li, tbody')
    .filter({ has: page.getByRole('button', { name: `Change ${name}` }) })
  await page.getByRole('button', { name: `Change ${name}` }).click()
  await page.getByRole('button', { name: 'Deactivate …' }).click()
  await page.getByRole('button', { name: `Deactivate ${name}` }).click()
  await expect(row).toContainText('deactivated')
}

test('who is deactivated is out at the next tap, and what they had typed is still there when they are let in again', async ({
  baseURL,
  context,
  page,
  complaints,
  desk,
  newProfile,
}) => {
  const company = desk.makeCompany()
  const admin = desk.makePerson(company, ['admin'], 'Ida Cole')
  desk.makePerson(company, ['owner'], 'Robin Vale')
  const lee = await desk.makePersonWithPassword(company, ['blaster'], 'Lee Marsh')
  const kim = await desk.makePersonWithPassword(company, ['owner'], 'Kim Alder')
  const rig = await makeRig(kim, 'Trailer nine')
  await makeRig(kim, 'Spare pot')
  const [leesPages, kimsPages] = [await newProfile(), await newProfile()]
  await bringIn(leesPages, lee, baseURL!)
  await bringIn(kimsPages, kim, baseURL!)
  await bringIn(context, admin, baseURL!)
  const lees = new RigScreen(await leesPages.newPage())
  const kims = new RigScreen(await kimsPages.newPage())
  await Promise.all([lees.open(rig), kims.edit(rig), page.goto('/people')])
  await kims.type('Name of the rig', 'Trailer ten')

  await deactivate(page, 'Lee Marsh')
  await deactivate(page, 'Kim Alder')

  const told = 'You have been signed out'
  await lees.page.getByLabel('Compressor today').selectOption('Spare pot’s compressor')
  await expect(lees.page.getByRole('heading', { name: told })).toBeVisible()
  expect((await leesPages.request.get(`/api/v1/rigs/${rig.id}`)).status()).toBe(401)
  await lees.page.reload()
  await expect(lees.heading).toHaveText('Sign in')
  await expect(lees.page.getByText('Trailer nine')).toHaveCount(0)

  await kims.saveButton.click()
  await expect(kims.page.getByRole('heading', { name: told })).toBeVisible()
  await expect(kims.field('Name of the rig')).toHaveValue('Trailer ten')
  await takeRefusals(complaints, 401)

  await page.getByRole('button', { name: 'Change Kim Alder' }).click()
  await page.getByRole('button', { name: 'Reactivate', exact: true }).click()
  await expect(page.getByTestId('people').getByText('deactivated')).toHaveCount(1)
  await kims.page.getByLabel('Password', { exact: true }).fill(goodPassword)
  await kims.page.getByRole('button', { name: 'Sign in', exact: true }).click()
  await expect(kims.page.getByRole('heading', { name: told })).toHaveCount(0)
  await expect(kims.field('Name of the rig')).toHaveValue('Trailer ten')
  await kims.save('Trailer ten')
  const robin = desk.makePerson(company, ['owner'])
  expect(await readRig(robin, rig.id)).toMatchObject({ name: 'Trailer ten', version: rig.version + 1 })
})

test('one tap enters the demo, signing out leaves it, and its cookie is dead', async ({
  page,
  context,
  isMobile,
  request,
}) => {
  await page.goto('/sign-in?next=/rigs')
  await page.getByRole('button', { name: /^Walt Hendry/ }).click()
  await expect(page.getByRole('heading', { level: 1 })).toHaveText('Rigs')
  await expect(page.getByRole('article')).toHaveCount(5)
  const cookies = await context.cookies()
  const cookie = cookies.map(({ name, value }) => `${name}=${value}`).join('; ')
  expect((await request.get('/api/v1/fleet', { headers: { cookie } })).status()).toBe(200)

  const navigation = page.getByRole('navigation', { name: 'Main' })
  if (isMobile) {
    await navigation.getByRole('link', { name: 'More' }).click()
    await page.getByRole('link', { name: 'Your account' }).click()
  } else await navigation.getByRole('link', { name: 'Account' }).click()
  await page.getByRole('button', { name: 'Sign out' }).click()
  await expect(page.getByTestId('verdict')).toBeVisible()
  await navigation.getByRole('link', { name: 'Rigs' }).click()
  await expect(page.getByRole('link', { name: 'Sign in or create an account' })).toBeVisible()
  await expect(page.getByRole('article')).toHaveCount(0)
  expect((await request.get('/api/v1/fleet', { headers: { cookie } })).status()).toBe(401)
})

test('the keyboard alone signs in and opens a rig', async ({ page, desk, rigScreen }) => {
  const owner = await desk.makePersonWithPassword(desk.makeCompany())
  await makeRig(owner, 'Trailer nine')
  await page.goto('/sign-in?next=/rigs')
  const tabTo = async (name: string, target = page.locator(':focus')) => {
    for (let i = 0; i < 25; i++) {
      await page.keyboard.press('Tab')
      const label = await target.evaluate(
        (element) => (element as HTMLInputElement).labels?.[0]?.textContent ?? element.textContent ?? '',
      )
      if (label.trim() === name) return
    }
    throw new Error(`Tab never comes to ${name}`)
  }
  await expect(page.getByRole('heading', { level: 1 })).toHaveText('Sign in')
  await tabTo('E-mail')
  await page.keyboard.type(owner.email)
  await tabTo('Password')
  await page.keyboard.type(goodPassword)
  await page.keyboard.press('Enter')
  await expect(rigScreen.heading).toHaveText('Rigs')
  await expect(rigScreen.card('Trailer nine')).toBeVisible()
  await tabTo('Trailer nine')
  await page.keyboard.press('Enter')
  await expect(rigScreen.heading).toHaveText('Trailer nine')
  await expect(rigScreen.verdict).toBeVisible()
})
