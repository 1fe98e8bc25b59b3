/**
 * A visitor's check that is to be saved as a rig: kept on this device over signing in, and over the mail that a sign-up
 * waits for, which opens a window of its own.
 */
const place = 'sixteenth.check-to-save'

export function holdCheck(fragment: string): void {
  try {
    localStorage.setItem(place, JSON.stringify({ fragment }))
  } catch {
    // A browser that keeps nothing still has the check in the address it came from.
  }
}

/** The fragment of the check that waits to be saved, empty for the one a visitor finds; null where none waits. */
export function readHeldCheck(): string | null {
  try {
    const held = JSON.parse(localStorage.getItem(place) ?? 'null') as { fragment?: unknown } | null
    return typeof held?.fragment === 'string' ? held.fragment : null
  } catch {
    return null
  }
}

export function dropHeldCheck(): void {
  try {
    localStorage.removeItem(place)
  } catch {
    // It was never kept.
  }
}
