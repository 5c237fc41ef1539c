import type { ChartNode, DecisionNode, NodeOf } from '#shared/chart/document.ts'
import { entryOf, follow, isDecision, type ChartIndex } from '#shared/chart/graph.ts'
import type { ChartId, NodeId, OutcomeId, Place } from '#shared/lib/ids.ts'
import type { Machine } from './events.ts'
import { chartOf, locate, placeOf, type Located, type PinnedCharts, type Pins } from './pinned-charts.ts'
import type { Arrival, Position } from './state.ts'

/** What decides the way of a walk besides its answers: the versions it goes by, and the machine. */
export interface Wayfarer {
  readonly pins: Pins
  readonly machine: Pick<Machine, 'class' | 'engine'>
}

/** Why a way ends where no node says so; each of these asks the lead. */
export type DeadEnd = 'ring' | 'not-here-yet' | 'no-way-on'

/** Where a way leads: to a node that takes an event, or to a dead end. */
export interface Arrived {
  readonly position: Position
  readonly deadEnd: DeadEnd | null
  readonly missing: Arrival['missing']
  /** The nodes that were passed on the way, in order. */
  readonly passed: readonly Place[]
  /** Whether the way went through a jump that does not come back. */
  readonly wentOneWay: boolean
}

/** Whether a node is meant for a machine. */
export function isFor(node: ChartNode, machine: Wayfarer['machine']): boolean {
  const { classes, engines } = node.onlyFor ?? {}
  return (classes === undefined || classes.includes(machine.class)) && (engines === undefined || engines.includes(machine.engine))
}

/** What one node does with a walk that comes to it. */
type Passage =
  | { readonly kind: 'stop' }
  | { readonly kind: 'on'; readonly to: NodeId | undefined; readonly index: ChartIndex; readonly calls: readonly Place[]; readonly oneWay?: true }
  | { readonly kind: 'missing'; readonly chartId: ChartId | null; readonly to: NodeId | undefined }
  | { readonly kind: 'dead-end'; readonly deadEnd: DeadEnd }

const stop: Passage = { kind: 'stop' }

/** The way past a node that is for other machines. */
function wayPast(index: ChartIndex, node: ChartNode): NodeId | undefined {
  if (node.onlyFor?.otherwise !== undefined) return node.onlyFor.otherwise
  if (!isDecision(node)) return follow(index, node.id)
  const normal = node.outcomes.find((outcome) => outcome.normal)
  return normal && follow(index, node.id, normal.id)
}

function passJump(charts: PinnedCharts, who: Wayfarer, index: ChartIndex, node: NodeOf<'jump'>, calls: readonly Place[]): Passage {
  if (node.pick !== undefined) return stop
  const target = node.chart === undefined ? null : chartOf(charts, who.pins, node.chart)
  const entry = target ? entryOf(target, node.at) : undefined
  const here = placeOf(index, node.id)
  if (target === null || entry === undefined) {
    return node.returns ? { kind: 'missing', chartId: node.chart ?? null, to: follow(index, node.id) } : { kind: 'dead-end', deadEnd: 'not-here-yet' }
  }
  if (!node.returns) return { kind: 'on', to: entry, index: target, calls: [], oneWay: true }
  return calls.includes(here) ? { kind: 'dead-end', deadEnd: 'ring' } : { kind: 'on', to: entry, index: target, calls: [...calls, here] }
}

function passBack(charts: PinnedCharts, who: Wayfarer, calls: readonly Place[]): Passage {
  const caller = calls.at(-1)
  if (caller === undefined) return stop
  const located = locate(charts, who.pins, caller)
  return located
    ? { kind: 'on', to: follow(located.index, located.node.id), index: located.index, calls: calls.slice(0, -1) }
    : { kind: 'dead-end', deadEnd: 'no-way-on' }
}

function pass(charts: PinnedCharts, who: Wayfarer, { index, node }: Located, calls: readonly Place[]): Passage {
  if (!isFor(node, who.machine)) return { kind: 'on', to: wayPast(index, node), index, calls }
  switch (node.kind) {
    case 'start':
      return { kind: 'on', to: follow(index, node.id), index, calls }
    case 'jump':
      return passJump(charts, who, index, node, calls)
    case 'back':
      return passBack(charts, who, calls)
    default:
      return stop
  }
}

/**
 * Goes to a node and on through everything that takes no event: starts, nodes for other machines, fixed jumps, backs. A returning jump
 * whose chart is not there is passed over and named; a one-way one is a dead end. Passing one node twice is a ring.
 */
export function arrive(charts: PinnedCharts, who: Wayfarer, target: Position): Arrived {
  const passed = new Set<Place>()
  const missing: Arrival['missing'][number][] = []
  let position = target
  let wentOneWay = false
  const end = (deadEnd: DeadEnd | null): Arrived => ({ position, deadEnd, missing, passed: [...passed], wentOneWay })
  for (;;) {
    const located = locate(charts, who.pins, position.node)
    if (located === null) return end('no-way-on')
    const passage = pass(charts, who, located, position.calls)
    if (passage.kind === 'stop') return end(null)
    if (passage.kind === 'dead-end') return end(passage.deadEnd)
    if (passed.has(position.node)) return end('ring')
    passed.add(position.node)
    if (passage.kind === 'missing') missing.push({ jump: position.node, chartId: passage.chartId })
    else wentOneWay ||= passage.oneWay === true
    if (passage.to === undefined) return end('no-way-on')
    position =
      passage.kind === 'missing'
        ? { node: placeOf(located.index, passage.to), calls: position.calls }
        : { node: placeOf(passage.index, passage.to), calls: passage.calls }
  }
}

/** Goes on from a node that took an event, along the edge of its outcome, or along its only edge. */
export function goOn(charts: PinnedCharts, who: Wayfarer, from: Position, outcome?: OutcomeId): Arrived {
  const located = locate(charts, who.pins, from.node)
  const to = located ? follow(located.index, located.node.id, outcome) : undefined
  if (!located || to === undefined) return { position: from, deadEnd: 'no-way-on', missing: [], passed: [], wentOneWay: false }
  return arrive(charts, who, { node: placeOf(located.index, to), calls: from.calls })
}

/** All ways on from a node at which a walk stands: one for every outcome, in their order; one for a step; none elsewhere. */
export function waysOn(charts: PinnedCharts, who: Wayfarer, from: Position): readonly Arrived[] {
  const node = locate(charts, who.pins, from.node)?.node
  if (node === undefined) return []
  if (isDecision(node)) return node.outcomes.map((outcome) => goOn(charts, who, from, outcome.id))
  return node.kind === 'step' ? [goOn(charts, who, from)] : []
}

/** The outcome whose edge an unanswered check follows: its own `ifSkipped`, else the first normal one; on a proof the first that does not confirm. */
export function outcomeIfSkipped(node: DecisionNode): OutcomeId | null {
  if (node.ifSkipped !== undefined) return node.ifSkipped
  const fallback = node.outcomes.find((outcome) => (node.kind === 'proof' ? !outcome.confirms : outcome.normal))
  return fallback?.id ?? null
}

/** One text for each position, to tell positions apart. */
export function positionKey({ node, calls }: Position): string {
  return [...calls, node].join(' ')
}

/**
 * Everything at which a walk can stand from some ways on, nearest first, each position once; dead ends included. Ends by itself: a stack
 * never holds one jump twice. `stopAt` keeps the search from going on behind a position.
 */
export function* lookAhead(
  charts: PinnedCharts,
  who: Wayfarer,
  ways: readonly Arrived[],
  stopAt: (arrived: Arrived) => boolean = () => false,
): Generator<Arrived> {
  const seen = new Set<string>()
  const queue = [...ways]
  for (let next = 0; next < queue.length; next += 1) {
    const arrived = queue[next]
    if (arrived === undefined) return
    const key = positionKey(arrived.position)
    if (arrived.deadEnd === null && seen.has(key)) continue
    if (arrived.deadEnd === null) seen.add(key)
    yield arrived
    if (arrived.deadEnd === null && !stopAt(arrived)) queue.push(...waysOn(charts, who, arrived.position))
  }
}
