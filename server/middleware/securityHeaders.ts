import helmet from 'helmet'
import type { RequestHandler } from 'express'
import type { Config } from '../config.ts'

/** Scripts come from our own address only; inline ones only if the page we built holds them. */
export function securityHeaders(config: Config, inlineScriptHashes: readonly string[]): RequestHandler {
  const isSecure = config.publicUrl?.startsWith('https:') ?? false
  return helmet({
    contentSecurityPolicy: {
      useDefaults: false,
      directives: {
        defaultSrc: ["'self'"],
        scriptSrc: ["'self'", ...inlineScriptHashes.map((hash) => `'${hash}'`)],
        scriptSrcAttr: ["'none'"],
        styleSrc: ["'self'", "'unsafe-inline'"],
        imgSrc: ["'self'", 'data:'],
        fontSrc: ["'self'"],
        connectSrc: ["'self'"],
        objectSrc: ["'none'"],
        baseUri: ["'self'"],
        formAction: ["'self'"],
        frameAncestors: ["'none'"],
        ...(isSecure && { upgradeInsecureRequests: [] }),
      },
    },
    strictTransportSecurity: isSecure,
    xFrameOptions: { action: 'deny' },
  })
}
