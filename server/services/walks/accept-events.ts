import { inArray } from 'drizzle-orm'
import type { BatchResult } from '#shared/api/walks.ts'
import type { EventId, WalkId } from '#shared/lib/ids.ts'
import { hasRole } from '#shared/trade/roles.ts'
import type { WalkEvent } from '#shared/walk/events.ts'
import type { Db } from '#server/db/client.ts'
import { isUniqueViolation, isWorthRetrying } from '#server/db/sql-state.ts'
import { walkEvents, walkSideEvents } from '#server/db/schema/walks.ts'
import { AppError } from '#server/lib/app-error.ts'
import type { Deps } from '#server/lib/deps.ts'
import { hashContent } from '#server/services/content-hash.ts'
import type { CurrentSession } from '#server/services/sessions.ts'
import { judgeBatch, type HashedEvent, type Judged, type KnownEvent } from './judge-batch.ts'
import { needsVetting, readVetoes } from './vetoes.ts'
import { catchUp, nothingYet, recall, remember, toPinned, withPeopleOf, withPinnedBy, type WalkMemory } from './walk-memory.ts'
import { lockWalk, toAddition, writeAdditions, writeAside, writeInCompany } from './write-walk.ts'

const triesAtMost = 4

/** Takes a batch of events of one walk, in order and in one transaction; says of each what became of it. */
export async function acceptEvents(deps: Deps, by: CurrentSession, walkId: WalkId, events: readonly WalkEvent[]): Promise<BatchResult> {
  const strays = events.flatMap((event, order) =>
    event.walkId === walkId ? [] : [{ pointer: `#/events/${order}/walkId`, detail: 'This event belongs to another walk.' }],
  )
  if (strays.length > 0)
    throw new AppError('wrong-walk', 'The batch holds events of another walk. Nothing was stored; send each walk its own.', { errors: strays })
  const hashed = events.map((event): HashedEvent => ({ event, bodyHash: hashContent({ ...event, seq: undefined }) }))
  return (await tryAppend(deps, by, walkId, hashed)) ?? (await appendJudged(deps, by, walkId, hashed))
}

/** Starts a walk: the same as appending event 1. A walk of somebody else under this id stays hidden but for the fact that the id is taken. */
export async function startWalk(deps: Deps, by: CurrentSession, walkId: WalkId, event: WalkEvent): Promise<BatchResult> {
  if (event.walkId !== walkId)
    throw new AppError('wrong-walk', 'The event names another walk.', { errors: [{ pointer: '#/event/walkId', detail: 'This has to be the id of the walk.' }] })
  try {
    return await acceptEvents(deps, by, walkId, [event])
  } catch (error) {
    const isTaken = error instanceof AppError && error.code === 'not-found' && event.type === 'started'
    throw isTaken ? new AppError('walk-exists', 'There is a walk by this id already. Start again: a new one gets its own.') : error
  }
}

function maySee(by: CurrentSession, { people }: WalkMemory): boolean {
  return hasRole(by.person.role, 'lead') || people.has(by.person.id)
}

/**
 * The usual case: judged on what is remembered, or on nothing where a walk begins, and written only if the log is still where it was
 * judged. Null when it has to be looked at more closely.
 */
async function tryAppend(deps: Deps, by: CurrentSession, walkId: WalkId, hashed: readonly HashedEvent[]): Promise<BatchResult | null> {
  const events = hashed.map(({ event }) => event)
  const memory = recall(deps, walkId) ?? (events[0]?.type === 'started' ? nothingYet : null)
  if (memory === null || (memory.lastSeq > 0 && !maySee(by, memory))) return null
  const versions = await withPinnedBy(deps, deps.db, memory.versions, events)
  if (needsVetting(versions, events)) return null
  const judged = judgeBatch(
    { charts: toPinned(versions), state: memory.state, lastSeq: memory.lastSeq, actor: by.person, known: new Map(), vetoOf: () => null },
    hashed,
  )
  if (judged.appended.length !== hashed.length) return null
  const after = remembering(memory, versions, judged)
  if (!(await writeInCompany(deps.db, toAddition(deps, walkId, memory, after, judged)))) return null
  remember(deps, walkId, after)
  return { results: [...judged.results], lastSeq: judged.lastSeq }
}

function remembering(memory: WalkMemory, versions: WalkMemory['versions'], { appended, state, lastSeq }: Judged): WalkMemory {
  return {
    lastSeq,
    state,
    versions,
    people: withPeopleOf(
      memory.people,
      appended.map(({ event }) => event),
    ),
  }
}

/** Every case, with the walk's row locked; tried again when another batch with the same ids came between. */
async function appendJudged(deps: Deps, by: CurrentSession, walkId: WalkId, hashed: readonly HashedEvent[]): Promise<BatchResult> {
  for (let tries = 1; ; tries++) {
    try {
      const { judged, memory } = await deps.db.transaction((tx) => judgeAndStore(deps, tx, by, walkId, hashed))
      remember(deps, walkId, memory)
      return { results: [...judged.results], lastSeq: judged.lastSeq }
    } catch (error) {
      if (tries >= triesAtMost || !(error instanceof BegunMeanwhile || isUniqueViolation(error) || isWorthRetrying(error))) throw error
    }
  }
}

async function judgeAndStore(
  deps: Deps,
  tx: Db,
  by: CurrentSession,
  walkId: WalkId,
  hashed: readonly HashedEvent[],
): Promise<{ judged: Judged; memory: WalkMemory }> {
  const lastSeq = await lockWalk(tx, walkId)
  const memory = lastSeq === null ? nothingYet : await catchUp(deps, tx, walkId, lastSeq)
  const first = hashed[0]?.event
  const mayBegin = lastSeq === null && (first?.type === 'started' || first?.seq === 1)
  if (!mayBegin && (lastSeq === null || !maySee(by, memory))) throw new AppError('not-found', 'There is no such walk, or it is not yours to see.')

  const events = hashed.map(({ event }) => event)
  const versions = await withPinnedBy(deps, tx, memory.versions, events)
  const judged = judgeBatch(
    {
      charts: toPinned(versions),
      state: memory.state,
      lastSeq: memory.lastSeq,
      actor: by.person,
      known: await readKnown(
        tx,
        events.map(({ id }) => id),
      ),
      vetoOf: await readVetoes(tx, versions, events),
    },
    hashed,
  )
  const after = remembering(memory, versions, judged)
  if (judged.appended.length > 0) {
    const written = await writeAdditions(tx, [toAddition(deps, walkId, memory, after, judged)])
    // The row is locked, so only a walk that somebody else began since can be in the way.
    if (!written.has(walkId)) throw new BegunMeanwhile()
  }
  await writeAside(deps, tx, walkId, judged.aside)
  return { judged, memory: after }
}

/** Two batches began the same walk at the same moment, and the other one was first. */
class BegunMeanwhile extends Error {}

/** What is known of some ids, in this walk or any other. */
async function readKnown(tx: Db, ids: readonly EventId[]): Promise<ReadonlyMap<EventId, KnownEvent>> {
  const logged = await tx
    .select({ id: walkEvents.id, bodyHash: walkEvents.bodyHash })
    .from(walkEvents)
    .where(inArray(walkEvents.id, [...ids]))
  const aside = await tx
    .select({ id: walkSideEvents.id, bodyHash: walkSideEvents.bodyHash, status: walkSideEvents.status, code: walkSideEvents.code })
    .from(walkSideEvents)
    .where(inArray(walkSideEvents.id, [...ids]))
  return new Map<EventId, KnownEvent>([
    ...aside.map(({ id, bodyHash, status, code }) => [id, { bodyHash, aside: { status, code } }] as const),
    ...logged.map(({ id, bodyHash }) => [id, { bodyHash, aside: null }] as const),
  ])
}
