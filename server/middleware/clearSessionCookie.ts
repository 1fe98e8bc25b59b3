import type { Response } from 'express'
import type { AppContext } from '../context.ts'
import { sessionCookieName } from './session.ts'

/** Takes the cookie away that the session handler set, with the same marks, or the browser would keep it. */
export function clearSessionCookie({ publicUrl }: Pick<AppContext, 'publicUrl'>, response: Response): void {
  response.clearCookie(sessionCookieName, {
    httpOnly: true,
    sameSite: 'lax',
    secure: publicUrl.startsWith('https:'),
    path: '/',
  })
}
