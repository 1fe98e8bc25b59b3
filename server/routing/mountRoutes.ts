import { Router } from 'express'
import type { Request, RequestHandler } from 'express'
import { z } from 'zod'
import { companyHeader } from '#shared/contracts/limits.ts'
import { isPermission, may } from '#shared/contracts/permissions.ts'
import type { Actor, SignedIn } from '../actor.ts'
import type { AppContext } from '../context.ts'
import { jsonBody } from '../middleware/jsonBody.ts'
import { methodNotAllowed } from '../middleware/methodNotAllowed.ts'
import { refuseCrossOrigin } from '../middleware/refuseCrossOrigin.ts'
import { sessionHandler } from '../middleware/session.ts'
import { parseBody } from '../parseBody.ts'
import { makeProblem } from '../problems.ts'
import { identify } from '../services/identify.ts'
import { refuseEnded } from '../services/signIn.ts'
import { JsonText } from './route.ts'
import type { RouteSpec } from './route.ts'

const emptyQuery = z.strictObject({})

function isActor(caller: SignedIn | Actor): caller is Actor {
  return 'companyId' in caller
}

/** The one place where it is decided who gets past. */
export function admit(spec: RouteSpec, caller: SignedIn | Actor | null): void {
  const { access } = spec
  if (access === 'anyone' || access === 'visitor') return
  if (caller === null) throw makeProblem('not-signed-in', 'Sign in first.')
  if (access === 'signed-in') return
  if (!isActor(caller)) throw makeProblem('forbidden', 'No company is active for this account.')
  if (!may(caller.roles, access)) {
    throw makeProblem('forbidden', 'Your roles in this company do not include this.')
  }
}

/** A page that another window has taken to another company says which one it shows. */
function refuseOtherCompany(request: Request, caller: SignedIn | Actor | null): void {
  const meant = request.get(companyHeader)
  if (meant === undefined || caller === null || !isActor(caller) || meant === caller.companyId) return
  throw makeProblem('other-company', 'Another company is open in this session now.')
}

function parseParams(spec: RouteSpec, params: unknown): unknown {
  if (!spec.params) return undefined
  const parsed = spec.params.safeParse(params)
  if (!parsed.success) throw makeProblem('not-found', 'There is nothing at this address.')
  return parsed.data
}

function answerCall(spec: RouteSpec, context: AppContext): RequestHandler {
  return async (request, response) => {
    const answer = await spec.handle({
      context,
      caller: response.locals['caller'] as never,
      params: parseParams(spec, request.params) as never,
      query: parseBody(spec.query ?? emptyQuery, request.query) as never,
      body: (spec.body ? parseBody(spec.body, request.body) : undefined) as never,
      request,
      response,
    })
    if (response.headersSent || spec.file) return
    response.status(spec.status ?? 200)
    if (answer instanceof JsonText) response.type('application/json').send(answer.text)
    else if (spec.answer) response.json(answer)
    else response.end()
  }
}

function handlersOf(spec: RouteSpec, context: AppContext): RequestHandler[] {
  const readsSession = spec.access !== 'anyone'
  const needsSession = readsSession && spec.access !== 'visitor'
  const guard: RequestHandler = (request, response, next) => {
    const caller = readsSession ? identify(context, request) : null
    admit(spec, caller)
    if (isPermission(spec.access)) refuseOtherCompany(request, caller)
    response.locals['caller'] = caller
    next()
  }
  const stillSignedIn: RequestHandler = async (request, _response, next) => {
    await refuseEnded(request)
    next()
  }
  return [
    ...(spec.method === 'get' ? [] : [refuseCrossOrigin(context)]),
    ...(spec.middleware?.(context) ?? []),
    ...(readsSession ? [sessionHandler(context)] : []),
    guard,
    // A body may take its time to arrive, and roles be taken away or the session be ended meanwhile.
    ...(spec.body ? [...jsonBody(spec.maxBodyBytes), guard] : []),
    ...(spec.upload ? [spec.upload.read, guard] : []),
    ...((spec.body || spec.upload) && needsSession ? [stillSignedIn] : []),
    answerCall(spec, context),
  ]
}

/** Mounts every route, and on each address a refusal of the methods it does not have. */
export function mountRoutes(specs: readonly RouteSpec[], context: AppContext): Router {
  const router = Router()
  for (const path of new Set(specs.map((spec) => spec.path))) {
    const atPath = specs.filter((spec) => spec.path === path)
    const route = router.route(path)
    for (const spec of atPath) route[spec.method](...handlersOf(spec, context))
    const allowed = atPath.flatMap(({ method }) =>
      method === 'get' ? ['GET', 'HEAD'] : [method.toUpperCase()],
    )
    route.all(methodNotAllowed(...allowed))
  }
  return router
}
