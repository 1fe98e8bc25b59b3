import type { NozzleEvent } from '../contracts/nozzles.ts'
import { millisecondsOf } from './instants.ts'

export type DisagreementCode =
  /** a nozzle was mounted where, by another phone, another one was */
  | 'two-on-outlet'
  /** a nozzle was mounted while, by another phone, it was on another outlet */
  | 'nozzle-on-two'
  /** a nozzle was taken off a place where, by another phone, it was not */
  | 'taken-off-elsewhere'
  /** a nozzle was mounted that was broken or retired, and nobody had put it back */
  | 'mounted-when-gone'

/** An event that stands in the way of another. */
export interface Closing {
  code: DisagreementCode
  earlier: NozzleEvent
  later: NozzleEvent
}

/** Two events that cannot both be. The later one counts. */
export interface Disagreement extends Closing {
  /** somebody who could know of both has since said where the nozzle, or what on the outlet, is */
  isSettled: boolean
}

/** A phone knows what the server had received by then. */
function couldKnow({ receivedAt }: NozzleEvent, later: NozzleEvent): boolean {
  return millisecondsOf(receivedAt) <= millisecondsOf(later.at)
}

function isAbout({ nozzleId, rigId, outletIndex }: NozzleEvent, { earlier, later }: Closing): boolean {
  return [earlier, later].some(
    (event) =>
      event.nozzleId === nozzleId ||
      (rigId !== null && event.rigId === rigId && event.outletIndex === outletIndex),
  )
}

/**
 * Which of the events that closed another one disagree with it, rather than follow it.
 *
 * One person's two events follow each other, and so do two people's where the server had the earlier one before the
 * later was made: that is a swap. Otherwise nobody can tell which is right but those who stood there. A nozzle that was
 * gone and is mounted is always asked about.
 *
 * Ignores  a phone that had no signal and did not yet have what the server had
 * Checked  tests/shared/work/history.test.ts
 */
export function findDisagreements(
  closings: readonly Closing[],
  events: readonly NozzleEvent[],
): Disagreement[] {
  return closings
    .filter(
      ({ code, earlier, later }) =>
        code === 'mounted-when-gone' || (earlier.by !== later.by && !couldKnow(earlier, later)),
    )
    .map((closing) => ({
      ...closing,
      isSettled: events.some(
        (event) =>
          event !== closing.earlier &&
          event !== closing.later &&
          isAbout(event, closing) &&
          couldKnow(closing.earlier, event) &&
          couldKnow(closing.later, event),
      ),
    }))
}
