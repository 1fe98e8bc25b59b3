import { z } from 'zod'
import { timeZoneSchema } from './accounts.ts'
import { recordFields } from './compressors.ts'
import { checkLimits } from './limits.ts'
import { idSchema, nameSchema, pageOf, versionSchema, within } from './records.ts'

const siteFields = {
  name: nameSchema,
  altitudeM: within(checkLimits.altitudeM),
  /** the usual heat there */
  airTemperatureC: within(checkLimits.airTemperatureC),
  relativeHumidityPct: within(checkLimits.relativeHumidityPct).nullable(),
  timeZone: timeZoneSchema,
}

export const siteProfileSchema = z.strictObject(siteFields)
export const newSiteSchema = z.strictObject({ ...siteFields, id: idSchema })
export const siteChangeSchema = z.strictObject({ ...siteFields, version: versionSchema })
export const siteRecordSchema = z.strictObject({ ...siteFields, ...recordFields })
export const sitePageSchema = pageOf(siteRecordSchema)

export type SiteProfile = z.infer<typeof siteProfileSchema>
export type NewSite = z.infer<typeof newSiteSchema>
export type SiteChange = z.infer<typeof siteChangeSchema>
export type SiteRecord = z.infer<typeof siteRecordSchema>
