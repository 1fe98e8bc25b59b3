import type { Request } from 'express'
import { keptMailsSchema } from '#shared/contracts/mails.ts'
import { makeProblem } from '../problems.ts'
import { defineRoute } from '../routing/route.ts'
import { isMailPageOpen, listKeptMails } from '../services/emails.ts'

const localHost = /^(localhost|127\.0\.0\.1|\[::1\])(:\d{1,5})?$/i
const proxyHeaders = ['forwarded', 'via', 'x-forwarded-for', 'x-forwarded-host', 'x-real-ip']

/**
 * A page elsewhere can point a name of its own at this machine, and then read what is here as its own: only our names
 * are answered. Nor is what a proxy passes on from somewhere else.
 */
function isFromThisMachine(request: Request): boolean {
  return (
    localHost.test(request.headers.host ?? '') &&
    proxyHeaders.every((name) => request.headers[name] === undefined)
  )
}

export const mailRoutes = [
  defineRoute({
    method: 'get',
    path: '/api/v1/mails',
    access: 'anyone',
    operationId: 'listKeptMails',
    summary: 'Mails that went nowhere, on the own machine without a mail server; newest first, at most 50',
    answer: keptMailsSchema,
    problems: ['not-found'],
    handle: ({ context, request }) => {
      if (!isMailPageOpen(context.config) || !isFromThisMachine(request)) {
        throw makeProblem('not-found', 'There is nothing at this address.')
      }
      return { mails: listKeptMails(context) }
    },
  }),
]
