import type { CompanyInput } from '#shared/contracts/accounts.ts'
import type { Language } from '../../stores/preferences.ts'

/** The money of the regions where most crews are; from memory, and only a start that is chosen over. */
const currencyOfRegion: Record<string, string> = {
  US: 'USD',
  CA: 'CAD',
  MX: 'MXN',
  GT: 'GTQ',
  CO: 'COP',
  PE: 'PEN',
  CL: 'CLP',
  AR: 'ARS',
  ES: 'EUR',
  GB: 'GBP',
  AU: 'AUD',
  NZ: 'NZD',
}

function deviceTimeZone(): string {
  return Intl.DateTimeFormat().resolvedOptions().timeZone || 'UTC'
}

/** A company as this device would have it: nobody types what their telephone knows. */
export function suggestCompany(language: Language, spoken = navigator.language): CompanyInput {
  const region = /-([A-Z]{2})\b/.exec(spoken)?.[1] ?? ''
  return {
    name: '',
    currency: currencyOfRegion[region] ?? 'USD',
    language,
    timeZone: deviceTimeZone(),
  }
}

/** With what is chosen among them, also where this browser does not know it. */
function withChosen(known: readonly string[], chosen: string): string[] {
  return known.includes(chosen) ? [...known] : [chosen, ...known]
}

export function listCurrencies(language: Language, chosen: string) {
  const names = new Intl.DisplayNames([language], { type: 'currency' })
  return withChosen(Intl.supportedValuesOf('currency'), chosen)
    .map((value) => ({ value, text: `${value} · ${names.of(value) ?? value}` }))
    .sort((a, b) => a.value.localeCompare(b.value))
}

export function listTimeZones(chosen: string) {
  const zones = withChosen([...Intl.supportedValuesOf('timeZone'), 'UTC'], chosen)
  return [...new Set(zones)].sort().map((value) => ({ value, text: value.replaceAll('_', ' ') }))
}
