import { and, eq, inArray } from 'drizzle-orm'
import { chartsNamedBy } from '#shared/chart/chart-set.ts'
import type { ChartId } from '#shared/lib/ids.ts'
import type { EventOf, WalkEvent } from '#shared/walk/events.ts'
import type { Db } from '#server/db/client.ts'
import { chartVersions } from '#server/db/schema/charts.ts'
import { people } from '#server/db/schema/people.ts'
import type { Deps } from '#server/lib/deps.ts'
import type { Veto } from './judge-batch.ts'
import type { WalkMemory } from './walk-memory.ts'

/** What only the database can say against an event that the rules of the walk would take: read ahead for a whole batch. */
export async function readVetoes(
  _deps: Deps,
  tx: Db,
  versions: WalkMemory['versions'],
  events: readonly WalkEvent[],
): Promise<(event: WalkEvent) => Veto | null> {
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
async function leavesOut(tx: Db, versions: WalkMemory['versions'], { at, payload }: EventOf<'started'>): Promise<boolean> {
  const pinned = (chartId: ChartId) => (Object.hasOwn(payload.pins, chartId) ? versions.get(`${chartId}@${String(payload.pins[chartId])}`)?.index : undefined)
  const reach = new Set([payload.chartId])
  for (const chartId of reach) {
    const index = pinned(chartId)
    if (index !== undefined) for (const named of chartsNamedBy(index)) reach.add(named)
  }
  const missing = [...reach].filter((chartId) => !Object.hasOwn(payload.pins, chartId))
  if (missing.length === 0) return false
  const firsts = await tx
    .select({ publishedAt: chartVersions.publishedAt })
    .from(chartVersions)
    .where(and(inArray(chartVersions.chartId, missing), eq(chartVersions.version, 1)))
  return firsts.some(({ publishedAt }) => publishedAt.getTime() < Date.parse(at))
}
