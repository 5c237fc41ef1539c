import { and, eq, inArray } from 'drizzle-orm'
import { chartsNamedBy } from '#shared/chart/chart-set.ts'
import type { ChartId } from '#shared/lib/ids.ts'
import type { EventOf, WalkEvent } from '#shared/walk/events.ts'
import type { Db } from '#server/db/client.ts'
import { chartVersions } from '#server/db/schema/charts.ts'
import { people } from '#server/db/schema/people.ts'
import type { Veto } from './judge-batch.ts'
import type { WalkMemory } from './walk-memory.ts'

/** Whether only the database can tell if there is something against one of these events. */
export function needsVetting(versions: WalkMemory['versions'], events: readonly WalkEvent[]): boolean {
  return events.some((event) => event.type === 'handed-over' || (event.type === 'started' && listLeftOut(versions, event).length > 0))
}

/** What only the database can say against an event that the rules of the walk would take: read ahead for a whole batch. */
export async function readVetoes(tx: Db, versions: WalkMemory['versions'], events: readonly WalkEvent[]): Promise<(event: WalkEvent) => Veto | null> {
  const receivers = await readActive(
    tx,
    events.flatMap((event) => (event.type === 'handed-over' ? [event.payload.to] : [])),
  )
  const begin = events.find((event) => event.type === 'started')
  const hasHoles = begin === undefined ? false : await leavesOut(tx, versions, begin)
  return (event) => {
    if (event.type === 'handed-over' && !receivers.has(event.payload.to)) return 'no-such-person'
    return event === begin && hasHoles ? 'no-such-version' : null
  }
}

async function readActive(tx: Db, ids: readonly EventOf<'handed-over'>['payload']['to'][]): Promise<ReadonlySet<string>> {
  if (ids.length === 0) return new Set()
  const rows = await tx
    .select({ id: people.id })
    .from(people)
    .where(and(inArray(people.id, [...ids]), eq(people.isActive, true)))
  return new Set(rows.map(({ id }) => id))
}

/**
 * Whether a start leaves out a chart in its reach that was there to be pinned when the device started. One that was published since
 * is no fault of a device that was off the network.
 */
async function leavesOut(tx: Db, versions: WalkMemory['versions'], begin: EventOf<'started'>): Promise<boolean> {
  const missing = listLeftOut(versions, begin)
  if (missing.length === 0) return false
  const firsts = await tx
    .select({ publishedAt: chartVersions.publishedAt })
    .from(chartVersions)
    .where(and(inArray(chartVersions.chartId, missing), eq(chartVersions.version, 1)))
  return firsts.some(({ publishedAt }) => publishedAt.getTime() < Date.parse(begin.at))
}

/** Charts that the pinned ones jump to and that are not pinned. */
function listLeftOut(versions: WalkMemory['versions'], { payload: { chartId: first, pins } }: EventOf<'started'>): ChartId[] {
  const reach = new Set([first])
  for (const chartId of reach) {
    const pinned = Object.hasOwn(pins, chartId) ? versions.get(`${chartId}@${String(pins[chartId])}`) : undefined
    if (pinned !== undefined) for (const named of chartsNamedBy(pinned.index)) reach.add(named)
  }
  return [...reach].filter((chartId) => !Object.hasOwn(pins, chartId))
}
