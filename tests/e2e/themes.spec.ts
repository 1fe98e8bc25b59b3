import { expectNoBarriers } from './support/axe.ts'
import { test } from './support/test.ts'

for (const theme of ['dark', 'sun']) {
  test(`axe finds nothing serious in the ${theme} theme`, async ({ check, page }) => {
    test.slow()
    await expectNoBarriers(check, page, theme)
  })
}
