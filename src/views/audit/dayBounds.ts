/** How far a zone's clock is ahead of UTC at an instant, ms. */
function zoneOffsetMs(instantMs: number, timeZone: string): number {
  const parts = new Intl.DateTimeFormat('en-US', {
    timeZone,
    hourCycle: 'h23',
    year: 'numeric',
    month: 'numeric',
    day: 'numeric',
    hour: 'numeric',
    minute: 'numeric',
    second: 'numeric',
  }).formatToParts(instantMs)
  const part = (type: string) => Number(parts.find((each) => each.type === type)?.value)
  const shown = Date.UTC(
    part('year'),
    part('month') - 1,
    part('day'),
    part('hour'),
    part('minute'),
    part('second'),
  )
  return shown - Math.floor(instantMs / 1000) * 1000
}

/** The instant at which a day, such as 2026-05-03, begins on a zone's clock; a day later, on the next one. */
export function startOfDay(date: string, timeZone: string, daysLater = 0): string {
  const midnightUtc = Date.parse(`${date}T00:00:00Z`) + daysLater * 86_400_000
  // where the clock is changed between the two guesses, the second offset is that of the midnight itself
  const guess = midnightUtc - zoneOffsetMs(midnightUtc, timeZone)
  return new Date(midnightUtc - zoneOffsetMs(guess, timeZone)).toISOString()
}
