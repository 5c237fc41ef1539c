import { createHash } from 'node:crypto'
import { and, eq, gt, lt, sql } from 'drizzle-orm'
import type { Db } from '#server/db/client.ts'
import { signInThrottles } from '#server/db/schema/sign-in-throttles.ts'
import { AppError } from '#server/lib/app-error.ts'
import type { Deps } from '#server/lib/deps.ts'

/** So many tries in a window of time; the window ends on its own, so nobody is ever locked out for good. */
export interface Limit {
  readonly kind: string
  readonly of: string
  readonly tries: number
  readonly windowSeconds: number
}

/** Whom a limit counts is kept as a hash: the table is no list of addresses. */
function toKey({ kind, of }: Limit): string {
  return `${kind}:${createHash('sha256').update(of).digest('base64url')}`
}

/**
 * Counts a try before it is made, in one statement, so that tries sent at once are counted one by one. Refused beyond the limit;
 * a refused try does not make the window longer.
 */
export async function takeTry(deps: Deps, limit: Limit): Promise<void> {
  const now = deps.clock()
  const endsAt = new Date(now.getTime() + limit.windowSeconds * 1000)
  const isOver = sql`${signInThrottles.endsAt} <= ${now.toISOString()}::timestamptz`
  const [row] = await deps.db
    .insert(signInThrottles)
    .values({ key: toKey(limit), tries: 1, endsAt })
    .onConflictDoUpdate({
      target: signInThrottles.key,
      set: {
        tries: sql`case when ${isOver} then 1 else least(${signInThrottles.tries} + 1, 1000000) end`,
        endsAt: sql`case when ${isOver} then ${endsAt.toISOString()}::timestamptz else ${signInThrottles.endsAt} end`,
      },
    })
    .returning({ tries: signInThrottles.tries, endsAt: signInThrottles.endsAt })
  if (row === undefined || row.tries <= limit.tries) return
  const retryAfterSeconds = Math.max(1, Math.ceil((row.endsAt.getTime() - now.getTime()) / 1000))
  deps.log.warn({ event: 'throttled', limit: limit.kind }, 'too many tries')
  throw new AppError('too-many-tries', `That was tried too often. Wait ${toWait(retryAfterSeconds)}, then try again. Until then the right one is not taken either.`, {
    retryAfterSeconds,
  })
}

/** Takes back a try that turned out right. */
export async function giveTryBack(db: Db, limit: Limit): Promise<void> {
  await db
    .update(signInThrottles)
    .set({ tries: sql`${signInThrottles.tries} - 1` })
    .where(and(eq(signInThrottles.key, toKey(limit)), gt(signInThrottles.tries, 0)))
}

/** Forgets the tries of one limit. */
export async function forgetTries(db: Db, limit: Limit): Promise<void> {
  await db.delete(signInThrottles).where(eq(signInThrottles.key, toKey(limit)))
}

/** Clears windows that are over. */
export async function clearOldTries(deps: Deps): Promise<void> {
  await deps.db.delete(signInThrottles).where(lt(signInThrottles.endsAt, deps.clock()))
}

function toWait(seconds: number): string {
  if (seconds < 60) return `${seconds} s`
  const minutes = Math.ceil(seconds / 60)
  return minutes === 1 ? 'a minute' : `${minutes} minutes`
}
