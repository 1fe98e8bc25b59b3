/* Draws the README's picture from the running application: npm start, then npm run screenshot. */
import { execFileSync } from 'node:child_process'
import { chromium } from '@playwright/test'

const address = process.env.ADDRESS ?? `http://127.0.0.1:${process.env.PORT ?? 3000}/`
const browser = await chromium.launch({
  executablePath: execFileSync('sh', ['-c', 'command -v chromium || command -v chromium-browser'], {
    encoding: 'utf8',
  }).trim(),
  args: ['--no-sandbox', '--disable-gpu', '--no-first-run', '--disable-background-networking'],
})
const page = await browser.newPage({ viewport: { width: 1440, height: 1180 } })
await page.goto(address)
await page.getByRole('heading', { name: 'Delivery and draw' }).waitFor()
await page.waitForTimeout(800)
await page.screenshot({ path: 'src/assets/readme-check.png' })
await browser.close()
