import { expect } from '@playwright/test'
import type { APIRequestContext, Locator, Page } from '@playwright/test'
import type { CheckAnswer, CheckRequest } from '#shared/contracts/check.ts'

/** The pressure check as a person finds it on the screen. */
export class CheckScreen {
  readonly verdict: Locator
  readonly pressure: Locator
  readonly form: Locator
  /** says nothing while the answer is that of the fields */
  readonly staleNote: Locator

  constructor(readonly page: Page) {
    this.verdict = page.getByTestId('verdict')
    this.pressure = page.getByTestId('nozzle-pressure')
    this.form = page.locator('form')
    this.staleNote = page.locator('.stale-note')
  }

  async open(address = '/') {
    await this.page.goto(address)
    await expect(this.form).toBeVisible()
  }

  field(name: string): Locator {
    return this.form.getByRole('textbox', { name, exact: true })
  }

  /** Leaves the field too, as a thumb does. */
  async type(name: string, text: string) {
    await this.field(name).fill(text)
    await this.field(name).blur()
  }

  group(name: string): Locator {
    return this.form.getByRole('button', { name: new RegExp(`^${name}`) })
  }

  async openGroup(name: string) {
    await this.group(name).click()
    await expect(this.group(name)).toHaveAttribute('aria-expanded', 'true')
  }

  /** Every folded group and every fold of the page. */
  async openEverything() {
    await this.page.evaluate(async () => {
      for (const group of document.querySelectorAll<HTMLElement>('form [aria-expanded="false"]'))
        group.click()
      await new Promise(requestAnimationFrame)
      for (const fold of document.querySelectorAll('details')) fold.open = true
    })
    await expect(this.form.locator('[aria-expanded="false"]')).toHaveCount(0)
  }

  /** The panels come once the verdict stands, the chart when it is about to be seen. */
  async waitForPanels() {
    for (const id of ['air-use', 'losses', 'fit', 'hour'])
      await expect(this.page.getByTestId(id)).toBeVisible()
    await this.page.locator('.curve').first().scrollIntoViewIfNeeded()
    await expect(this.page.getByTestId('draw-curve')).toBeVisible()
    await this.page.evaluate(() => scrollTo(0, 0))
  }

  async goTo(page: 'check' | 'rigs' | 'sources' | 'settings') {
    await this.page
      .locator(`nav a.item[href^="/${page === 'check' ? '' : page}"]`)
      .first()
      .click()
  }
}

const m3MinOfCfm = 0.3048 ** 3
export const kpaOfPsi = 6.894757293168

/** The rig a visitor finds, written out again in the contract's units from what its fields say. */
export function makeRigOfTheForm(nozzle: { newInch: number; nowInch?: number }): CheckRequest {
  const bore = (inch: number) => inch * 25.4
  return {
    site: { altitudeM: 1000 * 0.3048, airTemperatureC: ((80 - 32) * 5) / 9, relativeHumidityPct: 50 },
    compressor: {
      ratedFreeAirM3Min: 375 * m3MinOfCfm,
      setPressureKpa: 125 * kpaOfPsi,
      unloadPressureKpa: 145 * kpaOfPsi,
      lineTemperatureRiseK: 10,
    },
    airLine: [{ insideDiameterMm: 1.5 * 25.4, lengthM: 25 * 0.3048, lossK: 2, roughnessMm: 0.01 }],
    outlets: [
      {
        line: [
          { insideDiameterMm: 1.25 * 25.4, lossK: 8 },
          {
            insideDiameterMm: 1.25 * 25.4,
            lengthM: 50 * 0.3048,
            lossK: 2,
            roughnessMm: 0.01,
            mediaFactor: 1.3,
          },
          { insideDiameterMm: 25.4, lengthM: 10 * 0.3048, lossK: 1, roughnessMm: 0.01, mediaFactor: 1.3 },
        ],
        nozzle: {
          newBoreMm: bore(nozzle.newInch),
          boreMm: bore(nozzle.nowInch ?? nozzle.newInch),
          dischargeCoefficient: 0.81,
        },
      },
    ],
    airTakenFirst: [{ name: 'hood', freeAirM3Min: 15 * m3MinOfCfm }],
    targetNozzlePressureKpa: 100 * kpaOfPsi,
    bitSet: 'fractional-64',
  }
}

/** What the API answers to the same rig: that both agree, not that both are right. */
export async function askApi(request: APIRequestContext, body: CheckRequest): Promise<CheckAnswer> {
  const response = await request.post('/api/v1/check', { data: body })
  expect(response.status()).toBe(200)
  return (await response.json()) as CheckAnswer
}

export function lowestPressureKpa(answer: CheckAnswer): number {
  return Math.min(...answer.operatingPoint!.outlets.map((outlet) => outlet.nozzlePressureKpa))
}
