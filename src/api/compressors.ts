import type { CompressorProfile, CompressorRecord } from '#shared/contracts/compressors.ts'
import { makeRecordCalls } from './fleet.ts'

export const compressorCalls = makeRecordCalls<CompressorProfile, CompressorRecord>('/api/v1/compressors')
