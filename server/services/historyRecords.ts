import { createHash } from 'node:crypto'
import type { NewNozzleEvent } from '#shared/contracts/nozzles.ts'
import type { NewBoreCheck, NewShift } from '#shared/contracts/work.ts'
import type { HistoryRow } from '../tables/historyColumns.ts'

export interface HistoryRecords {
  shifts: NewShift[]
  boreChecks: NewBoreCheck[]
  events: NewNozzleEvent[]
}

/** An id that follows from what it stands for (RFC 9562, version 8): the same row imported again is the same record. */
function idOf(...parts: unknown[]): string {
  const hash = createHash('sha256').update(JSON.stringify(parts)).digest('hex')
  const variant = '89ab'[parseInt(hash.slice(16, 17), 16) % 4] ?? '8'
  return [
    hash.slice(0, 8),
    hash.slice(8, 12),
    `8${hash.slice(13, 16)}`,
    `${variant}${hash.slice(17, 20)}`,
    hash.slice(20, 32),
  ].join('-')
}

/** How far the clocks of a place are from UTC at a moment, as it is written behind a time. */
function offsetAt(timeZone: string, moment: Date): string {
  const parts = new Intl.DateTimeFormat('en-US', { timeZone, timeZoneName: 'longOffset' }).formatToParts(
    moment,
  )
  const name = parts.find(({ type }) => type === 'timeZoneName')?.value ?? 'GMT'
  return name === 'GMT' ? '+00:00' : name.slice('GMT'.length, 'GMT+00:00'.length)
}

/**
 * A paper log as records. It says no time of day: what is mounted is mounted as the day begins, hours are blasted at
 * noon and a bore is measured in the evening, after the hours of its day.
 */
export function makeHistoryRecords(rows: readonly HistoryRow[], timeZone: string): HistoryRecords {
  const records: HistoryRecords = { shifts: [], boreChecks: [], events: [] }
  const seen = new Map<string, number>()
  /** two rows that say the same are two shifts */
  const occurrenceOf = (row: HistoryRow) => {
    const key = JSON.stringify(row)
    const count = (seen.get(key) ?? 0) + 1
    seen.set(key, count)
    return count
  }
  const offsets = new Map<string, string>()
  const at = (localDate: string, time: string) => {
    const offset = offsets.get(localDate) ?? offsetAt(timeZone, new Date(`${localDate}T18:00:00Z`))
    offsets.set(localDate, offset)
    return `${localDate}T${time}${offset}`
  }
  const mounted = new Map<string, string>()
  const inOrder = rows
    .map((row) => ({ row, occurrence: occurrenceOf(row) }))
    .toSorted((one, other) =>
      one.row.localDate < other.row.localDate ? -1 : one.row.localDate > other.row.localDate ? 1 : 0,
    )
  for (const { row, occurrence } of inOrder) {
    const { localDate, rigId, nozzleId, blastHours, mediumId, isWet, nozzlePressureKpa, note } = row
    if (rigId !== null && blastHours !== null) {
      const shift = { localDate, rigId, blastHours, mediumId, isWet, nozzlePressureKpa, note }
      records.shifts.push({
        id: idOf('shift', row, occurrence),
        at: at(localDate, '12:00:00'),
        ...shift,
        areaM2: null,
        supersedesId: null,
      })
    }
    if (rigId !== null && nozzleId !== null && blastHours !== null) {
      const outletIndex = (row.outlet ?? 1) - 1
      const place = `${rigId} ${outletIndex}`
      if (mounted.get(nozzleId) !== place) {
        records.events.push({
          id: idOf('mounted', localDate, rigId, outletIndex, nozzleId),
          at: at(localDate, '00:00:00'),
          nozzleId,
          kind: 'mounted',
          rigId,
          outletIndex,
          breakage: null,
          note: null,
        })
        for (const [other, where] of mounted) if (where === place) mounted.delete(other)
        mounted.set(nozzleId, place)
      }
    }
    const { passedMm, refusedMm, boreMm, accuracyMm, method, bitSet, looksOval, isCracked } = row
    const hasCheck = passedMm !== null || refusedMm !== null || boreMm !== null || isCracked
    if (nozzleId !== null && hasCheck) {
      const isGauge = boreMm !== null
      records.boreChecks.push({
        id: idOf('check', row, occurrence),
        at: at(localDate, '18:00:00'),
        nozzleId,
        rigId,
        method: isGauge ? (method ?? 'caliper') : 'bits',
        bitSet: isGauge ? null : bitSet,
        passedMm,
        refusedMm,
        boreMm,
        accuracyMm,
        looksOval,
        isCracked,
        photoId: null,
        supersedesId: null,
      })
    }
  }
  return records
}
