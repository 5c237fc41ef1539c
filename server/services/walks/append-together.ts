import { sql } from 'drizzle-orm'
import type { WalkId } from '#shared/lib/ids.ts'
import type { WalkEventType } from '#shared/walk/events.ts'
import type { Db } from '#server/db/client.ts'
import { isUniqueViolation, isWorthRetrying } from '#server/db/sql-state.ts'
import { walkEvents, walks, walkSideEvents } from '#server/db/schema/walks.ts'
import type { Deps } from '#server/lib/deps.ts'
import { createBatcher } from '#server/services/batcher.ts'
import type { Judged } from './judge-batch.ts'
import { toPinned, type WalkMemory } from './walk-memory.ts'
import { toStanding } from './walk-row.ts'

/** Types of event that change more than the log and the row. */
const farReaching: ReadonlySet<WalkEventType> = new Set<WalkEventType>(['started', 'machine-identified', 'jumped', 'handed-over', 'taken-over'])

/** What one batch of events adds to one walk, as JSON for the statement; the names are those of the columns. */
interface Addition {
  readonly walk_id: WalkId
  readonly judged_at: number
  readonly [column: string]: unknown
}

const batchers = new WeakMap<Db, (addition: Addition) => Promise<boolean>>()

/**
 * Moves the row of a walk on and appends its events. This takes effect, all of it, only while the log still ends where the events
 * were judged and none of their ids was set aside before; else nothing happens, and the answer is false. Batches of several walks
 * that wait at the same moment go in one statement.
 */
export async function appendTogether(deps: Deps, walkId: WalkId, memory: WalkMemory, { appended, state }: Judged): Promise<boolean> {
  if (state.phase === 'new' || appended.some(({ event }) => farReaching.has(event.type))) return false
  const append = batchers.get(deps.db) ?? createBatcher((additions: readonly Addition[]) => appendAll(deps.db, additions))
  batchers.set(deps.db, append)
  const standing = toStanding(toPinned(memory.versions), state)
  const received_at = deps.clock().toISOString()
  return append({
    walk_id: walkId,
    judged_at: memory.lastSeq,
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
    received_at,
    events: appended.map(({ event, bodyHash }) => ({ event, body_hash: bodyHash })),
  })
}

/** Of each addition, whether it took effect. In the order of the walks, so that two of these can't wait for each other. */
async function appendAll(db: Db, additions: readonly Addition[]): Promise<readonly boolean[]> {
  // A second batch of the same walk was judged on what the first has changed by now.
  const firsts = [...new Map(additions.toReversed().map((addition) => [addition.walk_id, addition])).values()].sort((one, other) =>
    one.walk_id < other.walk_id ? -1 : 1,
  )
  try {
    const { rows } = await db.execute<{ walk_id: WalkId }>(sql`
      with addition as (
        select * from jsonb_to_recordset(${JSON.stringify(firsts)}::jsonb) as a (
          walk_id uuid, judged_at int, phase text, is_paused boolean, is_open boolean, stands_at text, minutes_used float8, cause_id text, cause_title text,
          has_question boolean, holder_person_id uuid, holder_device_id uuid, last_seq int, received_at timestamptz, events jsonb)
      ), moved as (
        update ${walks} set
          phase = a.phase, is_paused = a.is_paused, is_open = a.is_open, stands_at = a.stands_at, minutes_used = a.minutes_used, cause_id = a.cause_id,
          cause_title = a.cause_title, has_question = a.has_question, holder_person_id = a.holder_person_id, holder_device_id = a.holder_device_id,
          last_event_at = a.received_at, last_seq = a.last_seq
        from addition a
        where ${walks.id} = a.walk_id and ${walks.lastSeq} = a.judged_at
          and not exists (select 1 from ${walkSideEvents} aside where aside.id in (select (e -> 'event' ->> 'id')::uuid from jsonb_array_elements(a.events) e))
        returning a.walk_id, a.events, a.received_at
      )
      insert into ${walkEvents} (id, walk_id, seq, type, person_id, device_id, event, body_hash, received_at)
      select (e -> 'event' ->> 'id')::uuid, moved.walk_id, (e -> 'event' ->> 'seq')::int, e -> 'event' ->> 'type', (e -> 'event' ->> 'personId')::uuid,
        (e -> 'event' ->> 'deviceId')::uuid, e -> 'event', e ->> 'body_hash', moved.received_at
      from moved, jsonb_array_elements(moved.events) e
      returning walk_id`)
    const moved = new Set(rows.map(({ walk_id }) => walk_id))
    return additions.map((addition) => firsts.includes(addition) && moved.has(addition.walk_id))
  } catch (error) {
    // An id that some log holds already, or another process in the way: one by one then, where a duplicate is told from a conflict.
    if (isUniqueViolation(error) || isWorthRetrying(error)) return additions.map(() => false)
    throw error
  }
}
