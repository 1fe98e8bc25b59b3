import type { Fleet } from '#shared/contracts/rigs.ts'
import { useWords } from '../../composables/useWords.ts'
import { usePreferencesStore } from '../../stores/preferences.ts'
import { compareNames } from '../../composables/rigVerdicts.ts'

/** The names of the rigs that have a compressor or a site as their usual one. */
export function rigsWith(fleet: Fleet, part: 'compressorId' | 'siteId', id: string): string[] {
  return fleet.rigs
    .filter((rig) => rig[part] === id)
    .toSorted(compareNames)
    .map(({ name }) => name)
}

const mostNamed = 4

/** Their names in a sentence; of many only the first. */
export function useRigNames() {
  const { t } = useWords()
  const preferences = usePreferencesStore()
  return (names: readonly string[]) => {
    const isMany = names.length > mostNamed
    const named = isMany ? names.slice(0, mostNamed - 1) : names
    const more = isMany ? [t('kit.moreRigs', { count: names.length - named.length })] : []
    return new Intl.ListFormat(preferences.language).format([...named, ...more])
  }
}
