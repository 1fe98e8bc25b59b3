import { test as base, expect } from '@playwright/test'
import type { BrowserContext } from '@playwright/test'
import { CheckScreen } from './checkScreen.ts'
import { openCrewDesk } from './crewDesk.ts'
import type { CrewDesk } from './crewDesk.ts'
import { RigScreen } from './rigScreen.ts'

/** What no page may do, whatever a test is about. */
async function watch(context: BrowserContext, origin: string, complaints: string[]) {
  context.on('console', (message) => {
    if (message.type() === 'error' || message.type() === 'warning') complaints.push(message.text())
  })
  context.on('weberror', (error) => complaints.push(String(error.error())))
  context.on('request', (request) => {
    const isOurs = request.url().startsWith(origin) || /^(data|blob):/.test(request.url())
    if (!isOurs) complaints.push(`asked elsewhere: ${request.url()}`)
  })
  await context.exposeBinding('reportComplaint', (_, complaint: string) => complaints.push(complaint))
  await context.addInitScript(() => {
    document.addEventListener('securitypolicyviolation', (event) => {
      const { reportComplaint } = window as unknown as { reportComplaint: (complaint: string) => void }
      reportComplaint(`against the content policy: ${event.violatedDirective} ${event.blockedURI}`)
    })
  })
}

/**
 * Takes out what the browser itself says about an answer that a test asked for, such as a refusal; it fails where
 * there was none.
 */
export async function takeRefusals(complaints: string[], ...statuses: number[]) {
  const sentences = statuses.map((status) => new RegExp(`status of ${status}\\b`))
  await expect
    .poll(() => sentences.every((sentence) => complaints.some((complaint) => sentence.test(complaint))))
    .toBe(true)
  const others = complaints.filter((complaint) => !sentences.some((sentence) => sentence.test(complaint)))
  complaints.splice(0, complaints.length, ...others)
}

export interface WorkerFixtures {
  /** the data of the server that all tests share */
  desk: CrewDesk
}

export interface Fixtures {
  /** errors, warnings, refused content and requests elsewhere, of every page; none are allowed */
  complaints: string[]
  check: CheckScreen
  rigScreen: RigScreen
  /** a profile that has never been here */
  newProfile: () => Promise<BrowserContext>
}

export const test = base.extend<Fixtures, WorkerFixtures>({
  desk: [
    // eslint-disable-next-line no-empty-pattern -- the first argument says what a fixture needs
    async ({}, use) => {
      const address = `http://127.0.0.1:${process.env.SIXTEENTH_PORT}`
      const desk = openCrewDesk(process.env.SIXTEENTH_E2E_DATA!, address)
      await use(desk)
      await desk.close()
    },
    { scope: 'worker' },
  ],
  complaints: [
    async ({ context, baseURL }, use) => {
      const complaints: string[] = []
      await watch(context, baseURL!, complaints)
      await use(complaints)
      expect(complaints).toEqual([])
    },
    { auto: true },
  ],
  check: async ({ page }, use) => use(new CheckScreen(page)),
  rigScreen: async ({ page }, use) => use(new RigScreen(page)),
  newProfile: async ({ browser, complaints, baseURL }, use) => {
    const opened: BrowserContext[] = []
    await use(async () => {
      const context = await browser.newContext()
      await watch(context, baseURL!, complaints)
      opened.push(context)
      return context
    })
    for (const context of opened) await context.close()
  },
})

export { expect }
