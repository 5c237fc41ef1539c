import helmet from 'helmet'
import type { RequestHandler } from 'express'
import type { Deps } from '#server/lib/deps.ts'

/** Headers of every answer. `isDev` loosens what the development server of the pages needs. */
export function createSecurityHeaders(deps: Deps, isDev: boolean): RequestHandler {
  const isHttps = deps.config.publicUrl.startsWith('https:')
  return helmet({
    contentSecurityPolicy: {
      useDefaults: false,
      directives: {
        defaultSrc: ["'self'"],
        scriptSrc: isDev ? ["'self'", "'unsafe-inline'"] : ["'self'"],
        styleSrc: isDev ? ["'self'", "'unsafe-inline'"] : ["'self'"],
        imgSrc: ["'self'", 'data:', 'blob:'],
        connectSrc: isDev ? ["'self'", 'ws:'] : ["'self'"],
        objectSrc: ["'none'"],
        baseUri: ["'none'"],
        formAction: ["'self'"],
        frameAncestors: ["'none'"],
      },
    },
    strictTransportSecurity: isHttps ? { maxAge: 365 * 86_400, includeSubDomains: false } : false,
    referrerPolicy: { policy: 'no-referrer' },
    xFrameOptions: { action: 'deny' },
    // Browsers ignore these on plain http and say so in the console of every page.
    crossOriginOpenerPolicy: isHttps,
    originAgentCluster: isHttps,
  })
}
