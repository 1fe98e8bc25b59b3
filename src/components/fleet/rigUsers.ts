import type { Fleet } from '#shared/contracts/rigs.ts'
import { compareNames } from '../../composables/rigVerdicts.ts'

/** The names of the rigs that have a compressor or a site as their usual one. */
export function rigsWith(fleet: Fleet, part: 'compressorId' | 'siteId', id: string): string[] {
  return fleet.rigs
    .filter((rig) => rig[part] === id)
    .toSorted(compareNames)
    .map(({ name }) => name)
}
