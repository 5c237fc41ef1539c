import type { Request } from 'express'
import { AppError } from '#server/lib/app-error.ts'
import type { Deps } from '#server/lib/deps.ts'

/**
 * Refuses a write that a page of another site sent. A browser says so by itself: in Sec-Fetch-Site on https and on this machine, in
 * Origin everywhere. What sends neither is no browser, and carries no cookie of somebody else.
 */
export function checkSameOrigin(deps: Deps, request: Request): void {
  const site = request.get('sec-fetch-site')
  const origin = request.get('origin')
  const isOurs = site === undefined ? origin === undefined || isOurOrigin(deps, request, origin) : site === 'same-origin' || site === 'none'
  if (!isOurs) throw new AppError('cross-site', "This was sent from a page of another site, so nothing was done. Open the shop's own address and try there.")
}

function isOurOrigin(deps: Deps, request: Request, origin: string): boolean {
  if (origin === deps.config.publicUrl) return true
  return URL.canParse(origin) && new URL(origin).host === request.get('host')
}
