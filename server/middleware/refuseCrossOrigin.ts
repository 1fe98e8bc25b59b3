import type { Request, RequestHandler } from 'express'
import type { AppContext } from '../context.ts'
import { makeProblem } from '../problems.ts'

function isFromElsewhere(request: Request, publicUrl: string): boolean {
  const fetchSite = request.get('sec-fetch-site')
  if (fetchSite !== undefined && fetchSite !== 'same-origin' && fetchSite !== 'none') return true
  const origin = request.get('origin')
  if (origin === undefined) return false
  // Behind a proxy the Host is the proxy's to say; the address people type is ours.
  return (
    origin !== new URL(publicUrl).origin && origin !== `${request.protocol}://${request.get('host') ?? ''}`
  )
}

/** No page of another site may act with the session of whoever has it open. Programs send no origin and have no session. */
export function refuseCrossOrigin({ publicUrl }: AppContext): RequestHandler {
  return (request, _response, next) => {
    if (!isFromElsewhere(request, publicUrl)) return next()
    next(makeProblem('cross-origin', 'This can only be done from the pages of this site.'))
  }
}
