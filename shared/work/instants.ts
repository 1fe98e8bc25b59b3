/** Instants as records carry them, `2026-05-03T14:10:00-06:00`, and days on somebody's calendar, `2026-05-03`. */

const minuteMs = 60_000
export const hourMs = 60 * minuteMs
export const dayMs = 24 * hourMs

/** Milliseconds since 1970 of an instant. */
export const millisecondsOf = (at: string): number => Date.parse(at)

/** Minutes that the clock of an instant is ahead of UTC; `Z` is 0. */
export function offsetMinutesOf(at: string): number {
  const match = /([+-])(\d\d):?(\d\d)$/.exec(at)
  if (!match) return 0
  return (match[1] === '-' ? -1 : 1) * (Number(match[2]) * 60 + Number(match[3]))
}

/** When a day begins on a clock that is so far ahead of UTC. */
export function startOfDay(localDate: string, offsetMinutes: number): number {
  return Date.parse(`${localDate}T00:00:00Z`) - offsetMinutes * minuteMs
}

/** The day that an instant falls on by its own clock. */
export function localDateOf(at: string): string {
  return dateText(millisecondsOf(at) + offsetMinutesOf(at) * minuteMs)
}

/** The day so many days later; parts of a day are dropped. */
export function addDays(localDate: string, days: number): string {
  return dateText(Date.parse(`${localDate}T00:00:00Z`) + Math.floor(days) * dayMs)
}

const dateText = (milliseconds: number): string => new Date(milliseconds).toISOString().slice(0, 10)

/** Whatever is written down, in one order: by instant, then by id. */
export function sortMade<T extends { at: string; id: string }>(records: readonly T[]): T[] {
  return records
    .map((record) => ({ record, ms: millisecondsOf(record.at) }))
    .sort((a, b) => a.ms - b.ms || compareText(a.record.id, b.record.id))
    .map(({ record }) => record)
}

export const compareText = (a: string, b: string): number => (a < b ? -1 : a > b ? 1 : 0)
