import { createHmac } from 'node:crypto'
import { errors, jwtVerify, SignJWT } from 'jose'
import { z } from 'zod'

/** What a signed token may stand for. Each purpose has a key of its own, so that one never stands in for another. */
export type TokenPurpose = 'session' | 'known-browser'

const algorithm = 'HS256'
const issuer = 'pullcord'
const maxRemembered = 2_000

/** Signs and reads the tokens of one purpose. The algorithm is fixed and the key is ours; what a token says about either is not asked. */
export interface TokenKind<Claims> {
  sign(claims: Claims, issuedAt: Date): Promise<string>
  /** The claims, or null for anything that we did not sign for this purpose, or that has ended. */
  read(token: string, now: Date): Promise<Claims | null>
}

export function createTokenKind<Claims extends Record<string, string>>(
  secret: string,
  purpose: TokenPurpose,
  schema: z.ZodType<Claims>,
  lifetimeSeconds: number,
): TokenKind<Claims> {
  const key = new Uint8Array(createHmac('sha256', secret).update(`pullcord ${purpose}`).digest())
  const payloadSchema = z.object({ purpose: z.literal(purpose), exp: z.number(), data: schema })
  // Checking a signature twice gives the same answer twice; only the end has to be looked at each time.
  const remembered = new Map<string, { claims: Claims; endsAtMs: number }>()

  async function verify(token: string, now: Date): Promise<{ claims: Claims; endsAtMs: number } | null> {
    try {
      const { payload } = await jwtVerify(token, key, { algorithms: [algorithm], issuer, audience: purpose, currentDate: now, typ: 'JWT' })
      const parsed = payloadSchema.safeParse(payload)
      return parsed.success ? { claims: parsed.data.data, endsAtMs: parsed.data.exp * 1000 } : null
    } catch (error) {
      if (error instanceof errors.JOSEError) return null
      throw error
    }
  }

  return {
    sign: (claims, issuedAt) => {
      const issued = Math.floor(issuedAt.getTime() / 1000)
      return new SignJWT({ purpose, data: claims })
        .setProtectedHeader({ alg: algorithm, typ: 'JWT' })
        .setIssuer(issuer)
        .setAudience(purpose)
        .setIssuedAt(issued)
        .setNotBefore(issued)
        .setExpirationTime(issued + lifetimeSeconds)
        .sign(key)
    },
    read: async (token, now) => {
      const known = remembered.get(token)
      if (known) return known.endsAtMs > now.getTime() ? known.claims : null
      const verified = await verify(token, now)
      if (verified === null) return null
      if (remembered.size >= maxRemembered) remembered.clear()
      remembered.set(token, verified)
      return verified.claims
    },
  }
}
