/** What SQLite says where the request is not to blame: nothing was written, and the same request may work later. */
const storageCodes = /^SQLITE_(FULL|READONLY|IOERR|CANTOPEN|BUSY|NOLFS|PROTOCOL)/

/** Whether the disk is full or failing, may not be written, or another process holds the database. */
export function isStorageFailure(error: unknown): boolean {
  const seen = new Set<unknown>()
  for (let cause = error; cause instanceof Error && !seen.has(cause); cause = cause.cause) {
    seen.add(cause)
    const { code } = cause as { code?: unknown }
    if (typeof code === 'string' && storageCodes.test(code)) return true
  }
  return false
}

/** Does what may be left undone where nothing can be written: a note of a visit must not keep anyone from reading. */
export function writeIfPossible(work: () => void): void {
  try {
    work()
  } catch (error) {
    if (!isStorageFailure(error)) throw error
  }
}
