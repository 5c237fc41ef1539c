import type { CauseId, ChartId, NodeId } from '#shared/lib/ids.ts'
import { toDigraph, type Digraph } from './digraph.ts'
import type { ChartDocument, ChartNode, NodeOf } from './document.ts'
import { commonDominators, dominators, unreached } from './dominance.ts'
import { entryOf, indexChart, type ChartIndex } from './graph.ts'

/** Several charts that a walk may cross, each indexed once. */
export type ChartSet = ReadonlyMap<ChartId, ChartIndex>

/** Finds a chart by id: a published version, a draft, a file beside another; `undefined` where there is none. */
export type ChartLookup = (id: ChartId) => ChartIndex | undefined

/** Indexes charts; of two with one id the first counts. */
export function toChartSet(charts: Iterable<ChartDocument>): ChartSet {
  const set = new Map<ChartId, ChartIndex>()
  for (const chart of charts) if (!set.has(chart.id)) set.set(chart.id, indexChart(chart))
  return set
}

/** The charts that a chart's fixed jumps name, each once, in the order of the nodes; its own id may be among them. */
export function chartsNamedBy(index: ChartIndex): readonly ChartId[] {
  const named = index.chart.nodes.flatMap((node) => (node.kind === 'jump' && node.chart !== undefined ? [node.chart] : []))
  return [...new Set(named)]
}

/**
 * Every chart that can be reached from one by fixed jumps, breadth first, that chart itself first. Charts that the lookup
 * lacks are left out, and with them whatever lies behind; a jump that lets the person pick adds its charts when it is taken.
 */
export function reachOf(id: ChartId, lookup: ChartLookup): ChartSet {
  const reach = new Map<ChartId, ChartIndex>()
  const asked = new Set([id])
  for (const next of asked) {
    const index = lookup(next)
    if (index === undefined) continue
    reach.set(next, index)
    for (const named of chartsNamedBy(index)) asked.add(named)
  }
  return reach
}

/** Where a jump arrives, or why it arrives nowhere. */
export type JumpTarget =
  | { readonly found: true; readonly chart: ChartIndex; readonly node: ChartNode }
  | { readonly found: false; readonly why: 'pick' | 'no-chart-named' | 'chart-missing' | 'node-missing' | 'no-single-start' }

/** Resolves a jump: the node it names, else the single start of its chart. A jump may lead into its own chart. */
export function resolveJump(charts: ChartSet, jump: NodeOf<'jump'>): JumpTarget {
  if (jump.pick !== undefined) return { found: false, why: 'pick' }
  if (jump.chart === undefined) return { found: false, why: 'no-chart-named' }
  const chart = charts.get(jump.chart)
  if (chart === undefined) return { found: false, why: 'chart-missing' }
  const id = entryOf(chart, jump.at)
  const node = id === undefined ? undefined : chart.nodes.get(id)
  if (node === undefined) return { found: false, why: jump.at === undefined ? 'no-single-start' : 'node-missing' }
  return { found: true, chart, node }
}

/** A node seen across charts. */
export type JoinedNode = { readonly chart: ChartIndex; readonly node: ChartNode }

/** Charts joined by their jumps, as numbers for the graph algorithms. */
export type JoinedGraph = {
  readonly graph: Digraph
  readonly nodes: readonly JoinedNode[]
  readonly numberOf: (chart: ChartId, node: NodeId) => number | undefined
}

/**
 * Joins charts into one graph: edges, `onlyFor.otherwise`, and every fixed jump to the node where it arrives. A jump that
 * returns leads both into its chart and on along its own edge (which stands for the call that came back), and a `back`
 * leads nowhere, so no route comes back to a caller that did not call.
 */
export function joinCharts(charts: ChartSet): JoinedGraph {
  const nodes = [...charts.values()].flatMap((chart) => [...chart.nodes.values()].map((node) => ({ chart, node })))
  const firstOf = new Map<ChartId, Map<NodeId, number>>()
  nodes.forEach(({ chart, node }, number) => {
    const numbers = firstOf.get(chart.id) ?? new Map<NodeId, number>()
    firstOf.set(chart.id, numbers.set(node.id, number))
  })
  const numberOf = (chart: ChartId, node: NodeId) => firstOf.get(chart)?.get(node)
  const edges = nodes.flatMap(({ chart, node }, from) => targetsOf(charts, chart, node).flatMap(([to, id]) => pair(from, numberOf(to, id))))
  return { graph: toDigraph(nodes.length, edges), nodes, numberOf }
}

function targetsOf(charts: ChartSet, chart: ChartIndex, node: ChartNode): (readonly [ChartId, NodeId])[] {
  const targets = (chart.edgesFrom.get(node.id) ?? []).map((edge) => [chart.id, edge.to] as const)
  if (node.onlyFor?.otherwise !== undefined) targets.push([chart.id, node.onlyFor.otherwise])
  if (node.kind === 'jump') {
    const target = resolveJump(charts, node)
    if (target.found) targets.push([target.chart.id, target.node.id])
  }
  return targets
}

function pair(from: number, to: number | undefined): (readonly [number, number])[] {
  return to === undefined ? [] : [[from, to]]
}

/**
 * For every cause that the starts of a chart reach at a node of that chart: the nodes of the chart that every route to it
 * passes, in route order, the cause itself left out; of a cause with several nodes, those that all of them share. "Every
 * walk to this cause passes that safety step" is membership in this list. Routes that leave the chart by a jump and come
 * back into it count too, as far as `charts` holds the charts they cross.
 */
export function mustPass(root: ChartIndex, charts: ChartSet = new Map([[root.id, root]])): ReadonlyMap<CauseId, readonly NodeId[]> {
  const { graph, nodes, numberOf } = joinCharts(charts)
  const tree = dominators(
    graph,
    root.starts.flatMap((start) => numberOf(root.id, start.id) ?? []),
  )
  const reached = new Map<CauseId, number[]>()
  for (const node of root.nodes.values()) {
    const number = node.kind === 'cause' ? numberOf(root.id, node.id) : undefined
    if (node.kind !== 'cause' || number === undefined || tree[number] === unreached) continue
    const known = reached.get(node.causeId)
    if (known === undefined) reached.set(node.causeId, [number])
    else known.push(number)
  }
  const own = (number: number) => (nodes[number]?.chart === root ? [nodes[number].node.id] : [])
  return new Map([...reached].map(([causeId, numbers]) => [causeId, commonDominators(tree, numbers).flatMap(own)]))
}
