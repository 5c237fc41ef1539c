import { isDecision } from '#shared/chart/graph.ts'
import type { CautionId, Place, ServiceItemId } from '#shared/lib/ids.ts'
import type { Worked } from './metal.ts'
import { locate, type PinnedCharts } from './pinned-charts.ts'
import type { Arrived } from './route.ts'
import { liveTrail, type Answer, type CautionRead, type OpenWalk, type Phase, type Position, type StartedWalk, type Trigger, type WalkRecord } from './state.ts'

type KeyOfAny<Union> = Union extends unknown ? keyof Union : never

/** Every field that belongs to a phase and leaves with it; the compiler keeps the list complete. */
const phaseFields: Readonly<Record<KeyOfAny<Phase>, true>> = {
  phase: true,
  causeId: true,
  cause: true,
  repair: true,
  run: true,
  reason: true,
  tagNo: true,
  why: true,
  result: true,
  last: true,
}

/** The record alone, without what belongs to its phase. */
function withoutPhase(walk: StartedWalk): WalkRecord {
  // At a node, where walks are most of the time, a walk is its record and the name of that phase.
  if (walk.phase === 'at-node') return walk
  // All that is left is the record: the fields of every phase are listed above.
  return Object.fromEntries(Object.entries(walk).filter(([field]) => !Object.hasOwn(phaseFields, field))) as unknown as WalkRecord
}

/** The walk in another phase, with some of its record changed; what belonged to the old phase is gone. */
export function inPhase<P extends Phase>(walk: StartedWalk, phase: P, changes: Partial<WalkRecord> = {}): WalkRecord & P {
  return { ...withoutPhase(walk), ...changes, ...phase }
}

/** The fields that a walk's phase adds to its record. */
export function phaseOf<P extends Phase>(walk: WalkRecord & P): P {
  return Object.fromEntries(Object.entries(walk).filter(([field]) => Object.hasOwn(phaseFields, field))) as unknown as P
}

/** Where a walk stands. */
export function positionOf({ node, calls }: WalkRecord): Position {
  return { node, calls }
}

/** The walk where a way has led it: at a node, at a cause, or with the lead when there is no way on. */
export function standingAt(charts: PinnedCharts, walk: StartedWalk, arrived: Arrived, seq: number): OpenWalk {
  const { position, missing, deadEnd } = arrived
  const changes = { ...position, arrival: { seq, missing } }
  if (deadEnd !== null) return inPhase(walk, { phase: 'escalated', reason: deadEnd }, changes)
  const node = locate(charts, walk.pins, position.node)?.node
  return node?.kind === 'cause' ? inPhase(walk, { phase: 'at-cause', causeId: node.causeId }, changes) : inPhase(walk, { phase: 'at-node' }, changes)
}

/** The record after an act on the machine: what it left open, what it charged, what it changed. `minutes` are the node's own. */
export function afterWork(walk: WalkRecord, done: Worked, seq: number, minutes = 0): Pick<WalkRecord, 'metal' | 'minutesUsed' | 'waitMinutes' | 'changedAt'> {
  const changed = Object.fromEntries([...done.changed].map((trigger) => [trigger, seq])) as Record<Trigger, number>
  return {
    metal: done.metal,
    minutesUsed: walk.minutesUsed + done.minutes + minutes,
    waitMinutes: walk.waitMinutes + done.waitMinutes,
    changedAt: { ...walk.changedAt, ...changed },
  }
}

/** The cautions read so far, some of them rewritten. */
export function rereadCautions(walk: WalkRecord, rewrite: (read: CautionRead, cautionId: CautionId) => CautionRead): WalkRecord['cautionsRead'] {
  const entries = Object.entries(walk.cautionsRead) as [CautionId, CautionRead][]
  return Object.fromEntries(entries.map(([id, read]) => [id, rewrite(read, id)]))
}

/**
 * The cautions read so far, once a page was recorded: those read for this page count as read after all that the recording changed, and
 * what was read for any other page counts as it was read.
 */
export function cautionsAfterPage(walk: WalkRecord, page: Place, seq: number): WalkRecord['cautionsRead'] {
  return rereadCautions(walk, (read) => ({ seq: read.openFor === page ? seq : read.seq, openFor: null }))
}

/**
 * The work for the way out, in the order in which it came up: what dirty but serviceable findings ask for, those noticed out of turn
 * included, then what was put on by hand; without what was taken off by hand.
 */
export function serviceListOf(charts: PinnedCharts, walk: WalkRecord): readonly ServiceItemId[] {
  const found = [
    ...walk.noticed.map(({ seq, node, answer }) => ({ seq, place: node, answer })),
    ...liveTrail(walk).flatMap((line) => (line.kind === 'finding' ? { seq: line.seq, place: line.position.node, answer: line.answer } : [])),
  ].toSorted((left, right) => left.seq - right.seq)
  const asked = found.flatMap(({ place, answer }) => serviceItemOf(charts, walk, place, answer) ?? [])
  const { added, dropped } = walk.serviceByHand
  return [...new Set([...asked, ...added])].filter((id) => !dropped.includes(id))
}

function serviceItemOf(charts: PinnedCharts, walk: WalkRecord, place: Place, answer: Answer): ServiceItemId | undefined {
  const node = locate(charts, walk.pins, place)?.node
  const outcome = node && isDecision(node) ? node.outcomes.find(({ id }) => id === answer.outcome) : undefined
  return outcome?.serviceable ? outcome.serviceItem : undefined
}
