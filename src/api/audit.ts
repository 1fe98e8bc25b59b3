import type { AuditEntry, AuditFilter } from '#shared/contracts/people.ts'
import { askApi } from './request.ts'

export interface AuditPage {
  items: AuditEntry[]
  nextCursor: string | null
}

function writeQuery(filter: AuditFilter, cursor: string | null): string {
  const given = Object.entries({ ...filter, cursor }).filter(([, value]) => value)
  return given.length === 0 ? '' : `?${new URLSearchParams(given as [string, string][])}`
}

export const fetchAudit = (filter: AuditFilter, cursor: string | null) =>
  askApi<AuditPage>('GET', `/api/v1/audit${writeQuery(filter, cursor)}`)

/** Where all that a filter finds can be had as a table. */
export const auditCsvPath = (filter: AuditFilter) => `/api/v1/audit.csv${writeQuery(filter, null)}`
