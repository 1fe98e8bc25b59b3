import { goodPassword, bringIn, makeRig } from './support/crewDesk.ts'
import { changeOf } from '../support/fleet.ts'
import { CheckScreen } from './support/checkScreen.ts'
import { RigScreen } from './support/rigScreen.ts'
import { expect, test } from './support/mailedTest.ts'

// One server with its mail server for the file.
test.describe.configure({ mode: 'default' })

test('a visitor’s check becomes the first saved rig of a new company, and nothing is typed twice', async ({
  check,
  page,
  context,
  mailed,
}, { project }) => {
  const email = `robin.${project.name}@ridge.test`
  await check.open()
  await check.type('Nozzle, new', 'No. 8')
  await check.type('Bore now', '17/32')
  await check.type('Target at the nozzle', '95 psi')
  await check.type('Altitude', '5200 ft')
  await check.openGroup('Blast hose')
  await check.type('Length', '75 ft')
  await expect(check.staleNote).toBeEmpty()
  const verdict = (await check.verdict.textContent())!
  const pressure = (await check.pressure.textContent())!
  await page.getByTestId('save-as-rig').click()

  await page.getByRole('link', { name: 'Create one' }).click()
  await page.getByLabel('Your name').fill('Robin Vale')
  await page.getByLabel('E-mail').fill(email)
  await page.getByLabel('Password', { exact: true }).fill(goodPassword)
  await page.getByLabel('Company', { exact: true }).fill('Ridge Line')
  await page.getByLabel('Currency').selectOption('USD')
  await page.getByLabel('Time zone').selectOption('America/Denver')
  await page.getByRole('button', { name: 'Create account' }).click()
  await expect(page.getByRole('status').filter({ hasText: email })).toBeVisible()

  // A mail program opens a window of its own.
  const { link } = await mailed.findLink(email, 'confirm')
  const opened = await context.newPage()
  await opened.goto(link)
  await opened.getByRole('button', { name: 'Confirm address' }).click()
  await expect(opened.getByLabel('E-mail')).toHaveValue(email)
  await expect(opened).toHaveURL(/\/confirm$/)
  await opened.getByLabel('Password', { exact: true }).fill(goodPassword)
  await opened.getByRole('button', { name: 'Sign in' }).click()

  const rigs = new RigScreen(opened)
  await expect(rigs.heading).toHaveText('Save the check as a rig')
  await expect(rigs.field('Nozzle, new')).toHaveValue('No. 8')
  await expect(rigs.field('Bore now')).toHaveValue('17/32')
  await expect(rigs.field('Target at the nozzle')).toHaveValue('95 psi')
  await expect(rigs.verdict).toHaveText(verdict)
  await expect(rigs.pressure).toHaveText(pressure)
  await rigs.type('Name of the rig', 'Trailer nine')
  await rigs.save('Trailer nine')
  await expect(rigs.verdict).toHaveText(verdict)
  await expect(rigs.pressure).toHaveText(pressure)

  await opened.reload()
  await expect(rigs.heading).toHaveText('Trailer nine')
  await expect(rigs.verdict).toHaveText(verdict)
  await expect(rigs.pressure).toHaveText(pressure)
  await rigs.openList()
  await expect(rigs.card('Trailer nine')).toContainText(verdict)
  await expect(rigs.card('Trailer nine')).toContainText(pressure)
  await expect(opened.getByText('The check you had open is still here.')).toHaveCount(0)
})

test('a blaster joins from the mail, sees the rig, and can write it neither by screen nor by API', async ({
  page,
  context,
  mailed,
  newProfile,
}, { project }) => {
  const { desk, address } = mailed
  const company = desk.makeCompany()
  const owner = desk.makePerson(company, undefined, 'Robin Vale')
  const rig = await makeRig(owner, 'Trailer nine')
  const stranger = desk.makePerson(desk.makeCompany('Quarry Side'))
  const strangersRig = await makeRig(stranger, 'Far pot')
  const email = `lee.${project.name}@ridge.test`

  await bringIn(context, owner, address)
  await page.goto('/people')
  await page.getByTestId('invite').click()
  await page.getByLabel('E-mail', { exact: true }).fill(email)
  await expect(page.getByRole('checkbox', { name: 'blaster' })).toBeChecked()
  await page.getByRole('button', { name: 'Send invitation' }).click()
  await expect(page.getByText(`Invitation sent to ${email}.`)).toBeVisible()
  const { link, mail } = await mailed.findLink(email, 'invitation')
  expect(mail.html).toContain(link)

  const blasters = await newProfile()
  const opened = await blasters.newPage()
  await opened.goto(link)
  await expect(opened.getByText('Robin Vale invites')).toContainText(company.name)
  await expect(opened).toHaveURL(/\/invitation$/)
  await opened.getByLabel('Your name').fill('Lee Marsh')
  await opened.getByLabel('Password', { exact: true }).fill(goodPassword)
  await opened.getByRole('button', { name: 'Join' }).click()
  const rigs = new RigScreen(opened)
  await expect(rigs.card('Trailer nine')).toBeVisible()
  const check = new CheckScreen(opened)
  await check.goTo('check')
  await expect(check.verdict).toBeVisible()
  await expect(opened.getByTestId('save-as-rig')).toHaveCount(0)
  await check.goTo('rigs')
  await expect(rigs.card('Trailer nine')).toBeVisible()
  await expect(opened.getByRole('link', { name: 'New rig' })).toHaveCount(0)
  await rigs.card('Trailer nine').click()
  await expect(rigs.heading).toHaveText('Trailer nine')
  await expect(rigs.verdict).toBeVisible()
  for (const name of ['Edit', 'Duplicate', 'Archive', 'Delete'])
    await expect(
      opened.getByRole('link', { name, exact: true }).or(opened.getByRole('button', { name, exact: true })),
    ).toHaveCount(0)
  await opened.goto(`/rigs/${rig.id}/edit`)
  await expect(rigs.heading).toHaveText('Not open to you')
  await opened.goto(`/rigs/${strangersRig.id}`)
  await expect(rigs.heading).toHaveText('No such rig')

  const path = `/api/v1/rigs/${rig.id}`
  const change = changeOf(rig, { name: 'Mine now' })
  const { request } = blasters
  expect((await request.get(path)).status()).toBe(200)
  expect((await request.put(path, { data: change })).status()).toBe(403)
  expect((await request.delete(`${path}?version=${rig.version}`)).status()).toBe(403)
  expect((await request.get(`/api/v1/rigs/${strangersRig.id}`)).status()).toBe(404)
  const strangersChange = { data: changeOf(strangersRig, { name: 'Mine now' }) }
  expect((await context.request.put(`/api/v1/rigs/${strangersRig.id}`, strangersChange)).status()).toBe(404)
  // the very same change is good for who may make it
  expect((await context.request.put(path, { data: change })).status()).toBe(200)
})
