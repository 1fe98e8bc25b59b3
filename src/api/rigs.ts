import type { RigProfile, RigRecord, Today, TodayInput } from '#shared/contracts/rigs.ts'
import { makeRecordCalls } from './fleet.ts'
import { askApi } from './request.ts'

const path = '/api/v1/rigs'

export const rigCalls = makeRecordCalls<RigProfile, RigRecord>(path)

export const pickToday = (rigId: string, input: TodayInput) =>
  askApi<Today>('PUT', `${path}/${encodeURIComponent(rigId)}/today`, input)
