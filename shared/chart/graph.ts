import type { AccessId, CauseId, CautionId, ChartId, NodeId, OutcomeId, ServiceItemId, SpecKeyId } from '#shared/lib/ids.ts'
import type { EngineKind, EquipmentClass } from '#shared/trade/equipment.ts'
import { depthFirst, type Digraph } from './digraph.ts'
import { nodeMap } from './node-map.ts'
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
  const order = new Map<NodeId, number>()
  for (const [place, node] of chart.nodes.entries()) if (!order.has(node.id)) order.set(node.id, place)
  const nodes = nodeMap(order, chart.nodes)
  return {
    chart,
    id: chart.id,
    nodes,
    order,
    edgesFrom: edgesBy(chart, order, 'from'),
    edgesInto: edgesBy(chart, order, 'to'),
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

function edgesBy(chart: ChartDocument, order: ReadonlyMap<NodeId, number>, end: 'from' | 'to'): ReadonlyMap<NodeId, readonly ChartEdge[]> {
  const lists = new Array<ChartEdge[] | undefined>(chart.nodes.length).fill(undefined)
  const rest = new Map<NodeId, ChartEdge[]>()
  for (const edge of chart.edges) {
    const number = order.get(edge[end])
    const list = number === undefined ? rest.get(edge[end]) : lists[number]
    if (list !== undefined) list.push(edge)
    else if (number === undefined) rest.set(edge[end], [edge])
    else lists[number] = [edge]
  }
  if (end === 'from') lists.forEach((list, number) => list !== undefined && list.length > 1 && sortByOutcome(list, chart.nodes[number]))
  return nodeMap(order, lists, rest)
}

/** Most charts list edges in this order already, so that is looked at first. */
function sortByOutcome(edges: ChartEdge[], node: ChartNode | undefined): void {
  if (node === undefined || !isDecision(node)) return
  let highest = -1
  for (const edge of edges) {
    const rank = rankOf(edge, node)
    if (rank < highest) {
      edges.sort((left, right) => rankOf(left, node) - rankOf(right, node))
      return
    }
    highest = rank
  }
}

/** Where an edge's outcome stands; an edge without one comes first, one with an outcome that the node lacks last. */
function rankOf({ outcome }: ChartEdge, { outcomes }: DecisionNode): number {
  if (outcome === undefined) return -1
  for (let place = 0; place < outcomes.length; place += 1) if (outcomes[place]?.id === outcome) return place
  return outcomes.length
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
 * `chart/node` of the node at the end of the `sameAs` chain (of a ring, the node whose id comes first). Nodes with one
 * name, in any chart, are one check. `known` keeps names between calls for one chart, so that long chains cost once.
 */
export function physicalCheck(index: ChartIndex, node: DecisionNode, known: Map<NodeId, string> = new Map()): string {
  const path = new Set<NodeId>()
  let name: string | undefined
  for (let at = node; name === undefined;) {
    path.add(at.id)
    const next = at.checkId !== undefined || at.sameAs === undefined ? undefined : index.nodes.get(at.sameAs)
    if (known.has(at.id) || at.checkId !== undefined) name = known.get(at.id) ?? at.checkId
    else if (next === undefined || !isDecision(next)) name = `${index.id}/${at.id}`
    else if (path.has(next.id)) name = `${index.id}/${[...path].slice([...path].indexOf(next.id)).sort()[0] ?? at.id}`
    else at = next
  }
  for (const id of path) known.set(id, name)
  return name
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

/**
 * A chart as numbers for the graph algorithms: node `i` is `chart.nodes[i]`, edges are those of `successors`. A node whose
 * id was there before has a number of its own and no edge.
 */
export type ChartGraph = {
  readonly graph: Digraph
  readonly ids: readonly NodeId[]
  readonly numberOf: ReadonlyMap<NodeId, number>
  readonly starts: readonly number[]
}

/** Numbers a chart's nodes and edges. */
export function toChartGraph(index: ChartIndex): ChartGraph {
  const { nodes } = index.chart
  const rows = new Int32Array(nodes.length + 1)
  const targets: number[] = []
  nodes.forEach((node, number) => {
    if (index.order.get(node.id) === number) for (const target of successors(index, node)) targets.push(index.order.get(target) ?? 0)
    rows[number + 1] = targets.length
  })
  return {
    graph: { size: nodes.length, rows, targets: Int32Array.from(targets) },
    ids: nodes.map((node) => node.id),
    numberOf: index.order,
    starts: index.starts.map((start) => index.order.get(start.id) ?? 0),
  }
}

/**
 * The number that every node but a start carries on pages and pictures ("check 9"). An id made of `n` and a number, as n7
 * or n9b, gives it. Of the others, in depth-first order from the starts, a step or a proof takes the number of the node that
 * leads to it with the next free letter ("9c"), so that it is found beside its check; what is left takes the whole numbers
 * that are still free.
 */
export function chartNumbers(index: ChartIndex): ReadonlyMap<NodeId, string> {
  const { graph, ids, numberOf, starts } = toChartGraph(index)
  const numbers = new Map<NodeId, string>()
  const taken = new Set<string>()
  const give = (id: NodeId, number: string): void => {
    numbers.set(id, number)
    taken.add(number)
  }
  const everyNode = Array.from({ length: ids.length }, (_, number) => number)
  const { preorder } = depthFirst(graph, [...starts, ...everyNode])
  const numbered = preorder.flatMap((number) => {
    const node = index.nodes.get(ids[number] ?? ('' as NodeId))
    return node === undefined || numberOf.get(node.id) !== number || node.kind === 'start' ? [] : [{ number, node }]
  })
  for (const { node } of numbered) {
    const named = /^n0*(\d{1,4}[a-z]?)$/.exec(node.id)?.[1]
    if (named !== undefined && !taken.has(named)) give(node.id, named)
  }
  const leaders = firstLeaders(graph, preorder)
  let next = 1
  for (const { number, node } of numbered) {
    if (numbers.has(node.id)) continue
    const leader = ids[leaders.get(number) ?? -1]
    const beside = node.kind === 'step' || node.kind === 'proof' ? nextBeside(leader === undefined ? undefined : numbers.get(leader), taken) : undefined
    while (taken.has(String(next))) next += 1
    give(node.id, beside ?? String(next))
  }
  return numbers
}

/** For every node the one that leads to it and comes first in the order. */
function firstLeaders(graph: Digraph, order: readonly number[]): ReadonlyMap<number, number> {
  const leaders = new Map<number, number>()
  for (const from of order) {
    for (const to of graph.targets.subarray(graph.rows[from], graph.rows[from + 1])) if (!leaders.has(to)) leaders.set(to, from)
  }
  return leaders
}

/** The number of a node beside "9", or beside "9b": the next letter that is free, as in "9c". */
function nextBeside(leader: string | undefined, taken: ReadonlySet<string>): string | undefined {
  const [, whole, letter = ''] = /^(\d+)([a-z]?)$/.exec(leader ?? '') ?? []
  if (whole === undefined) return undefined
  return [...'abcdefghijklmnopqrstuvwxyz'].filter((next) => next > letter).map((next) => `${whole}${next}`).find((number) => !taken.has(number))
}
