import { and, asc, desc, eq, inArray, sql } from 'drizzle-orm'
import { alias } from 'drizzle-orm/pg-core'
import type { z } from 'zod'
import type { getWalk, listWalks, sideEventSchema, WalkRow } from '#shared/api/walks.ts'
import type { PersonId, WalkId } from '#shared/lib/ids.ts'
import { hasRole } from '#shared/trade/roles.ts'
import type { WalkEvent } from '#shared/walk/events.ts'
import { people } from '#server/db/schema/people.ts'
import { walkEvents, walkPeople, walks, walkSideEvents } from '#server/db/schema/walks.ts'
import { AppError } from '#server/lib/app-error.ts'
import type { Deps } from '#server/lib/deps.ts'
import { toChartVersions } from '#server/services/chart-versions.ts'
import type { CurrentSession } from '#server/services/sessions.ts'
import { nothingYet, withPinnedBy } from './walk-memory.ts'

const pageSize = 25
const holders = alias(people, 'holders')

function selectWalks(deps: Deps) {
  return deps.db
    .select({ walk: walks, startedByName: people.name, holderName: holders.name })
    .from(walks)
    .innerJoin(people, eq(people.id, walks.startedBy))
    .innerJoin(holders, eq(holders.id, walks.holderPersonId))
    .$dynamic()
}

type Selected = Awaited<ReturnType<typeof selectWalks>>[number]

function toRow({ walk, startedByName, holderName }: Selected): WalkRow {
  const { causeId: _, startedBy, holderPersonId, holderDeviceId, startedAt, lastEventAt, ...shown } = walk
  return {
    ...shown,
    startedBy: { id: startedBy, name: startedByName },
    heldBy: { personId: holderPersonId, name: holderName, deviceId: holderDeviceId },
    startedAt: startedAt.toISOString(),
    lastEventAt: lastEventAt.toISOString(),
  }
}

/** Whether a walk is one's own: started by oneself, handed over to one, or taken over. */
function isOwn(personId: PersonId) {
  return sql`exists (select 1 from ${walkPeople} where ${walkPeople.walkId} = ${walks.id} and ${walkPeople.personId} = ${personId})`
}

/** A page of walks, newest first. */
export async function listWalkRows(
  deps: Deps,
  by: CurrentSession,
  { scope = 'mine', state = 'all', page = 1 }: z.output<typeof listWalks.query>,
): Promise<{ walks: WalkRow[]; page: number; hasMore: boolean }> {
  if (scope === 'shop' && !hasRole(by.person.role, 'lead')) throw new AppError('not-allowed', 'The walks of the whole shop are for the lead or the owner.')
  const rows = await selectWalks(deps)
    .where(and(scope === 'mine' ? isOwn(by.person.id) : undefined, state === 'all' ? undefined : eq(walks.isOpen, state === 'open')))
    .orderBy(desc(walks.startedAt), desc(walks.id))
    .limit(pageSize + 1)
    .offset((page - 1) * pageSize)
  return { walks: rows.slice(0, pageSize).map(toRow), page, hasMore: rows.length > pageSize }
}

async function getVisible(deps: Deps, by: CurrentSession, walkId: WalkId): Promise<Selected | null> {
  const [row] = await selectWalks(deps).where(and(eq(walks.id, walkId), hasRole(by.person.role, 'lead') ? undefined : isOwn(by.person.id)))
  return row ?? null
}

function notFound(): AppError {
  return new AppError('not-found', 'There is no such walk, or it is not yours to see.')
}

/** A walk with its log and all that replay needs. */
export async function getWalkLog(deps: Deps, by: CurrentSession, walkId: WalkId): Promise<z.input<typeof getWalk.response>> {
  const row = await getVisible(deps, by, walkId)
  if (row === null) throw notFound()
  const stored = await deps.db.select({ event: walkEvents.event }).from(walkEvents).where(eq(walkEvents.walkId, walkId)).orderBy(asc(walkEvents.seq))
  const events = stored.map(({ event }) => event)
  const versions = await withPinnedBy(deps, deps.db, nothingYet.versions, events)
  return {
    walk: toRow(row),
    events,
    charts: await toChartVersions(deps.db, [...versions.values()]),
    people: await readNames(deps, events.flatMap(peopleIn)),
    lastSeq: events.length,
  }
}

function peopleIn(event: WalkEvent): PersonId[] {
  if (event.type === 'handed-over') return [event.personId, event.payload.to]
  return event.type === 'taken-over' ? [event.personId, event.payload.from] : [event.personId]
}

async function readNames(deps: Deps, ids: readonly PersonId[]): Promise<Record<PersonId, string>> {
  const rows = await deps.db
    .select({ id: people.id, name: people.name })
    .from(people)
    .where(inArray(people.id, [...new Set(ids)]))
  return Object.fromEntries(rows.map(({ id, name }) => [id, name]))
}

/** Events beside the log of a walk: one's own, and everybody's for a lead. The walk may never have begun. */
export async function listSideEvents(deps: Deps, by: CurrentSession, walkId: WalkId): Promise<z.input<typeof sideEventSchema>[]> {
  const isLead = hasRole(by.person.role, 'lead')
  const rows = await deps.db
    .select()
    .from(walkSideEvents)
    .where(and(eq(walkSideEvents.walkId, walkId), isLead ? undefined : eq(walkSideEvents.personId, by.person.id)))
    .orderBy(asc(walkSideEvents.receivedAt), asc(sql`(${walkSideEvents.event} ->> 'seq')::int`), asc(walkSideEvents.id))
  if (rows.length === 0 && (await getVisible(deps, by, walkId)) === null) throw notFound()
  return rows.map(({ event, status, code, receivedAt }) => ({ event, status, code, receivedAt: receivedAt.toISOString() }))
}
