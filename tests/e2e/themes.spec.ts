import { expectNoBarriers, otherThemes } from './support/axe.ts'
import { makeCrew, walkBeforeTheDoor, walkBehindTheDoor } from './support/rooms.ts'
import { expectLargeTargets } from './support/touch.ts'
import { expect, takeRefusals, test } from './support/test.ts'

test.slow()

/** The colours of a desk are those of a phone, but for what is drawn there alone: its rail, its tables. */
const themesFor = (isMobile: boolean, name: string) =>
  isMobile || /people|a rig/.test(name) ? otherThemes : []

test('axe finds nothing serious in any theme, all of the check open and two fields wrong', async ({
  check,
  isMobile,
  page,
}) => {
  await check.open()
  await check.waitForPanels()
  await check.openEverything()
  await check.type('Target at the nozzle', 'a lot')
  await check.type('Nozzle, new', '9')
  await expectNoBarriers(page, 'the check', themesFor(isMobile, 'the check'))
  await check.goTo('settings')
  await expect(page.getByRole('heading', { level: 1 })).toHaveText('Settings')
  await expectNoBarriers(page, 'settings', themesFor(isMobile, 'settings'))
  await check.goTo('sources')
  await expect(page.getByRole('heading', { level: 1 })).toHaveText('Where the figures come from')
  await expectNoBarriers(page, 'sources', themesFor(isMobile, 'sources'))
})

test('nor on any page of accounts and fleet, where all that is touched is 48 px high', async ({
  baseURL,
  complaints,
  desk,
  isMobile,
  page,
}) => {
  const crew = await makeCrew(desk)
  const inspect = async (name: string) => {
    await expectNoBarriers(page, name, themesFor(isMobile, name))
    await expectLargeTargets(page, name)
  }
  await walkBeforeTheDoor(page, crew, inspect)
  await takeRefusals(complaints, 422)
  await walkBehindTheDoor(page, crew, baseURL!, inspect)
})
