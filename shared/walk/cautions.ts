import type { Caution } from '#shared/chart/document.ts'
import type { ChartIndex } from '#shared/chart/graph.ts'
import type { AccessId, CautionId, Place } from '#shared/lib/ids.ts'
import { enter, openOne, ownAccess, type Worked } from './metal.ts'
import type { Located } from './pinned-charts.ts'
import type { Metal, Trigger, WalkRecord } from './state.ts'

/** A caution that waits to be read, and what makes it so: nothing the first time, else what changed since it was read. */
export interface Pending {
  readonly caution: Caution
  readonly again: readonly Trigger[]
}

/** Something about to be done to the machine: the cautions that go with it, and what it will change. */
export interface Act {
  readonly cautions: readonly Caution[]
  readonly changes: ReadonlySet<Trigger>
}

function cautionsOfAccess(index: ChartIndex, ids: readonly AccessId[]): readonly CautionId[] {
  return ids.flatMap((id) => index.access.get(id)?.cautions ?? [])
}

function definitions(index: ChartIndex, ids: Iterable<CautionId>): readonly Caution[] {
  return [...new Set(ids)].flatMap((id) => index.cautions.get(id) ?? [])
}

function standingOf(index: ChartIndex): readonly CautionId[] {
  return [...index.cautions.values()].filter(({ standing }) => standing).map(({ id }) => id)
}

/** The cautions of one node, as the machine stands: those of its chart that stand, its own, those of its own accesses and of all it opens. */
function cautionsOfNode({ index, node }: Located, metal: Metal, done: Worked): readonly Caution[] {
  const accesses = [...ownAccess(metal, index, node), ...done.opened]
  return definitions(index, [...standingOf(index), ...(node.cautions ?? []), ...cautionsOfAccess(index, accesses)])
}

/** A caution that two charts of one page define: one thing, which waits again for whatever either of them names. */
function together(known: Caution | undefined, caution: Caution): Caution {
  return known === undefined || known === caution ? caution : { ...known, again: [...new Set([...(known.again ?? []), ...(caution.again ?? [])])] }
}

/** Recording some nodes one after the other, as on one page. */
export function actOfNodes(metal: Metal, nodes: readonly Located[]): Act {
  const cautions = new Map<CautionId, Caution>()
  const changes = new Set<Trigger>()
  let before = metal
  for (const node of nodes) {
    const done = enter(before, node)
    for (const caution of cautionsOfNode(node, before, done)) cautions.set(caution.id, together(cautions.get(caution.id), caution))
    for (const trigger of done.changed) changes.add(trigger)
    before = done.metal
  }
  return { cautions: [...cautions.values()], changes }
}

/** Opening one access out of turn, with what it needs. */
export function actOfOpening(metal: Metal, index: ChartIndex, id: AccessId): Act {
  const { opened, changed } = openOne(metal, index, id)
  return { cautions: definitions(index, cautionsOfAccess(index, opened)), changes: changed }
}

/** Looking at something out of turn that is open already: nothing changes. */
export function actOfLooking(metal: Metal, check: Located): Act {
  return { ...actOfNodes(metal, [check]), changes: new Set() }
}

/**
 * What of an act's cautions waits to be read: what was never read; what was read before one of its triggers last changed; and what the act
 * itself will make so, unless it was read for this very page (`isOpenFor`): what recording changes counts as made before it was read.
 */
export function pendingOf(walk: WalkRecord, act: Act, isOpenFor: (page: Place | null) => boolean): readonly Pending[] {
  return act.cautions.flatMap((caution) => {
    const read = Object.hasOwn(walk.cautionsRead, caution.id) ? walk.cautionsRead[caution.id] : undefined
    if (read === undefined) return { caution, again: [] }
    const triggers = (caution.again ?? []) as readonly Trigger[]
    const since = triggers.filter((trigger) => (Object.hasOwn(walk.changedAt, trigger) ? (walk.changedAt[trigger] ?? 0) : 0) > read.seq)
    const ahead = isOpenFor(read.openFor) ? [] : triggers.filter((trigger) => act.changes.has(trigger))
    const again = [...new Set([...since, ...ahead])]
    return again.length > 0 ? { caution, again } : []
  })
}
