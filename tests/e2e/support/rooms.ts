import { randomUUID } from 'node:crypto'
import type { Page } from '@playwright/test'
import type { RigRecord } from '#shared/contracts/rigs.ts'
import { bringIn, makeRig } from './crewDesk.ts'
import type { TestPerson } from '../../support/people.ts'
import type { CrewDesk } from './crewDesk.ts'
import { expect } from './test.ts'

/** Looks at the page as it stands; the name says which in what state. */
export type Inspect = (name: string) => Promise<void>

/** A place of the application, opened without loading all of it again. */
async function goTo(page: Page, path: string) {
  await page.evaluate((address) => {
    for (const heading of document.querySelectorAll('h1')) heading.dataset.isOld = ''
    history.pushState(null, '', address)
    dispatchEvent(new PopStateEvent('popstate', { state: null }))
  }, path)
  await expect(page.locator('h1:not([data-is-old])')).toBeVisible()
  await expect(page).toHaveURL((url) => url.pathname === path.split('#')[0])
  await expect(page.getByText(/^(Loading|Fetching your fleet|Cargando|Trayendo la flota) …$/)).toHaveCount(0)
}

/** The company whose rooms are walked through, with something in each. */
export interface Crew {
  rig: RigRecord
  invitationPath: string
  owner: TestPerson
}

export async function makeCrew(desk: CrewDesk): Promise<Crew> {
  const company = desk.makeCompany()
  const ownersEmail = `robin.vale-hendricksen.${randomUUID().slice(0, 8)}@ridge-line-blasting.example.test`
  const owner = desk.makePerson(company, undefined, 'Robin Vale-Hendricksen', ownersEmail)
  desk.makePerson(company, ['blaster'], 'Lee Marsh')
  const rig = await makeRig(owner, 'Trailer nine with the long hose')
  const email = `a-rather-long-name-${randomUUID().slice(0, 8)}@ridge-line-blasting.example.test`
  const invitation = { id: randomUUID(), email, roles: ['blaster'], language: 'en' }
  const response = await owner.ask('POST', '/api/v1/people/invitations', invitation)
  expect(response.status).toBe(201)
  let invitationPath: string | undefined
  await expect
    .poll(async () => {
      const { mails } = (await (await owner.ask('GET', '/api/v1/mails')).json()) as {
        mails: { to: string; text: string }[]
      }
      const mail = mails.find(({ to }) => to === email)
      invitationPath = /\/invitation#[\w-]+/.exec(mail?.text ?? '')?.[0]
      return invitationPath
    })
    .toBeDefined()
  return { rig, invitationPath: invitationPath!, owner: owner }
}

/** What stands before the door: every page that asks for no session, the forms with something wrong in them. */
export async function walkBeforeTheDoor(page: Page, { invitationPath }: Crew, inspect: Inspect) {
  await page.goto('/sign-in')
  await expect(page.locator('.demo button')).toHaveCount(4)
  await inspect('sign-in')
  await goTo(page, '/sign-up')
  await page.locator('form [type="submit"]').click()
  await expect(page.locator('form .problem').first()).toBeVisible()
  await inspect('sign-up, sent empty')
  await goTo(page, '/forgotten-password')
  await inspect('forgotten password')
  for (const path of ['/confirm#never-given', '/reset-password#never-given', invitationPath]) {
    await goTo(page, path)
    await expect(page.locator('main form')).toBeVisible()
    await inspect(path.split('#')[0]!)
  }
  await goTo(page, '/rigs')
  await expect(page.locator('main a[href^="/sign-in?next"]').first()).toBeVisible()
  await inspect('rigs, signed out')
}

/** What is behind it, as who may do everything finds it. */
export async function walkBehindTheDoor(page: Page, { rig, owner }: Crew, baseURL: string, inspect: Inspect) {
  await bringIn(page.context(), owner, baseURL)
  await page.goto('/rigs')
  await expect(page.getByRole('article')).toHaveCount(1)
  await inspect('rigs')
  await goTo(page, `/rigs/${rig.id}`)
  await page.locator('.curve').first().scrollIntoViewIfNeeded()
  await expect(page.getByTestId('draw-curve')).toBeVisible()
  await inspect('a rig')
  await goTo(page, `/rigs/${rig.id}/edit`)
  await openFolds(page)
  await inspect('the editor of a rig, all open')
  await goTo(page, '/fleet/compressors')
  await expect(page.getByRole('article')).toHaveCount(1)
  await inspect('compressors')
  await goTo(page, `/fleet/compressors/${rig.compressorId}`)
  await openFolds(page)
  await inspect('the editor of a compressor, all open')
  await goTo(page, '/rigs/new')
  await inspect('a new rig')
  await goTo(page, '/fleet/sites')
  await inspect('sites')
  await goTo(page, `/fleet/sites/${rig.siteId}`)
  await inspect('the editor of a site')
  await goTo(page, '/fleet/import')
  await page
    .locator('textarea')
    .fill('name,free_air_cfm,set_pressure_psi\nBig red,375,125\nOld blue,185 rpm,100')
  await page.locator('.import button.look').click()
  await expect(page.getByRole('row')).toHaveCount(3)
  await inspect('an import with a bad line')
  await goTo(page, '/people')
  await page.getByTestId('invite').click()
  await page.getByTestId('people').getByRole('button').first().click()
  await expect(page.getByTestId('invitations')).toBeVisible()
  await inspect('people, one open, inviting')
  await goTo(page, '/audit')
  await expect(page.getByText('Trailer nine with the long hose').first()).toBeVisible()
  await inspect('audit')
  await goTo(page, '/mail')
  await inspect('mail')
  await goTo(page, '/account')
  await openFolds(page)
  await inspect('account')
  await goTo(page, '/company')
  await inspect('company')
  await goTo(page, '/more')
  await inspect('more')
  await goTo(page, '/not-yours')
  await inspect('not yours')
}

async function openFolds(page: Page) {
  await page.evaluate(async () => {
    for (const group of document.querySelectorAll<HTMLElement>('main [aria-expanded="false"]')) group.click()
    await new Promise(requestAnimationFrame)
    for (const fold of document.querySelectorAll('details')) fold.open = true
  })
}
