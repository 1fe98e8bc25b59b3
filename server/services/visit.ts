import type { Visit } from '#shared/contracts/accounts.ts'
import type { Request } from 'express'
import type { Actor, SignedIn } from '../actor.ts'
import type { AppContext } from '../context.ts'
import { makeProblem } from '../problems.ts'
import { findAccountByEmail, readSession } from './accounts.ts'
import { listDemoPeople } from './demo.ts'
import { isMailPageOpen } from './emails.ts'
import { openSession } from './signIn.ts'

export function readVisit(context: AppContext, caller: SignedIn | Actor | null): Visit {
  const companyId = caller && 'companyId' in caller ? caller.companyId : null
  return {
    session: caller && readSession(context, caller.accountId, companyId),
    demoPeople: listDemoPeople(context),
    hasMailPage: isMailPageOpen(context.config),
  }
}

/** Signs somebody of the demo in without a password, where the demo is offered. */
export function openDemoSession(context: AppContext, request: Request, email: string) {
  const isOffered = listDemoPeople(context).some((person) => person.email === email)
  const account = isOffered && findAccountByEmail(context.database.queries, email)
  if (!account) throw makeProblem('not-found', 'There is nothing at this address.')
  return openSession(context, request, account)
}
