import { expect } from '@playwright/test'
import type { Locator, Page } from '@playwright/test'

/** The pages of a rig: the list, one rig, and its editor. */
export class RigScreen {
  readonly heading: Locator
  readonly verdict: Locator
  readonly pressure: Locator
  readonly saveButton: Locator
  readonly conflict: Locator
  readonly leaveDialog: Locator

  constructor(readonly page: Page) {
    this.heading = page.getByRole('heading', { level: 1 })
    this.verdict = page.getByTestId('verdict')
    this.pressure = page.getByTestId('nozzle-pressure')
    this.saveButton = page.getByTestId('save')
    this.conflict = page.getByRole('region', { name: 'Two of you changed it' })
    this.leaveDialog = page.getByRole('dialog', { name: 'Not saved yet' })
  }

  async openList() {
    await this.page.goto('/rigs')
    await expect(this.heading).toHaveText('Rigs')
  }

  async open(rig: { id: string; name: string }) {
    await this.page.goto(`/rigs/${rig.id}`)
    await expect(this.heading).toHaveText(rig.name)
  }

  async edit(rig: { id: string; name: string }) {
    await this.page.goto(`/rigs/${rig.id}/edit`)
    await expect(this.heading).toHaveText(`Edit ${rig.name}`)
    await expect(this.saveButton).toBeVisible()
  }

  /** The rig’s card in the list. */
  card(name: string): Locator {
    return this.page.getByRole('article').filter({ has: this.page.getByRole('link', { name, exact: true }) })
  }

  field(name: string): Locator {
    return this.page.getByRole('textbox', { name, exact: true })
  }

  /** Leaves the field too, as a thumb does. */
  async type(name: string, text: string) {
    await this.field(name).fill(text)
    await this.field(name).blur()
  }

  async openGroup(name: string) {
    const group = this.page.getByRole('button', { name: new RegExp(`^${name}`) })
    await group.click()
    await expect(group).toHaveAttribute('aria-expanded', 'true')
  }

  button(name: string): Locator {
    return this.page.getByRole('button', { name, exact: true })
  }

  async save(nameAfterwards: string) {
    await this.saveButton.click()
    await expect(this.heading).toHaveText(nameAfterwards)
  }
}
