/** Where a figure comes from, so that a screen can say it beside the figure. */
export type SourceStatus = 'published' | 'computed' | 'from memory' | 'common practice, no source'

export interface Sourced {
  source: string
  status: SourceStatus
}
