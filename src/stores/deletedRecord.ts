import { shallowRef } from 'vue'
import type { VersionedRecord } from '../api/fleet.ts'
import type { FleetList } from '../queries/fleet.ts'

/** What was deleted last on this page, while it can still be had back by a tap. */
export const deletedRecord = shallowRef<{
  list: FleetList
  record: VersionedRecord & { name: string }
} | null>(null)
