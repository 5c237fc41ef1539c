import { eq, sql } from 'drizzle-orm'
import { people } from '#server/db/schema/people.ts'
import type { Db } from '#server/db/client.ts'
import { AppError } from '#server/lib/app-error.ts'
import type { Deps } from '#server/lib/deps.ts'
import { writeAudit } from './audit.ts'
import { isDemoEmail } from './demo-sign-ins.ts'
import { dummyHash, needsNewHash } from './password-hash.ts'
import { passwordMaxBytes } from './password-rules.ts'
import { endSession, startSession, type StartedSession } from './sessions.ts'
import { isDemoShop } from './shop.ts'
import { forgetTries, giveTryBack, takeTry, type Limit } from './throttle.ts'

interface SignInAttempt {
  readonly email: string
  readonly password: string
  readonly address: string
  readonly browser: string
  /** An account that has signed in from this very browser before, as its own cookie says. */
  readonly knownBrowser: { readonly browser: string; readonly person: string } | null
  /** The session that the browser still carries; it ends when the new one begins. */
  readonly oldSessionId: string | null
}

const windowSeconds = 15 * 60
const isLoopback = (address: string) => address === '::1' || /^(::ffff:)?127\./.test(address)

/**
 * What a try counts against. Strangers to an account share its allowance, so that it can't be guessed at from many addresses; one
 * address has its own smaller share of that, so that it alone can't use the account's up; and all accounts together have one for
 * each address. A browser that this account has signed in from has an allowance of its own: whatever strangers do, the person gets
 * in from there. The loopback address may stand for a whole shop behind a proxy, so it has a wider share.
 */
function limitsOf({ email, address, knownBrowser }: SignInAttempt, isKnown: boolean): readonly Limit[] {
  const account = email.toLowerCase()
  if (isKnown && knownBrowser) return [{ kind: 'browser', of: `${knownBrowser.browser} ${account}`, tries: 10, windowSeconds }]
  return [
    { kind: 'account-address', of: `${account} ${address}`, tries: 10, windowSeconds },
    { kind: 'address', of: address, tries: isLoopback(address) ? 100 : 50, windowSeconds },
    { kind: 'account', of: account, tries: 50, windowSeconds },
  ]
}

const findByEmail = (db: Db, email: string) =>
  db
    .select()
    .from(people)
    .where(eq(sql`lower(${people.email})`, sql`lower(${email})`))
    .limit(1)

/** Signs in. Every refusal reads alike and takes as long, whether or not the address is known, active, or has a password. */
export async function signIn(deps: Deps, attempt: SignInAttempt): Promise<StartedSession> {
  const [person] = await findByEmail(deps.db, attempt.email)
  const limits = limitsOf(attempt, person !== undefined && person.id === attempt.knownBrowser?.person)
  for (const limit of limits) await takeTry(deps, limit)

  const isReadable = Buffer.byteLength(attempt.password) <= passwordMaxBytes
  const isRight = await deps.passwords.verify(attempt.password, person?.passwordHash ?? dummyHash)
  if (person === undefined || person.passwordHash === null || !person.isActive || !isReadable || !isRight) {
    await writeAudit(deps.db, deps, { act: 'sign-in-refused', personId: null, subject: person?.id ?? 'unknown' })
    throw new AppError('wrong-sign-in', 'E-mail or password is wrong. Check both; your owner can give you a new link.')
  }
  if (deps.config.isProduction && isDemoEmail(person.email) && (await isDemoShop(deps.db))) {
    throw new AppError('demo-only', 'This is a sign-in of the demo shop, which everybody knows: it is not taken here.')
  }

  for (const limit of limits) await (limit.kind === 'address' ? giveTryBack(deps.db, limit) : forgetTries(deps.db, limit))
  if (attempt.oldSessionId !== null) await endSession(deps, attempt.oldSessionId)
  const newHash = needsNewHash(person.passwordHash) ? await deps.passwords.hash(attempt.password) : null
  return deps.db.transaction(async (tx) => {
    if (newHash !== null) await tx.update(people).set({ passwordHash: newHash }).where(eq(people.id, person.id))
    await writeAudit(tx, deps, { act: 'signed-in', personId: person.id, subject: person.id })
    return startSession(tx, deps, { personId: person.id, browser: attempt.browser })
  })
}
