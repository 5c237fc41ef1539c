import type { CookieOptions, Request, Response } from 'express'
import { z } from 'zod'
import type { Deps } from '#server/lib/deps.ts'
import { absoluteLimitSeconds, findSession, type CurrentSession, type StartedSession } from '#server/services/sessions.ts'
import { createTokenKind } from './tokens.ts'

const knownBrowserSeconds = 365 * 86_400
const sessionClaims = z.strictObject({ id: z.uuid(), secret: z.string() })
const knownBrowserClaims = z.strictObject({ browser: z.uuid(), person: z.uuid() })

/** What the cookies of a request say: who is signed in here, and which account has signed in from this browser before. */
export interface Cookies {
  readSession(request: Request): Promise<CurrentSession | null>
  readKnownBrowser(request: Request): Promise<{ browser: string; person: string } | null>
  startSession(response: Response, session: StartedSession): Promise<void>
  endSession(response: Response): void
}

/**
 * Cookies of this server. On https they are `Secure` and carry the `__Host-` prefix; on plain http in the shop's own network
 * browsers would refuse both, so the names and flags follow the public address.
 */
export function createCookies(deps: Deps): Cookies {
  const isHttps = deps.config.publicUrl.startsWith('https:')
  const prefix = isHttps ? '__Host-' : ''
  const sessionName = `${prefix}pullcord-session`
  const knownName = `${prefix}pullcord-browser`
  const options: CookieOptions = { httpOnly: true, sameSite: 'strict', secure: isHttps, path: '/' }
  const sessionTokens = createTokenKind(deps.config.sessionSecret, 'session', sessionClaims, absoluteLimitSeconds)
  const knownTokens = createTokenKind(deps.config.sessionSecret, 'known-browser', knownBrowserClaims, knownBrowserSeconds)

  return {
    readSession: async (request) => {
      const token = readCookie(request, sessionName)
      const claims = token === null ? null : await sessionTokens.read(token, deps.clock())
      return claims === null ? null : await findSession(deps, claims)
    },
    readKnownBrowser: async (request) => {
      const token = readCookie(request, knownName)
      return token === null ? null : await knownTokens.read(token, deps.clock())
    },
    startSession: async (response, { id, secret, personId }) => {
      const now = deps.clock()
      response.cookie(sessionName, await sessionTokens.sign({ id, secret }, now), { ...options, maxAge: absoluteLimitSeconds * 1000 })
      response.cookie(knownName, await knownTokens.sign({ browser: deps.newId(), person: personId }, now), { ...options, maxAge: knownBrowserSeconds * 1000 })
    },
    endSession: (response) => {
      response.clearCookie(sessionName, options)
    },
  }
}

function readCookie(request: Request, name: string): string | null {
  const value: unknown = (request.cookies as Record<string, unknown>)[name]
  return typeof value === 'string' && value.length < 4096 ? value : null
}
