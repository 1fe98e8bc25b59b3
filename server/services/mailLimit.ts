import { ipKeyGenerator } from 'express-rate-limit'
import type { AppContext } from '../context.ts'
import { makePassingProblem } from '../problems.ts'
import { RecentCounts } from './recentCounts.ts'

const hour = 3600_000
const mostRequests = 60
const mostMails = 5

/** Keeps the forms that anyone can fill in from flooding a mailbox, or the mailer. */
class MailLimit {
  private readonly byAddress = new RecentCounts(hour)
  private readonly byMailbox = new RecentCounts(hour)

  constructor(private readonly now: () => Date) {}

  /** Whether one more mail may go to this mailbox; whoever asks too often from one address is told to wait. */
  admit(address: string | undefined, email: string): boolean {
    const at = this.now()
    const from = ipKeyGenerator(address ?? '')
    if (this.byAddress.read(from, at) >= mostRequests) {
      const detail = 'Too many requests for mail from this address. Try again in an hour.'
      throw makePassingProblem('too-many-requests', detail, hour / 1000)
    }
    this.byAddress.add(from, at)
    const isWelcome = this.byMailbox.read(email, at) < mostMails
    if (isWelcome) this.byMailbox.add(email, at)
    return isWelcome
  }
}

const limits = new WeakMap<AppContext, MailLimit>()

export function mailLimitOf(context: AppContext): MailLimit {
  let limit = limits.get(context)
  if (!limit) limits.set(context, (limit = new MailLimit(() => context.now())))
  return limit
}
