import type { AccessId, CauseId, CautionId, ChartId, CheckId, NodeId, OutcomeId, ServiceItemId, SpecKeyId } from '#shared/lib/ids.ts'
import type { EngineKind, EquipmentClass } from '#shared/trade/equipment.ts'
import { depthFirst, toDigraph, type Digraph } from './digraph.ts'
import type { Access, Cause, Caution, ChartDocument, ChartEdge, ChartNode, DecisionNode, NodeOf, ServiceItem, SpecKey } from './document.ts'

/**
 * A chart with everything looked up by id. Where a faulty chart holds an id twice, or two edges out of one outcome, the
 * first counts. Edges are listed even where an end of theirs does not exist; `nodes` tells.
 */
export type ChartIndex = {
  readonly chart: ChartDocument
  readonly id: ChartId
  readonly nodes: ReadonlyMap<NodeId, ChartNode>
  /** Where a node stands in `chart.nodes`. */
  readonly order: ReadonlyMap<NodeId, number>
  /** Edges out of a node, in the order of its outcomes. */
  readonly edgesFrom: ReadonlyMap<NodeId, readonly ChartEdge[]>
  readonly edgesInto: ReadonlyMap<NodeId, readonly ChartEdge[]>
  readonly starts: readonly NodeOf<'start'>[]
  readonly causes: ReadonlyMap<CauseId, Cause>
  readonly access: ReadonlyMap<AccessId, Access>
  readonly cautions: ReadonlyMap<CautionId, Caution>
  readonly serviceItems: ReadonlyMap<ServiceItemId, ServiceItem>
  readonly specKeys: ReadonlyMap<SpecKeyId, SpecKey>
}

/** Looks everything of a chart up by id, once; near-linear in its size. */
export function indexChart(chart: ChartDocument): ChartIndex {
  const nodes = byId(chart.nodes)
  const order = new Map<NodeId, number>()
  chart.nodes.forEach((node, index) => order.has(node.id) || order.set(node.id, index))
  return {
    chart,
    id: chart.id,
    nodes,
    order,
    edgesFrom: inOutcomeOrder(groupEdges(chart.edges, 'from'), nodes),
    edgesInto: groupEdges(chart.edges, 'to'),
    starts: chart.nodes.filter((node) => node.kind === 'start'),
    causes: byId(chart.library.causes ?? []),
    access: byId(chart.access ?? []),
    cautions: byId(chart.cautions ?? []),
    serviceItems: byId(chart.library.serviceItems ?? []),
    specKeys: byId(chart.library.specKeys ?? []),
  }
}

function byId<T extends { readonly id: string }>(list: readonly T[]): ReadonlyMap<T['id'], T> {
  const map = new Map<T['id'], T>()
  for (const entry of list) if (!map.has(entry.id)) map.set(entry.id, entry)
  return map
}

function groupEdges(edges: readonly ChartEdge[], end: 'from' | 'to'): Map<NodeId, ChartEdge[]> {
  const groups = new Map<NodeId, ChartEdge[]>()
  for (const edge of edges) {
    const group = groups.get(edge[end])
    if (group === undefined) groups.set(edge[end], [edge])
    else group.push(edge)
  }
  return groups
}

function inOutcomeOrder(groups: Map<NodeId, ChartEdge[]>, nodes: ReadonlyMap<NodeId, ChartNode>): ReadonlyMap<NodeId, readonly ChartEdge[]> {
  for (const [id, edges] of groups) {
    const node = nodes.get(id)
    if (node === undefined || !isDecision(node) || edges.length < 2) continue
    const rank = new Map(node.outcomes.map((outcome, index) => [outcome.id, index]))
    const rankOf = (edge: ChartEdge) => (edge.outcome === undefined ? -1 : (rank.get(edge.outcome) ?? node.outcomes.length))
    groups.set(
      id,
      edges.toSorted((left, right) => rankOf(left) - rankOf(right)),
    )
  }
  return groups
}

/** Whether a node has outcomes: a check, a reading or a proof. */
export function isDecision(node: ChartNode): node is DecisionNode {
  return node.kind === 'check' || node.kind === 'reading' || node.kind === 'proof'
}

/** Whether a walk ends or leaves the chart at this node: cause, escalate, hold, back, and a jump that does not return. */
export function isTerminator(node: ChartNode): boolean {
  return node.kind === 'cause' || node.kind === 'escalate' || node.kind === 'hold' || node.kind === 'back' || (node.kind === 'jump' && node.returns !== true)
}

/** Whether a node is meant for a machine; one without `onlyFor`, or with an absent list in it, is meant for any. */
export function isForMachine(node: ChartNode, machine: { readonly class: EquipmentClass; readonly engine: EngineKind }): boolean {
  const { classes, engines } = node.onlyFor ?? {}
  return (classes === undefined || classes.includes(machine.class)) && (engines === undefined || engines.includes(machine.engine))
}

/** Where an outcome (or, without one, a node that has none) leads; `undefined` where no edge says so. */
export function follow(index: ChartIndex, from: NodeId, outcome?: OutcomeId): NodeId | undefined {
  return index.edgesFrom.get(from)?.find((edge) => edge.outcome === outcome)?.to
}

/**
 * The name of the physical check that a node asks: its own `checkId`, else that of the node it is `sameAs`, else
 * `chart/node` of the node at the end of the `sameAs` chain. Nodes with one name, in any chart, are one check.
 */
export function physicalCheck(index: ChartIndex, node: DecisionNode): CheckId | `${ChartId}/${NodeId}` {
  const seen = new Set<NodeId>()
  let at = node
  for (;;) {
    if (at.checkId !== undefined) return at.checkId
    seen.add(at.id)
    const next = at.sameAs === undefined || seen.has(at.sameAs) ? undefined : index.nodes.get(at.sameAs)
    if (next === undefined || !isDecision(next)) return `${index.id}/${at.id}`
    at = next
  }
}

/**
 * Where a node can lead inside its own chart: along its edges, to the node that takes over on another machine
 * (`onlyFor.otherwise`), and from a fixed jump into its own chart. Ends that do not exist are left out.
 */
export function successors(index: ChartIndex, node: ChartNode): readonly NodeId[] {
  const targets = (index.edgesFrom.get(node.id) ?? []).map((edge) => edge.to)
  if (node.onlyFor?.otherwise !== undefined) targets.push(node.onlyFor.otherwise)
  if (node.kind === 'jump' && node.chart === index.id) {
    const target = entryOf(index, node.at)
    if (target !== undefined) targets.push(target)
  }
  return targets.filter((target) => index.nodes.has(target))
}

/** The node where a jump arrives: the one it names, else the single start; `undefined` where there is no such node, or several starts. */
export function entryOf(index: ChartIndex, at: NodeId | undefined): NodeId | undefined {
  if (at !== undefined) return index.nodes.has(at) ? at : undefined
  return index.starts.length === 1 ? index.starts[0]?.id : undefined
}

/** A chart as numbers for the graph algorithms: node `i` is the first node of `chart.nodes` with its id, edges are those of `successors`. */
export type ChartGraph = {
  readonly graph: Digraph
  readonly ids: readonly NodeId[]
  readonly numberOf: ReadonlyMap<NodeId, number>
  readonly starts: readonly number[]
}

/** Numbers a chart's nodes and edges. Ids that appear twice count once. */
export function toChartGraph(index: ChartIndex): ChartGraph {
  const ids = [...index.nodes.keys()]
  const numberOf = new Map(ids.map((id, number) => [id, number]))
  const edges: (readonly [number, number])[] = []
  for (const [id, node] of index.nodes) {
    for (const target of successors(index, node)) edges.push([numberOf.get(id) ?? 0, numberOf.get(target) ?? 0])
  }
  return { graph: toDigraph(ids.length, edges), ids, numberOf, starts: index.starts.map((start) => numberOf.get(start.id) ?? 0) }
}

/**
 * The number that every node but a start carries on pages and pictures ("check 9"). An id made of `n` and a number, as n7
 * or n9b, gives it; the others take, in depth-first order from the starts, the whole numbers that are still free.
 */
export function chartNumbers(index: ChartIndex): ReadonlyMap<NodeId, string> {
  const { graph, ids, starts } = toChartGraph(index)
  const numbers = new Map<NodeId, string>()
  const taken = new Set<string>()
  const unnamed: NodeId[] = []
  const everyNode = Array.from({ length: ids.length }, (_, number) => number)
  for (const number of depthFirst(graph, [...starts, ...everyNode]).preorder) {
    const id = ids[number]
    if (id === undefined || index.nodes.get(id)?.kind === 'start') continue
    const named = /^n0*(\d{1,4}[a-z]?)$/.exec(id)?.[1]
    if (named === undefined || taken.has(named)) unnamed.push(id)
    else {
      numbers.set(id, named)
      taken.add(named)
    }
  }
  let next = 1
  for (const id of unnamed) {
    while (taken.has(String(next))) next += 1
    numbers.set(id, String(next))
    next += 1
  }
  return numbers
}
