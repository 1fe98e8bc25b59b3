import type { CompanyInput } from '#shared/contracts/accounts.ts'
import type { FieldError } from '#shared/contracts/problems.ts'
import { makeProblem } from '../problems.ts'
import { isTimeZone } from './timeZones.ts'

const currencies = new Set(Intl.supportedValuesOf('currency'))

/** What of a company only the runtime can tell: its own lists of currencies and of time zones. */
export function refuseUnknownPlaces({ currency, timeZone }: CompanyInput, path = ''): void {
  const errors: FieldError[] = []
  if (!currencies.has(currency)) {
    errors.push({
      path: `${path}/currency`,
      code: 'not-a-currency',
      message: 'There is no such currency.',
    })
  }
  if (!isTimeZone(timeZone)) {
    errors.push({
      path: `${path}/timeZone`,
      code: 'not-a-time-zone',
      message: 'There is no such time zone.',
    })
  }
  if (errors.length > 0) throw makeProblem('invalid-fields', 'A field is not as it should be.', errors)
}
