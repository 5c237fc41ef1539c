import { eq } from 'drizzle-orm'
import type { WalkId } from '#shared/lib/ids.ts'
import type { Machine } from '#shared/walk/events.ts'
import type { PinnedCharts } from '#shared/walk/pinned-charts.ts'
import { splitPlace } from '#shared/lib/ids.ts'
import type { Db } from '#server/db/client.ts'
import { models } from '#server/db/schema/library.ts'
import { walkEvents, walkPeople, walks, walkSideEvents } from '#server/db/schema/walks.ts'
import type { Deps } from '#server/lib/deps.ts'
import type { AsideEvent, Judged } from './judge-batch.ts'
import { withPeopleOf, type WalkMemory } from './walk-memory.ts'
import { machineWords, toStanding } from './walk-row.ts'

/** Locks the row of a walk until the transaction ends; the number of its last event, or null when there is no such walk. */
export async function lockWalk(tx: Db, walkId: WalkId): Promise<number | null> {
  const [row] = await tx.select({ lastSeq: walks.lastSeq }).from(walks).where(eq(walks.id, walkId)).for('update')
  return row?.lastSeq ?? null
}

/** Stores what was appended, and what the walk's row says from now on. */
export async function writeLog(deps: Deps, tx: Db, walkId: WalkId, memory: WalkMemory, { appended, state }: Judged, charts: PinnedCharts): Promise<void> {
  if (appended.length === 0 || state.phase === 'new') return
  const receivedAt = deps.clock()
  const standing = { ...toStanding(charts, state), lastEventAt: receivedAt }
  const isNew = memory.lastSeq === 0
  const isOtherMachine = isNew || appended.some(({ event }) => event.type === 'machine-identified')
  const machineTitle = isOtherMachine ? { machineTitle: await nameMachine(tx, state.machine) } : {}
  if (isNew) {
    const { chartId } = splitPlace(state.start)
    const version = state.pins[chartId] ?? 1
    await tx.insert(walks).values({
      ...standing,
      id: walkId,
      kind: state.kind,
      chartId,
      chartTitle: charts.find(chartId, version)?.chart.title ?? chartId,
      version,
      machineTitle: '',
      ...machineTitle,
      startedBy: state.startedBy,
      startedAt: receivedAt,
    })
  } else {
    await tx
      .update(walks)
      .set({ ...standing, ...machineTitle })
      .where(eq(walks.id, walkId))
  }
  const events = appended.map(({ event }) => event)
  const added = [...withPeopleOf(memory.people, events)].filter((personId) => !memory.people.has(personId))
  if (added.length > 0)
    await tx
      .insert(walkPeople)
      .values(added.map((personId) => ({ walkId, personId })))
      .onConflictDoNothing()
  await tx
    .insert(walkEvents)
    .values(
      appended.map(({ event, bodyHash }) => ({
        id: event.id,
        walkId,
        seq: event.seq,
        type: event.type,
        personId: event.personId,
        deviceId: event.deviceId,
        event,
        bodyHash,
        receivedAt,
      })),
    )
}

async function nameMachine(tx: Db, machine: Machine): Promise<string> {
  const [model] =
    machine.modelId === undefined ? [] : await tx.select({ maker: models.maker, name: models.name }).from(models).where(eq(models.id, machine.modelId))
  return machineWords(machine, model ?? null)
}

/** Keeps what did not make it into the log, for the person who tapped it. */
export async function writeAside(deps: Deps, tx: Db, walkId: WalkId, aside: readonly AsideEvent[]): Promise<void> {
  if (aside.length === 0) return
  const receivedAt = deps.clock()
  await tx
    .insert(walkSideEvents)
    .values(
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
