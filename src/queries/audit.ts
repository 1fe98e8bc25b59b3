import { useInfiniteQuery } from '@pinia/colada'
import { computed } from 'vue'
import type { AuditFilter } from '#shared/contracts/people.ts'
import { fetchAudit } from '../api/audit.ts'
import type { AuditPage } from '../api/audit.ts'
import { useSessionStore } from '../stores/session.ts'

/** What was done, newest first, page after page. */
export function useAudit(filter: () => AuditFilter) {
  const session = useSessionStore()
  const query = useInfiniteQuery<AuditPage, Error, string | null>({
    key: () => ['audit', session.scope, { ...filter() }],
    query: ({ pageParam }) => fetchAudit(filter(), pageParam),
    initialPageParam: null,
    getNextPageParam: ({ nextCursor }) => nextCursor,
    enabled: () => session.can('read-audit'),
  })
  const entries = computed(() => query.data.value?.pages.flatMap(({ items }) => items) ?? [])
  return { ...query, entries }
}
