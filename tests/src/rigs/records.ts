import type { CompressorRecord } from '#shared/contracts/compressors.ts'
import type { Fleet, RigRecord } from '#shared/contracts/rigs.ts'
import type { SiteRecord } from '#shared/contracts/sites.ts'
import { createCheckForm } from '#shared/form/checkForm.ts'
import type { CheckForm } from '#shared/form/checkForm.ts'
import { readRig } from '#shared/form/profiles.ts'
import { readForm } from '#shared/form/readForm.ts'

const kept = {
  version: 1,
  isArchived: false,
  createdAt: '2026-05-03T15:00:00.000Z',
  updatedAt: '2026-05-03T15:00:00.000Z',
  updatedBy: 'Ana Solís',
}
const parts = readRig(createCheckForm(), readForm(createCheckForm()))!

/** The rig a visitor finds, saved. */
export function makeRig(
  over: Partial<RigRecord> = {},
  change: (form: CheckForm) => void = () => {},
): RigRecord {
  const form = createCheckForm()
  change(form)
  const { rig } = readRig(form, readForm(form))!
  return { ...kept, id: 'rig-1', name: 'Rig 1', compressorId: 'big', siteId: 'yard', ...rig, ...over }
}

export function makeCompressor(over: Partial<CompressorRecord> = {}): CompressorRecord {
  const owner = { ownership: 'owned', rentedFrom: null, rentedUntil: null } as const
  return { ...kept, id: 'big', name: 'Big', ...owner, ...parts.compressor, ...over }
}

export function makeSite(over: Partial<SiteRecord> = {}): SiteRecord {
  return { ...kept, id: 'yard', name: 'Yard', timeZone: 'America/Denver', ...parts.site, ...over }
}

export function makeFleet(over: Partial<Fleet> = {}): Fleet {
  return { rigs: [makeRig()], compressors: [makeCompressor()], sites: [makeSite()], today: [], ...over }
}
