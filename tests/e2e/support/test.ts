import { test as base, expect } from '@playwright/test'
import type { BrowserContext } from '@playwright/test'
import { CheckScreen } from './checkScreen.ts'

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

interface Fixtures {
  /** errors, warnings, refused content and requests elsewhere, of every page; none are allowed */
  complaints: string[]
  check: CheckScreen
  /** a profile that has never been here */
  newProfile: () => Promise<BrowserContext>
}

export const test = base.extend<Fixtures>({
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
