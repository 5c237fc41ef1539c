import { createHash, timingSafeEqual } from 'node:crypto'
import { and, desc, eq, inArray, lt, ne, or } from 'drizzle-orm'
import type { SignedIn } from '#shared/api/session.ts'
import type { PersonId } from '#shared/lib/ids.ts'
import type { Db } from '#server/db/client.ts'
import { people, sessions } from '#server/db/schema/people.ts'
import { AppError } from '#server/lib/app-error.ts'
import type { Deps } from '#server/lib/deps.ts'
import { createBatcher } from './batcher.ts'

/** A session ends after so long without a request: a working day at a bench, not the quarter of an hour of a desk. */
export const idleLimitSeconds = 12 * 3600
/** A session ends after so long, whatever happens. */
export const absoluteLimitSeconds = 30 * 86_400
/** Last-seen is written at most this often. */
const seenEveryMs = 5 * 60_000

/** The session of a request and its person, both as the database has them now. */
export interface CurrentSession {
  readonly id: string
  readonly person: SignedIn
}

/** A session that has just begun: the only moment at which its secret is known here. */
export interface StartedSession {
  readonly id: string
  readonly secret: string
  readonly personId: PersonId
}

/** The hash under which a random secret is kept. Secrets of 128 bits and more need no slow hash. */
export function hashSecret(secret: string): string {
  return createHash('sha256').update(secret).digest('base64url')
}

/** Begins a session and clears away those of this person that have ended by themselves. */
export async function startSession(tx: Db, deps: Deps, { personId, browser }: { personId: PersonId; browser: string }): Promise<StartedSession> {
  const now = deps.clock()
  const started = { id: deps.newId(), secret: deps.randomToken(32), personId }
  const idleSince = new Date(now.getTime() - idleLimitSeconds * 1000)
  const tooOld = new Date(now.getTime() - absoluteLimitSeconds * 1000)
  await tx.delete(sessions).where(and(eq(sessions.personId, personId), or(lt(sessions.lastSeenAt, idleSince), lt(sessions.startedAt, tooOld))))
  await tx.insert(sessions).values({
    id: started.id,
    personId,
    secretHash: hashSecret(started.secret),
    browser: describeBrowser(browser),
    startedAt: now,
    lastSeenAt: now,
  })
  await tx.update(people).set({ lastSeenAt: now }).where(eq(people.id, personId))
  return started
}

async function readSessions(db: Db, ids: readonly string[]) {
  const rows = await db
    .select({
      id: sessions.id,
      secretHash: sessions.secretHash,
      startedAt: sessions.startedAt,
      lastSeenAt: sessions.lastSeenAt,
      isActive: people.isActive,
      person: { id: people.id, name: people.name, email: people.email, role: people.role },
    })
    .from(sessions)
    .innerJoin(people, eq(people.id, sessions.personId))
    .where(inArray(sessions.id, [...new Set(ids)]))
  const byId = new Map(rows.map((row) => [row.id, row]))
  return ids.map((id) => byId.get(id) ?? null)
}

type SessionRow = NonNullable<Awaited<ReturnType<typeof readSessions>>[number]>

const batchers = new WeakMap<Db, (id: string) => Promise<SessionRow | null>>()

/** Reads a session for this request; requests that wait at the same moment share one statement. */
function loadSession(db: Db, id: string): Promise<SessionRow | null> {
  const load = batchers.get(db) ?? createBatcher((ids: readonly string[]) => readSessions(db, ids))
  batchers.set(db, load)
  return load(id)
}

/** The living session that a cookie names, or null: ended, too old, idle too long, or its person is no longer active. */
export async function findSession(deps: Deps, { id, secret }: { id: string; secret: string }): Promise<CurrentSession | null> {
  const row = await loadSession(deps.db, id)
  if (row === null || !row.isActive || !isSame(row.secretHash, hashSecret(secret))) return null
  const now = deps.clock()
  const idleMs = now.getTime() - row.lastSeenAt.getTime()
  if (idleMs > idleLimitSeconds * 1000 || now.getTime() - row.startedAt.getTime() > absoluteLimitSeconds * 1000) return null
  if (idleMs >= seenEveryMs) await markSeen(deps, row, now)
  return { id: row.id, person: row.person }
}

async function markSeen(deps: Deps, row: SessionRow, now: Date): Promise<void> {
  await deps.db.transaction(async (tx) => {
    const marked = await tx
      .update(sessions)
      .set({ lastSeenAt: now })
      .where(and(eq(sessions.id, row.id), eq(sessions.lastSeenAt, row.lastSeenAt)))
      .returning({ id: sessions.id })
    if (marked.length > 0) await tx.update(people).set({ lastSeenAt: now }).where(eq(people.id, row.person.id))
  })
}

/** Ends one session; ending one that has ended is no error. */
export async function endSession(deps: Deps, sessionId: string): Promise<void> {
  await deps.db.delete(sessions).where(eq(sessions.id, sessionId))
}

/** Ends all sessions of a person, but for the one that asks. */
export async function endSessionsOf(tx: Db, personId: PersonId, exceptId?: string): Promise<void> {
  await tx.delete(sessions).where(and(eq(sessions.personId, personId), exceptId === undefined ? undefined : ne(sessions.id, exceptId)))
}

/** Where this person is signed in, the latest first. */
export async function listOwnSessions(deps: Deps, current: CurrentSession) {
  const now = deps.clock().getTime()
  const rows = await deps.db
    .select({ id: sessions.id, startedAt: sessions.startedAt, lastSeenAt: sessions.lastSeenAt, browser: sessions.browser })
    .from(sessions)
    .where(eq(sessions.personId, current.person.id))
    .orderBy(desc(sessions.lastSeenAt), desc(sessions.id))
  return rows
    .filter((row) => now - row.lastSeenAt.getTime() <= idleLimitSeconds * 1000 && now - row.startedAt.getTime() <= absoluteLimitSeconds * 1000)
    .map((row) => ({
      id: row.id,
      isThisOne: row.id === current.id,
      startedAt: row.startedAt.toISOString(),
      lastSeenAt: row.lastSeenAt.toISOString(),
      browser: row.browser,
    }))
}

/** Ends one of one's own sessions; another person's is not found. */
export async function endOwnSession(deps: Deps, personId: PersonId, sessionId: string): Promise<void> {
  const ended = await deps.db
    .delete(sessions)
    .where(and(eq(sessions.id, sessionId), eq(sessions.personId, personId)))
    .returning({ id: sessions.id })
  if (ended.length === 0) throw new AppError('not-found', 'There is no such sign-in of yours: it may have ended already.')
}

function isSame(one: string, other: string): boolean {
  const [a, b] = [Buffer.from(one), Buffer.from(other)]
  return a.length === b.length && timingSafeEqual(a, b)
}

const browserNames: readonly (readonly [RegExp, string])[] = [
  [/\bEdgA?\//, 'Edge'],
  [/\bFirefox\/|\bFxiOS\//, 'Firefox'],
  [/Chrome\/|\bCriOS\//, 'Chrome'],
  [/\bSafari\//, 'Safari'],
]
const systemNames: readonly (readonly [RegExp, string])[] = [
  [/\bAndroid\b/, 'Android'],
  [/\biPhone\b/, 'iPhone'],
  [/\biPad\b/, 'iPad'],
  [/\bWindows\b/, 'Windows'],
  [/\bMac OS X\b/, 'Mac'],
  [/\bLinux\b/, 'Linux'],
]

/** A browser in words that its person knows it by. */
export function describeBrowser(userAgent: string): string {
  const browser = browserNames.find(([pattern]) => pattern.test(userAgent))?.[1] ?? 'Another program'
  const system = systemNames.find(([pattern]) => pattern.test(userAgent))?.[1]
  return system === undefined ? browser : `${browser} on ${system}`
}
