import { setTimeout as sleep } from 'node:timers/promises'
import { ipKeyGenerator } from 'express-rate-limit'
import type { AppContext } from '../context.ts'
import { makePassingProblem } from '../problems.ts'
import { RecentCounts } from './recentCounts.ts'

const minute = 60_000
const forgetAfterMs = 30 * minute
/** wrong tries that cost no wait: fingers slip, and a yard of people may share one address */
const freeTries = { account: 3, address: 10 }
const firstWaitMs = 500
export const longestWaitMs = 5000
/** who waits holds a connection: more at once than a person could want are sent away */
const mostWaiting = { accountFromAddress: 3, address: 20, all: 1000 }

function waitAfter(tries: number, free: number): number {
  if (tries < free) return 0
  return Math.min(longestWaitMs, firstWaitMs * 2 ** Math.min(tries - free, 10))
}

/** All of a subscriber's addresses in IPv6 are one. */
function keyOfAddress(address: string | undefined): string {
  return ipKeyGenerator(address ?? '')
}

/** How many there are of each of a few keys just now. */
class Counts {
  private readonly counts = new Map<string, number>()

  read(key: string): number {
    return this.counts.get(key) ?? 0
  }

  add(step: 1 | -1, ...keys: string[]): void {
    for (const key of keys) {
      const count = this.read(key) + step
      if (count > 0) this.counts.set(key, count)
      else this.counts.delete(key)
    }
  }
}

/**
 * Makes whoever guesses passwords slow, by the account they guess at and by the address they come from, and shuts
 * nobody out. An address without an account is counted like any other, so that a wait tells nothing.
 */
export class SignInSlowdown {
  private readonly accounts = new RecentCounts(forgetAfterMs)
  private readonly addresses = new RecentCounts(forgetAfterMs)
  /** tries of which it is not known yet whether they fail, waiting or being verified */
  private readonly underway = new Counts()
  private readonly waiting = new Counts()
  private waitingInAll = 0

  constructor(
    private readonly now: () => Date,
    /** replaced in tests, which have no time */
    public wait: (milliseconds: number) => Promise<void> = (milliseconds) => sleep(milliseconds),
  ) {}

  get keyCount(): number {
    return this.accounts.size + this.addresses.size
  }

  /**
   * Waits as long as this try has to; refuses it when too many are waiting already. What it answers is called once it is
   * known how the try ended.
   */
  async admit(email: string, address: string | undefined): Promise<() => void> {
    const at = this.now()
    const from = keyOfAddress(address)
    const pair = `${from} ${email}`
    // Tries that are under way count as made, or a hundred sent at once would all be let through like the first.
    const milliseconds = Math.max(
      waitAfter(this.accounts.read(email, at) + this.underway.read(pair), freeTries.account),
      waitAfter(this.addresses.read(from, at) + this.underway.read(from), freeTries.address),
    )
    if (milliseconds > 0) this.refuseCrowd(pair, from)
    this.underway.add(1, pair, from)
    const finish = () => this.underway.add(-1, pair, from)
    if (milliseconds === 0) return finish
    this.waiting.add(1, pair, from)
    this.waitingInAll += 1
    try {
      await this.wait(milliseconds)
    } finally {
      this.waiting.add(-1, pair, from)
      this.waitingInAll -= 1
    }
    return finish
  }

  private refuseCrowd(pair: string, from: string): void {
    if (
      this.waiting.read(pair) < mostWaiting.accountFromAddress &&
      this.waiting.read(from) < mostWaiting.address &&
      this.waitingInAll < mostWaiting.all
    ) {
      return
    }
    const detail = 'Too many tries at once. Wait a moment, then try again.'
    throw makePassingProblem('too-many-requests', detail, longestWaitMs / 1000)
  }

  noteFailure(email: string, address: string | undefined): void {
    this.accounts.add(email, this.now())
    this.addresses.add(keyOfAddress(address), this.now())
  }

  /** The address stays slow: one right password must not pay for guesses at the others. */
  noteSuccess(email: string): void {
    this.accounts.clear(email)
  }
}

const slowdowns = new WeakMap<AppContext, SignInSlowdown>()

/** The one slowdown of an application. */
export function slowdownOf(context: AppContext): SignInSlowdown {
  let slowdown = slowdowns.get(context)
  if (!slowdown) slowdowns.set(context, (slowdown = new SignInSlowdown(() => context.now())))
  return slowdown
}
