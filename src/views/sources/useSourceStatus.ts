import type { SourceStatus } from '#shared/catalogue/source.ts'
import { useWords } from '../../composables/useWords.ts'

const statusKeys: Record<SourceStatus, string> = {
  published: 'pages.sources.statuses.published',
  computed: 'pages.sources.statuses.computed',
  'from memory': 'pages.sources.statuses.memory',
  'common practice, no source': 'pages.sources.statuses.practice',
}

/** The word for where a figure comes from. */
export function useSourceStatus() {
  const { t } = useWords()
  return (status: SourceStatus) => t(statusKeys[status])
}
