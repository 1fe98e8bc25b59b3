import session from 'express-session'
import type { RequestHandler } from 'express'
import type { AppContext } from '../context.ts'
import { SessionStore, sessionIdleMs } from '../services/sessions.ts'

export const sessionCookieName = 'sixteenth'
declare module 'express-session' {
  interface SessionData {
    accountId: string
    companyId: string | null
  }
}

/** Whether the cookie may travel over TLS only. Browsers take their own machine for as good as TLS. */
export function isCookieSecure({ config, publicUrl }: Pick<AppContext, 'config' | 'publicUrl'>): boolean {
  return config.isProduction || publicUrl.startsWith('https:')
}

const handlers = new WeakMap<AppContext, RequestHandler>()

/** One session handler for all routes of an application. Nobody has a session before signing in. */
export function sessionHandler(context: AppContext): RequestHandler {
  const existing = handlers.get(context)
  if (existing) return existing
  const isSecure = isCookieSecure(context)
  const keep = session({
    name: sessionCookieName,
    secret: context.sessionSecret,
    store: new SessionStore(context),
    resave: false,
    saveUninitialized: false,
    rolling: true,
    cookie: {
      httpOnly: true,
      sameSite: 'lax',
      secure: isSecure,
      path: '/',
      maxAge: sessionIdleMs,
    },
  })
  // We speak plain HTTP to whatever ends the TLS before us: the address people type says whether theirs is secure.
  const handler: RequestHandler = (request, response, next) => {
    if (isSecure) Object.defineProperty(request, 'secure', { value: true })
    keep(request, response, next)
  }
  handlers.set(context, handler)
  return handler
}
