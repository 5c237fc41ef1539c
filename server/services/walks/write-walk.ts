import { eq, sql } from 'drizzle-orm'
import { splitPlace, type PersonId, type WalkId } from '#shared/lib/ids.ts'
import type { Db } from '#server/db/client.ts'
import { isUniqueViolation, isWorthRetrying } from '#server/db/sql-state.ts'
import { walks, walkSideEvents } from '#server/db/schema/walks.ts'
import type { Deps } from '#server/lib/deps.ts'
import { createBatcher } from '#server/services/batcher.ts'
import type { AsideEvent, Judged } from './judge-batch.ts'
import { toPinned, type WalkMemory } from './walk-memory.ts'
import { machineWords, toStanding } from './walk-row.ts'

/** What a batch of events adds to a walk, with the names that `append_walk_events` of the database knows. */
export interface Addition {
  readonly walk_id: WalkId
  /** The number of the last event of the log on which the batch was judged; 0 where the walk begins. */
  readonly judged_at: number
  readonly [column: string]: unknown
}

/** Puts together what is to be written; `memory` is what the log came to before, with the versions that the batch pins. */
export function toAddition(deps: Deps, walkId: WalkId, before: WalkMemory, after: WalkMemory, { appended }: Judged): Addition {
  const { state } = after
  if (state.phase === 'new') throw new Error('A log that holds an event has begun.')
  const charts = toPinned(after.versions)
  const standing = toStanding(charts, state)
  const { chartId } = splitPlace(state.start)
  const version = state.pins[chartId] ?? 1
  const newPeople = [...after.people].filter((personId) => !before.people.has(personId))
  const isNamed = appended.some(({ event }) => event.type === 'started' || event.type === 'machine-identified')
  return {
    walk_id: walkId,
    judged_at: before.lastSeq,
    kind: state.kind,
    chart_id: chartId,
    chart_title: charts.find(chartId, version)?.chart.title ?? chartId,
    version,
    started_by: state.startedBy,
    ...(isNamed ? { machine: state.machine, machine_words: machineWords(state.machine) } : {}),
    phase: standing.phase,
    is_paused: standing.isPaused,
    is_open: standing.isOpen,
    stands_at: standing.standsAt,
    minutes_used: standing.minutesUsed,
    cause_id: standing.causeId,
    cause_title: standing.causeTitle,
    has_question: standing.hasQuestion,
    holder_person_id: standing.holderPersonId,
    holder_device_id: standing.holderDeviceId,
    last_seq: standing.lastSeq,
    received_at: deps.clock().toISOString(),
    ...(newPeople.length > 0 ? { new_people: newPeople satisfies PersonId[] } : {}),
    events: appended.map(({ event, bodyHash }) => ({ event, body_hash: bodyHash })),
  }
}

/** Writes additions to different walks; gives those that took effect. */
export async function writeAdditions(db: Db, additions: readonly Addition[]): Promise<ReadonlySet<WalkId>> {
  const { rows } = await db.execute<{ walk_id: WalkId }>(sql`select append_walk_events(${JSON.stringify(additions)}::jsonb) as walk_id`)
  return new Set(rows.map(({ walk_id }) => walk_id))
}

const batchers = new WeakMap<Db, (addition: Addition) => Promise<boolean>>()

/** Writes an addition together with those that wait at the same moment; false when it did not take effect. */
export function writeInCompany(db: Db, addition: Addition): Promise<boolean> {
  const write = batchers.get(db) ?? createBatcher((additions: readonly Addition[]) => writeAll(db, additions))
  batchers.set(db, write)
  return write(addition)
}

async function writeAll(db: Db, additions: readonly Addition[]): Promise<readonly boolean[]> {
  // A second addition to one walk was judged on what the first has changed by now.
  const firsts = [...new Map(additions.toReversed().map((addition) => [addition.walk_id, addition])).values()]
  try {
    const written = await writeAdditions(
      db,
      firsts.sort((one, other) => (one.walk_id < other.walk_id ? -1 : 1)),
    )
    return additions.map((addition) => firsts.includes(addition) && written.has(addition.walk_id))
  } catch (error) {
    // An id that some log holds already, or another process in the way: one by one then, where a duplicate is told from a conflict.
    if (isUniqueViolation(error) || isWorthRetrying(error)) return additions.map(() => false)
    throw error
  }
}

/** Locks the row of a walk until the transaction ends; the number of its last event, or null when there is no such walk. */
export async function lockWalk(tx: Db, walkId: WalkId): Promise<number | null> {
  const [row] = await tx.select({ lastSeq: walks.lastSeq }).from(walks).where(eq(walks.id, walkId)).for('update')
  return row?.lastSeq ?? null
}

/** Keeps what did not make it into the log, for the person who tapped it. */
export async function writeAside(deps: Deps, tx: Db, walkId: WalkId, aside: readonly AsideEvent[]): Promise<void> {
  if (aside.length === 0) return
  const receivedAt = deps.clock()
  await tx.insert(walkSideEvents).values(
    aside.map(({ event, bodyHash, status, code }) => ({
      id: event.id,
      walkId,
      personId: event.personId,
      deviceId: event.deviceId,
      event,
      bodyHash,
      status,
      code,
      receivedAt,
    })),
  )
}
