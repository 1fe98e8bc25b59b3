import { createTransport } from 'nodemailer'
import type { AppContext } from '../context.ts'
import {
  blankSentMails,
  findDueMail,
  markFailed,
  markGivenUp,
  markKept,
  markSent,
} from '../services/emails.ts'
import type { QueuedMail } from '../services/emails.ts'
import { backOffMs, giveUpAfterMs } from './backOff.ts'

const pollEveryMs = 5000
const longestErrorLength = 500
const timeouts = { connectionTimeout: 10_000, greetingTimeout: 10_000, socketTimeout: 30_000 }

export interface Mailer {
  stop(): Promise<void>
}

/** Hands one mail over; it is refused if the mail server does not accept it. */
type Send = (mail: QueuedMail, signal: AbortSignal) => Promise<void>

interface SmtpError {
  message: string
  responseCode?: number
  command?: string
}

/** A server in front of which we are a stranger says 5xx as well: only no to this receiver or this mail is final. */
function isFinal({ responseCode = 0, command = '' }: SmtpError): boolean {
  return responseCode >= 500 && responseCode !== 503 && (command === 'RCPT TO' || command === 'DATA')
}

function createSmtpSend({ config }: AppContext, smtpUrl: string): Send {
  const transport = createTransport({
    url: smtpUrl,
    ...timeouts,
    disableFileAccess: true,
    disableUrlAccess: true,
  })
  const domain = /@([\w.-]+)/.exec(config.mailFrom)?.[1] ?? 'localhost'
  return async ({ id, to, subject, text, html }, signal) => {
    await transport.sendMail({
      from: config.mailFrom,
      to: { name: '', address: to },
      subject,
      text,
      html,
      // The same at each attempt: a receiver that had it already can tell.
      messageId: `<${id}@${domain}>`,
      headers: { 'Auto-Submitted': 'auto-generated' },
      signal,
    })
  }
}

/**
 * Sends what waits in the queue, one mail at a time, and is woken by whoever lays one in. A mail counts as sent only
 * after the mail server has accepted it; if we die in between it is sent again under the same message id.
 */
export function startMailer(
  context: AppContext,
  { pollMs = pollEveryMs, random = Math.random }: { pollMs?: number; random?: () => number } = {},
): Mailer {
  const { config, logger, now } = context
  const send = config.smtpUrl === null ? null : createSmtpSend(context, config.smtpUrl)
  const stopping = new AbortController()
  /** accepted, but not yet written down as sent: a full disk may not make us send it over and over */
  const accepted = new Set<string>()
  let hasWarned = false
  let timer: NodeJS.Timeout | undefined
  let round: Promise<void> | null = null
  let isWoken = false

  function warnOnce(): void {
    if (hasWarned) return
    hasWarned = true
    logger.warn('mails wait in the queue, since SMTP_URL does not say where to hand them over')
  }

  function noteFailure(mail: QueuedMail, error: SmtpError): void {
    const reason = error.message.slice(0, longestErrorLength)
    const isTooOld = now().getTime() - Date.parse(mail.createdAt) >= giveUpAfterMs
    if (isTooOld || isFinal(error)) {
      markGivenUp(context, mail, reason)
      logger.error({ mailId: mail.id, reason }, 'a mail was given up')
      return
    }
    const attempts = mail.attempts + 1
    const delayMs = backOffMs(attempts, random())
    markFailed(context, mail, reason, new Date(now().getTime() + delayMs))
    logger.warn({ mailId: mail.id, attempts, delayMs, reason }, 'a mail could not be sent yet')
  }

  async function handOver(mail: QueuedMail, sendMail: Send): Promise<void> {
    if (!accepted.has(mail.id)) {
      try {
        await sendMail(mail, stopping.signal)
      } catch (error) {
        if (!stopping.signal.aborted) noteFailure(mail, error as SmtpError)
        return
      }
      accepted.add(mail.id)
    }
    markSent(context, mail.id)
    accepted.delete(mail.id)
  }

  async function sendAllDue(): Promise<void> {
    while (!stopping.signal.aborted) {
      const mail = findDueMail(context)
      if (!mail) return
      if (send) await handOver(mail, send)
      else if (config.isProduction) return warnOnce()
      else markKept(context, mail.id)
    }
  }

  function scheduleNext(): void {
    if (stopping.signal.aborted) return
    timer = setTimeout(startRound, pollMs)
    timer.unref()
  }

  async function runRound(): Promise<void> {
    do {
      isWoken = false
      await sendAllDue().catch((error: unknown) => logger.error({ err: error }, 'the mail queue'))
    } while (isWoken && !stopping.signal.aborted)
  }

  function startRound(): void {
    clearTimeout(timer)
    round = runRound().finally(() => {
      round = null
      scheduleNext()
    })
  }

  context.mailIsWaiting = () => {
    if (stopping.signal.aborted) return
    isWoken = true
    // Not before whoever laid it in has answered.
    if (!round) setImmediate(() => round ?? startRound())
  }

  if (send) blankSentMails(context)
  startRound()
  return {
    async stop() {
      context.mailIsWaiting = () => {}
      clearTimeout(timer)
      stopping.abort()
      await round
    },
  }
}
