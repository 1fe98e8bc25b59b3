import type { Fleet } from '#shared/contracts/rigs.ts'
import { askApi } from './request.ts'

export const fetchFleet = () => askApi<Fleet>('GET', '/api/v1/fleet')

/** Where the company's data can be had as tables. */
export const exportPath = '/api/v1/export.zip'

/** What every saved record can have done to it. */
export interface VersionedRecord {
  id: string
  version: number
}

/** The calls that rigs, compressors and sites share. */
export function makeRecordCalls<Profile, Kept extends VersionedRecord>(path: string) {
  const pathOf = (id: string) => `${path}/${encodeURIComponent(id)}`
  return {
    create: (id: string, profile: Profile) => askApi<Kept>('POST', path, { ...profile, id }),
    change: ({ id, version }: VersionedRecord, profile: Profile) =>
      askApi<Kept>('PUT', pathOf(id), { ...profile, version }),
    setArchived: ({ id, version }: VersionedRecord, isArchived: boolean) =>
      askApi<Kept>('POST', `${pathOf(id)}/${isArchived ? 'archive' : 'unarchive'}`, { version }),
    remove: ({ id, version }: VersionedRecord) => askApi('DELETE', `${pathOf(id)}?version=${version}`),
    restore: ({ id, version }: VersionedRecord) => askApi<Kept>('POST', `${pathOf(id)}/restore`, { version }),
  }
}
