import type { NozzleEvent } from '../contracts/nozzles.ts'
import type { Work } from '../contracts/work.ts'
import { findDisagreements } from './disagreements.ts'
import type { Closing, Disagreement } from './disagreements.ts'
import { compareText, millisecondsOf, sortMade } from './instants.ts'
import { dropRepeats } from './supersede.ts'

/** One nozzle on one outlet, from an instant to before another; null: still there. */
export interface Mount {
  nozzleId: string
  rigId: string
  outletIndex: number
  from: string
  fromMs: number
  until: string | null
  untilMs: number
}

export type NozzleState =
  | { kind: 'spare' }
  | { kind: 'in-service'; rigId: string; outletIndex: number; since: string }
  | { kind: 'retired'; since: string }
  | { kind: 'broken'; since: string; breakage: NozzleEvent['breakage'] }

export interface NozzleHistory {
  nozzleId: string
  state: NozzleState
  /** in order; none overlap */
  mounts: Mount[]
}

export interface History {
  nozzles: Map<string, NozzleHistory>
  /** the mounts of each outlet, in order, by `outletKey`; none overlap */
  outlets: Map<string, Mount[]>
  /** what two people wrote down that cannot both be, in order; the later counts */
  disagreements: Disagreement[]
}

export const outletKey = (rigId: string, outletIndex: number): string => `${rigId} ${outletIndex}`

/** At one instant what is taken off goes before what is mounted, so that a swap is one thing; then what ends a nozzle. */
const rank = { 'put-back': 0, 'taken-off': 0, mounted: 1, broken: 2, retired: 2 } as const

function sortEvents(events: readonly NozzleEvent[]): NozzleEvent[] {
  return sortMade(events)
    .map((event) => ({ event, ms: millisecondsOf(event.at) }))
    .sort((a, b) => a.ms - b.ms || rank[a.event.kind] - rank[b.event.kind])
    .map(({ event }) => event)
}

/** Whether an event speaks of where the nozzle is: it names that place, or none. */
function isThere({ rigId, outletIndex }: NozzleEvent, mount: Mount): boolean {
  const isRig = rigId === null || rigId === mount.rigId
  return isRig && (outletIndex === null || outletIndex === mount.outletIndex)
}

/**
 * Where each nozzle was and is, and what was on each outlet when.
 *
 * The later event closes the earlier: a nozzle mounted comes off wherever it was, and what sat on that outlet is spare.
 * A nozzle that is taken off a place where it is not stays where it is.
 *
 * Inputs   the company's nozzles and events, in any order, repeats among them
 * Result   the same for every order and any repeats; a mount that ended at the instant it began is none
 * Errors   none        Checked  tests/shared/work/history.test.ts
 */
export function historyOf(work: Pick<Work, 'nozzles' | 'events'>): History {
  const events = sortEvents(dropRepeats(work.events))
  const nozzles = new Map<string, NozzleHistory>()
  const outlets = new Map<string, Mount[]>()
  const openOnOutlet = new Map<string, Mount>()
  const openOfNozzle = new Map<string, Mount>()
  const mountEvents = new Map<Mount, NozzleEvent>()
  const closings: Closing[] = []
  const lastOfNozzle = new Map<string, NozzleEvent>()

  const nozzleOf = (nozzleId: string): NozzleHistory => {
    const known = nozzles.get(nozzleId)
    if (known) return known
    const created: NozzleHistory = { nozzleId, state: { kind: 'spare' }, mounts: [] }
    nozzles.set(nozzleId, created)
    return created
  }
  const close = (mount: Mount, by: NozzleEvent) => {
    mount.until = by.at
    mount.untilMs = millisecondsOf(by.at)
    openOnOutlet.delete(outletKey(mount.rigId, mount.outletIndex))
    openOfNozzle.delete(mount.nozzleId)
    lastOfNozzle.set(mount.nozzleId, by)
  }

  for (const id of work.nozzles.map((nozzle) => nozzle.id).sort(compareText)) nozzleOf(id)
  for (const event of events) {
    const { nozzleId, kind, at } = event
    const nozzle = nozzleOf(nozzleId)
    const open = openOfNozzle.get(nozzleId)
    const before = lastOfNozzle.get(nozzleId)
    if (kind === 'mounted') {
      const { rigId, outletIndex } = event
      if (rigId === null || outletIndex === null) continue
      const sitting = openOnOutlet.get(outletKey(rigId, outletIndex))
      if (sitting && sitting === open) continue
      if (sitting) {
        closings.push({ code: 'two-on-outlet', earlier: mountEvents.get(sitting)!, later: event })
        close(sitting, event)
        nozzleOf(sitting.nozzleId).state = { kind: 'spare' }
      }
      if (open) {
        closings.push({ code: 'nozzle-on-two', earlier: mountEvents.get(open)!, later: event })
        close(open, event)
      }
      if (nozzle.state.kind === 'retired' || nozzle.state.kind === 'broken') {
        closings.push({ code: 'mounted-when-gone', earlier: before!, later: event })
      }
      const mount: Mount = {
        nozzleId,
        rigId,
        outletIndex,
        from: at,
        fromMs: millisecondsOf(at),
        until: null,
        untilMs: Infinity,
      }
      mountEvents.set(mount, event)
      openOnOutlet.set(outletKey(rigId, outletIndex), mount)
      openOfNozzle.set(nozzleId, mount)
      nozzle.mounts.push(mount)
      nozzle.state = { kind: 'in-service', rigId, outletIndex, since: at }
      lastOfNozzle.set(nozzleId, event)
      continue
    }
    const isElsewhere = event.rigId !== null && !(open && isThere(event, open))
    if (kind === 'taken-off' && isElsewhere) {
      if (before) closings.push({ code: 'taken-off-elsewhere', earlier: before, later: event })
      continue
    }
    if (open) close(open, event)
    if (kind === 'taken-off' && !open) continue
    lastOfNozzle.set(nozzleId, event)
    nozzle.state =
      kind === 'broken'
        ? { kind, since: at, breakage: event.breakage }
        : kind === 'retired'
          ? { kind, since: at }
          : { kind: 'spare' }
  }

  for (const nozzle of nozzles.values()) {
    nozzle.mounts = nozzle.mounts.filter(({ fromMs, untilMs }) => untilMs > fromMs)
    for (const mount of nozzle.mounts) {
      const key = outletKey(mount.rigId, mount.outletIndex)
      const mounts = outlets.get(key)
      if (mounts) mounts.push(mount)
      else outlets.set(key, [mount])
    }
  }
  for (const mounts of outlets.values()) mounts.sort((a, b) => a.fromMs - b.fromMs)
  return { nozzles, outlets, disagreements: findDisagreements(closings, events) }
}

/** What is on an outlet at an instant, in milliseconds; null: nothing that was written down. */
export function mountedAt(
  { outlets }: History,
  rigId: string,
  outletIndex: number,
  milliseconds: number,
): Mount | null {
  const mounts = outlets.get(outletKey(rigId, outletIndex)) ?? []
  const mount = mounts.findLast(({ fromMs }) => fromMs <= milliseconds)
  return mount && milliseconds < mount.untilMs ? mount : null
}
