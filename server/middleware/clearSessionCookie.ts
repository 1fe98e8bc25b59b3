import type { Response } from 'express'
import type { AppContext } from '../context.ts'
import { isCookieSecure, sessionCookieName } from './session.ts'

/** Takes the cookie away that the session handler set, with the same marks, or the browser would keep it. */
export function clearSessionCookie(
  context: Pick<AppContext, 'config' | 'publicUrl'>,
  response: Response,
): void {
  response.clearCookie(sessionCookieName, {
    httpOnly: true,
    sameSite: 'lax',
    secure: isCookieSecure(context),
    path: '/',
  })
}
