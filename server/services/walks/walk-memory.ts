import { and, asc, eq, gt } from 'drizzle-orm'
import type { PersonId, WalkId } from '#shared/lib/ids.ts'
import type { WalkEvent } from '#shared/walk/events.ts'
import { evolve } from '#shared/walk/evolve.ts'
import type { PinnedCharts } from '#shared/walk/pinned-charts.ts'
import { newWalk, type WalkState } from '#shared/walk/state.ts'
import type { ChartIndex } from '#shared/chart/graph.ts'
import type { Db } from '#server/db/client.ts'
import { walkEvents } from '#server/db/schema/walks.ts'
import type { Deps } from '#server/lib/deps.ts'
import { readVersions, type StoredVersion, type VersionName } from '#server/services/chart-versions.ts'
import { Lru } from '#server/services/lru.ts'

/** What a log came to when it had so many events. The log in the database is the truth; this spares reading it again. */
export interface WalkMemory {
  readonly lastSeq: number
  readonly state: WalkState
  readonly versions: ReadonlyMap<string, StoredVersion>
  /** Whose walk it is: who started it, whom it was handed to, who took it over. */
  readonly people: ReadonlySet<PersonId>
}

export const nothingYet: WalkMemory = { lastSeq: 0, state: newWalk, versions: new Map(), people: new Set() }

const walksKept = 500
const memories = new WeakMap<Db, Lru<WalkId, WalkMemory>>()

function memoryOf(deps: Deps): Lru<WalkId, WalkMemory> {
  const known = memories.get(deps.db) ?? new Lru<WalkId, WalkMemory>(walksKept)
  memories.set(deps.db, known)
  return known
}

/** What is remembered of a walk; it may be behind the log. */
export function recall(deps: Deps, walkId: WalkId): WalkMemory | null {
  return memoryOf(deps).get(walkId) ?? null
}

/** Remembers what a log came to, once it is stored; never goes back. */
export function remember(deps: Deps, walkId: WalkId, memory: WalkMemory): void {
  const known = memoryOf(deps).get(walkId)
  if (known === undefined || known.lastSeq < memory.lastSeq) memoryOf(deps).set(walkId, memory)
}

/** The memory of a walk up to event `lastSeq`; what is missing is read from the log. */
export async function catchUp(deps: Deps, db: Db, walkId: WalkId, lastSeq: number): Promise<WalkMemory> {
  const known = recall(deps, walkId)
  const start = known !== null && known.lastSeq <= lastSeq ? known : nothingYet
  if (start.lastSeq === lastSeq) return start
  const rows = await db
    .select({ event: walkEvents.event })
    .from(walkEvents)
    .where(and(eq(walkEvents.walkId, walkId), gt(walkEvents.seq, start.lastSeq)))
    .orderBy(asc(walkEvents.seq))
  const events = rows.map(({ event }) => event)
  const versions = await withPinnedBy(deps, db, start.versions, events)
  const charts = toPinned(versions)
  const state = events.reduce((here, event) => evolve(charts, here, event), start.state)
  return { lastSeq, state, versions, people: withPeopleOf(start.people, events) }
}

/** The charts of some versions, as guard and replay look them up. */
export function toPinned(versions: ReadonlyMap<string, StoredVersion>): PinnedCharts {
  return { holdsAll: true, find: (chartId, version): ChartIndex | null => versions.get(`${chartId}@${version}`)?.index ?? null }
}

/** The versions with those that some events pin. */
export async function withPinnedBy(deps: Deps, db: Db, versions: WalkMemory['versions'], events: readonly WalkEvent[]): Promise<WalkMemory['versions']> {
  const named = events.flatMap(pinsOf).filter(({ chartId, version }) => !versions.has(`${chartId}@${version}`))
  if (named.length === 0) return versions
  const read = await readVersions(deps, named, db)
  return new Map([...versions, ...read.map((version) => [`${version.chartId}@${version.version}`, version] as const)])
}

function pinsOf(event: WalkEvent): VersionName[] {
  if (event.type !== 'started' && event.type !== 'jumped') return []
  const pins = (Object.entries(event.payload.pins) as [VersionName['chartId'], number][]).map(([chartId, version]) => ({ chartId, version }))
  return event.type === 'jumped' ? [...pins, { chartId: event.payload.chartId, version: event.payload.version }] : pins
}

/** Whom a walk belongs to after some more events. */
export function withPeopleOf(people: ReadonlySet<PersonId>, events: readonly WalkEvent[]): ReadonlySet<PersonId> {
  const added = events.flatMap((event) => {
    if (event.type === 'started' || event.type === 'taken-over') return [event.personId]
    return event.type === 'handed-over' ? [event.payload.to] : []
  })
  return added.every((id) => people.has(id)) ? people : new Set([...people, ...added])
}
