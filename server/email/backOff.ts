const firstDelayMs = 30_000
const longestDelayMs = 3600_000
/** longer than mail servers are down, shorter than anybody waits for the mail */
export const giveUpAfterMs = 3 * 24 * 3600_000

/**
 * How long to wait after a failed attempt: twice as long each time, up to an hour, less up to a quarter by chance, so
 * that mails which failed together do not come back together.
 */
export function backOffMs(attempts: number, random: number): number {
  const full = Math.min(firstDelayMs * 2 ** (attempts - 1), longestDelayMs)
  return Math.round(full * (1 - random / 4))
}
