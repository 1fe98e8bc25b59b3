import { useQuery, useQueryCache } from '@pinia/colada'
import { computed } from 'vue'
import type { CompressorRecord } from '#shared/contracts/compressors.ts'
import type { Fleet, RigRecord, Today } from '#shared/contracts/rigs.ts'
import type { SiteRecord } from '#shared/contracts/sites.ts'
import { fetchFleet } from '../api/fleet.ts'
import { useSessionStore } from '../stores/session.ts'

interface KeptRecords {
  rigs: RigRecord
  compressors: CompressorRecord
  sites: SiteRecord
}
export type FleetList = keyof KeptRecords

/** The company's rigs, compressors and sites with today's picks, whole: what every screen of the fleet looks at. */
export function useFleet() {
  const store = useSessionStore()
  const cache = useQueryCache()
  /**
   * Somebody else's fleet is never shown, not for a moment; who is cut off in the middle of their work keeps what they
   * were looking at until somebody is signed in again.
   */
  const key = computed<string[]>((before) => {
    if (!store.session && store.cutOff && before) return before
    return ['fleet', store.session?.account.id ?? '', store.session?.company?.id ?? '']
  })
  const query = useQuery({
    key: () => key.value,
    query: fetchFleet,
    enabled: () => Boolean(store.session?.company),
  })

  function update(change: (fleet: Fleet) => Fleet) {
    const fleet = cache.getQueryData<Fleet>(key.value)
    if (fleet) cache.setQueryData(key.value, change(fleet))
  }

  /** What the server has just acknowledged is seen at once, before the fleet is asked for again. */
  function keep<List extends FleetList>(list: List, record: KeptRecords[List]) {
    update((fleet) => {
      const others = (fleet[list] as KeptRecords[List][]).filter(({ id }) => id !== record.id)
      return { ...fleet, [list]: [...others, record] }
    })
  }

  function drop(list: FleetList, id: string) {
    update((fleet) => ({ ...fleet, [list]: fleet[list].filter((record) => record.id !== id) }))
  }

  function keepToday(pick: Today) {
    update((fleet) => {
      const others = fleet.today.filter(
        ({ rigId, localDate }) => rigId !== pick.rigId || localDate !== pick.localDate,
      )
      return { ...fleet, today: [...others, pick] }
    })
  }

  return {
    fleet: query.data,
    error: query.error,
    isLoading: query.isLoading,
    refetch: query.refetch,
    keep,
    drop,
    keepToday,
  }
}

/** The records of a list as they stand in the fleet. */
export function findInFleet<List extends FleetList>(
  fleet: Fleet | undefined,
  list: List,
  id: string | null,
): KeptRecords[List] | null {
  if (!fleet || id === null) return null
  return (fleet[list] as KeptRecords[List][]).find((record) => record.id === id) ?? null
}
