import { checkRequestOfRig } from '#shared/form/profiles.ts'
import type { Verdict } from '#shared/contracts/check.ts'
import type { CompressorRecord } from '#shared/contracts/compressors.ts'
import type { Fleet, RigRecord, Today } from '#shared/contracts/rigs.ts'
import type { SiteRecord } from '#shared/contracts/sites.ts'
import { answerRequest } from './usePressureCheck.ts'
import type { AnsweredCheck } from './usePressureCheck.ts'

/** What a rig is hitched to and where it stands: as picked today, else as usual. */
export interface Hitch {
  compressor: CompressorRecord | null
  site: SiteRecord | null
  /** today's pick, where there is one */
  pick: Today | null
}

export interface RigLine {
  rig: RigRecord
  hitch: Hitch
  /** null where a compressor or a site is missing */
  check: AnsweredCheck | null
}

export type RigOrder = 'worst' | 'name'

/** The day on this device's calendar. */
export function localDateOf(date: Date): string {
  const digits = (value: number) => String(value).padStart(2, '0')
  return `${date.getFullYear()}-${digits(date.getMonth() + 1)}-${digits(date.getDate())}`
}

function findById<Kept extends { id: string }>(records: readonly Kept[], id: string | null): Kept | null {
  return id === null ? null : (records.find((record) => record.id === id) ?? null)
}

export function hitchOf(rig: RigRecord, fleet: Fleet, localDate: string): Hitch {
  const pick = fleet.today.find((one) => one.rigId === rig.id && one.localDate === localDate) ?? null
  const usualCompressor = findById(fleet.compressors, rig.compressorId)
  const usualSite = findById(fleet.sites, rig.siteId)
  return {
    compressor: findById(fleet.compressors, pick?.compressorId ?? null) ?? usualCompressor,
    site: findById(fleet.sites, pick?.siteId ?? null) ?? usualSite,
    pick: pick && (pick.compressorId !== null || pick.siteId !== null) ? pick : null,
  }
}

/** A list is drawn again with each letter of a search: a verdict is worked out once. */
const answered = new Map<string, AnsweredCheck | null>()
const mostAnswered = 2000

export function checkOfRig(rig: RigRecord, { compressor, site }: Hitch): AnsweredCheck | null {
  if (!compressor || !site) return null
  const key = [rig, compressor, site].map(({ id, version }) => `${id}.${version}`).join()
  const known = answered.get(key)
  if (known !== undefined) return known
  const request = checkRequestOfRig(rig, compressor, site)
  const check = request && answerRequest(request)
  if (answered.size >= mostAnswered) answered.clear()
  answered.set(key, check)
  return check
}

export function linesOfFleet(fleet: Fleet, localDate: string): RigLine[] {
  return fleet.rigs.map((rig) => {
    const hitch = hitchOf(rig, fleet, localDate)
    return { rig, hitch, check: checkOfRig(rig, hitch) }
  })
}

const badness: Record<Verdict, number> = {
  'cannot-run': 0,
  'falls-short': 1,
  'barely-holds': 2,
  holds: 3,
}

/** The rig that is furthest from its target first; those without a verdict last. */
function compareVerdicts(one: RigLine, other: RigLine): number {
  const rank = ({ check }: RigLine) => (check ? badness[check.answer.verdict] : 4)
  const margin = ({ check }: RigLine) => check?.answer.atTarget?.airMarginPct ?? -1000
  return rank(one) - rank(other) || margin(one) - margin(other)
}

/** Names as people sort them: Rig 2 before Rig 10. */
export function compareNames(one: { name: string }, other: { name: string }): number {
  return collator.compare(one.name, other.name)
}
const collator = new Intl.Collator(undefined, { numeric: true, sensitivity: 'base' })

export function orderLines(lines: readonly RigLine[], order: RigOrder): RigLine[] {
  const byName = (one: RigLine, other: RigLine) => compareNames(one.rig, other.rig)
  return lines.toSorted(
    (one, other) => (order === 'worst' && compareVerdicts(one, other)) || byName(one, other),
  )
}

/** Whether every word of a search is somewhere in these texts, whatever their accents and capitals. */
export function isFound(search: string, texts: readonly string[]): boolean {
  const plain = (text: string) => text.normalize('NFKD').replace(/\p{M}/gu, '').toLowerCase()
  const said = plain(texts.join(' '))
  return plain(search)
    .split(/\s+/)
    .every((word) => said.includes(word))
}
