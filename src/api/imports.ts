import type { ImportAnswer, ImportKind, ImportRequest } from '#shared/contracts/imports.ts'
import { askApi } from './request.ts'

export const importCsv = (kind: ImportKind, request: ImportRequest) =>
  askApi<ImportAnswer>('POST', `/api/v1/${kind}/import`, request)
