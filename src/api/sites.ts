import type { SiteProfile, SiteRecord } from '#shared/contracts/sites.ts'
import { makeRecordCalls } from './fleet.ts'

export const siteCalls = makeRecordCalls<SiteProfile, SiteRecord>('/api/v1/sites')
