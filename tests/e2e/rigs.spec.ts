import { bringIn, makeRig, readRig } from './support/crewDesk.ts'
import { RigScreen } from './support/rigScreen.ts'
import { expect, takeRefusals, test } from './support/test.ts'

const kpaOfPsi = 6.894757293168

test('two people save the same rig: the second sees what changed, chooses, and nothing is lost', async ({
  baseURL,
  context,
  rigScreen: first,
  complaints,
  desk,
  newProfile,
}) => {
  const company = desk.makeCompany()
  const kim = desk.makePerson(company, ['owner'], 'Kim Alder')
  const jo = desk.makePerson(company, ['owner'], 'Jo Barton')
  const rig = await makeRig(kim, 'Trailer nine')
  await bringIn(context, kim, baseURL!)
  const elsewhere = await newProfile()
  await bringIn(elsewhere, jo, baseURL!)
  const second = new RigScreen(await elsewhere.newPage())

  await Promise.all([first.edit(rig), second.edit(rig)])
  await first.type('Name of the rig', 'North trailer')
  await first.type('Target at the nozzle', '95 psi')
  await second.type('Name of the rig', 'South trailer')
  await second.type('Bore now', '3/8')
  await first.save('North trailer')

  await second.saveButton.click()
  await expect(second.conflict).toContainText('Kim Alder saved it too')
  await takeRefusals(complaints, 409)
  const asked = (name: string) => second.conflict.getByRole('group', { name: new RegExp(`^${name}`) })
  await expect(second.conflict.getByRole('group')).toHaveCount(3)
  await expect(asked('Target').getByRole('radio', { name: /Kim Alder.*95\s?psi/ })).toBeChecked()
  await expect(asked('Bore now').getByRole('radio', { name: /yours.*3\/8/ })).toBeChecked()
  const bothNames = asked('Name').getByRole('radio')
  await expect(bothNames).toHaveCount(2)
  await expect(bothNames.first()).not.toBeChecked()
  await expect(bothNames.last()).not.toBeChecked()
  const settle = second.button('Save it so')
  await expect(settle).toBeDisabled()
  // Nothing is written before the choice, and what was typed is kept.
  expect(await readRig(kim, rig.id)).toMatchObject({ name: 'North trailer', version: rig.version + 1 })
  await expect(second.field('Name of the rig')).toHaveValue('South trailer')

  await asked('Name')
    .getByRole('radio', { name: /yours.*South trailer/ })
    .check()
  await settle.click()
  await expect(second.heading).toHaveText('South trailer')
  const kept = await readRig(kim, rig.id)
  expect(kept).toMatchObject({ name: 'South trailer', version: rig.version + 2 })
  expect(kept.targetNozzlePressureKpa).toBeCloseTo(95 * kpaOfPsi, 1)
  expect(kept.outlets[0]!.nozzle.boreNowMm).toBeCloseTo((3 / 8) * 25.4, 3)

  await first.page.reload()
  await expect(first.heading).toHaveText('South trailer')
  await expect(first.page.locator('.sheet')).toContainText('now 3/8')
})

test('what is not saved survives a wrong tap, the back key and a reload', async ({
  baseURL,
  check,
  context,
  desk,
  page,
  rigScreen,
}) => {
  const owner = desk.makePerson(desk.makeCompany())
  const rig = await makeRig(owner, 'Trailer nine')
  await bringIn(context, owner, baseURL!)
  await rigScreen.open(rig)
  await page.getByRole('link', { name: 'Edit', exact: true }).click()
  await rigScreen.type('Name of the rig', 'Trailer ten')
  await rigScreen.type('Bore now', 'about a quarter')

  const expectAllThere = async () => {
    await expect(rigScreen.field('Name of the rig')).toHaveValue('Trailer ten')
    await expect(rigScreen.field('Bore now')).toHaveValue('about a quarter')
  }
  await check.goTo('check')
  await expect(rigScreen.leaveDialog).toBeVisible()
  await page.keyboard.press('Escape')
  await expect(rigScreen.leaveDialog).toBeHidden()
  await expectAllThere()
  await page.goBack()
  await rigScreen.button('Stay here').click()
  await expect(page).toHaveURL(/\/edit$/)
  await expectAllThere()

  await check.goTo('check')
  await rigScreen.button('Keep it and leave').click()
  await expect(check.verdict).toBeVisible()
  await check.goTo('rigs')
  await expect(rigScreen.card('Trailer nine')).toContainText('not saved')
  await rigScreen.card('Trailer nine').click()
  await page.getByRole('link', { name: 'Go on with it' }).click()
  await expectAllThere()

  await page.reload()
  await expectAllThere()
  await expect(page.getByText('They are not saved yet.')).toBeVisible()
  expect(await readRig(owner, rig.id)).toMatchObject({ name: 'Trailer nine', version: rig.version })

  await rigScreen.type('Bore now', '11/32')
  await rigScreen.save('Trailer ten')
  expect((await readRig(owner, rig.id)).outlets[0]!.nozzle.boreNowMm).toBeCloseTo((11 / 32) * 25.4, 3)
  await rigScreen.edit({ ...rig, name: 'Trailer ten' })
  await expect(page.getByText('They are not saved yet.')).toHaveCount(0)
})

test('a deleted rig comes back by one tap', async ({ baseURL, context, desk, page, rigScreen }) => {
  const owner = desk.makePerson(desk.makeCompany())
  const rig = await makeRig(owner, 'Trailer nine')
  await bringIn(context, owner, baseURL!)
  await rigScreen.open(rig)
  await rigScreen.button('Delete').click()
  await expect(rigScreen.heading).toHaveText('Rigs')
  await expect(page.getByText('“Trailer nine” is deleted.')).toBeVisible()
  await expect(rigScreen.card('Trailer nine')).toHaveCount(0)
  expect((await owner.ask('GET', `/api/v1/rigs/${rig.id}`)).status).toBe(404)
  await rigScreen.button('Undo').click()
  await expect(rigScreen.card('Trailer nine')).toBeVisible()
  await page.reload()
  await expect(rigScreen.card('Trailer nine')).toBeVisible()
})

test('a file with one bad line says which, writes nothing, and once mended writes all', async ({
  baseURL,
  context,
  desk,
  page,
}) => {
  const owner = desk.makePerson(desk.makeCompany())
  const listNames = async () => {
    const fleet = (await (await owner.ask('GET', '/api/v1/fleet')).json()) as {
      compressors: { name: string }[]
    }
    return fleet.compressors.map(({ name }) => name).toSorted()
  }
  const lines = (air: string) =>
    ['name,free_air_cfm,set_pressure_psi', 'Big red,375,125', `Old blue,${air},100`, ''].join('\r\n')
  await bringIn(context, owner, baseURL!)
  await page.goto('/fleet/import')
  await page.locator('input[type="file"]').setInputFiles({
    name: 'compressors.csv',
    mimeType: 'text/csv',
    buffer: Buffer.from(lines('185 rpm')),
  })
  await expect(page.getByText('1 of 2 lines have something to mend.')).toBeVisible()
  const bad = page.getByRole('row').filter({ hasText: 'Old blue' })
  await expect(bad).toContainText('free_air_cfm: ')
  await expect(bad.getByRole('cell').first()).toHaveText('3')
  await expect(page.getByRole('row').filter({ hasText: 'Big red' })).toContainText('good')
  await expect(page.getByRole('button', { name: /^Import all/ })).toHaveCount(0)
  expect(await listNames()).toEqual([])

  await page.getByLabel('Or paste the lines here').fill(lines('185'))
  await page.getByRole('button', { name: 'Look at it' }).click()
  await expect(page.getByText('All 2 lines are good.')).toBeVisible()
  expect(await listNames()).toEqual([])
  await page.getByRole('button', { name: 'Import all 2' }).click()
  await expect(page.getByText('2 imported.')).toBeVisible()
  expect(await listNames()).toEqual(['Big red', 'Old blue'])
})
