import { sql } from 'drizzle-orm'
import type { WalkId } from '#shared/lib/ids.ts'
import type { WalkEventType } from '#shared/walk/events.ts'
import { isUniqueViolation } from '#server/db/sql-state.ts'
import { walkEvents, walks, walkSideEvents } from '#server/db/schema/walks.ts'
import type { Deps } from '#server/lib/deps.ts'
import type { Judged } from './judge-batch.ts'
import { toPinned, type WalkMemory } from './walk-memory.ts'
import { toStanding } from './walk-row.ts'

/** Types of event that change more than the log and the row. */
const farReaching: ReadonlySet<WalkEventType> = new Set<WalkEventType>(['started', 'machine-identified', 'jumped', 'handed-over', 'taken-over'])

/**
 * Moves the row of a walk on and appends its events in one statement, which is a transaction of its own. It takes effect only while
 * the log still ends where it was judged, and none of the ids was set aside before; else it does nothing, and says so.
 */
export async function appendInOneStatement(deps: Deps, walkId: WalkId, memory: WalkMemory, { appended, state }: Judged): Promise<boolean> {
  if (state.phase === 'new' || appended.some(({ event }) => farReaching.has(event.type))) return false
  const { machine: _, ...row } = toStanding(toPinned(memory.versions), state)
  const receivedAt = deps.clock().toISOString()
  const ids = sql.join(appended.map(({ event }) => sql`${event.id}::uuid`), sql`, `)
  const values = sql.join(
    appended.map(
      ({ event, bodyHash }) =>
        sql`(${event.id}::uuid, ${event.seq}::int, ${event.type}::text, ${event.personId}::uuid, ${event.deviceId}::uuid, ${JSON.stringify(event)}::jsonb, ${bodyHash}::text)`,
    ),
    sql`, `,
  )
  try {
    const { rowCount } = await deps.db.execute(sql`
      with moved as (
        update ${walks} set
          phase = ${row.phase}, is_paused = ${row.isPaused}, is_open = ${row.isOpen}, stands_at = ${row.standsAt}, minutes_used = ${row.minutesUsed}::float8,
          cause_id = ${row.causeId ?? null}, cause_title = ${row.causeTitle ?? null}, has_question = ${row.hasQuestion},
          holder_person_id = ${row.holderPersonId}::uuid, holder_device_id = ${row.holderDeviceId}::uuid,
          last_event_at = ${receivedAt}::timestamptz, last_seq = ${row.lastSeq}::int
        where ${walks.id} = ${walkId}::uuid and ${walks.lastSeq} = ${memory.lastSeq}::int
          and not exists (select 1 from ${walkSideEvents} where ${walkSideEvents.id} in (${ids}))
        returning ${walks.id}
      )
      insert into ${walkEvents} (id, walk_id, seq, type, person_id, device_id, event, body_hash, received_at)
      select added.id, moved.id, added.seq, added.type, added.person_id, added.device_id, added.event, added.body_hash, ${receivedAt}::timestamptz
      from moved, (values ${values}) as added (id, seq, type, person_id, device_id, event, body_hash)`)
    return rowCount === appended.length
  } catch (error) {
    // An id that some log holds already: the slow way tells a duplicate from a conflict.
    if (isUniqueViolation(error)) return false
    throw error
  }
}
