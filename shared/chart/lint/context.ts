import type { ChartId, NodeId } from '#shared/lib/ids.ts'
import { chartsNamedBy, reachOf, resolveJump, type ChartLookup, type ChartSet } from '../chart-set.ts'
import { reachableFrom } from '../digraph.ts'
import type { ChartDocument, ChartNode, Outcome } from '../document.ts'
import { entryOf, toChartGraph, type ChartGraph, type ChartIndex } from '../graph.ts'
import type { Remark } from './remark.ts'

/** What every rule reads: the chart, the charts joined to it, and the graph facts, each computed once. */
export type LintContext = {
  readonly index: ChartIndex
  readonly chart: ChartDocument
  /** The chart itself and every chart in its reach that is known. */
  readonly charts: ChartSet
  /** Charts that a jump in reach names and nobody has. */
  readonly missingCharts: ReadonlySet<ChartId>
  readonly graph: ChartGraph
  /** Whether a route leads to a node: from the chart's own starts, or by a jump of a joined chart. */
  readonly isReached: (id: NodeId) => boolean
  /** For a node, those from which the walk of another machine is passed on to it (`onlyFor.otherwise`). */
  readonly passedFrom: ReadonlyMap<NodeId, readonly NodeId[]>
  /** For a node, the fixed jumps of its own chart that arrive at it. */
  readonly jumpsInto: ReadonlyMap<NodeId, readonly NodeId[]>
}

/** One rule of the chart check, or a close family of them. */
export type Rule = (context: LintContext) => Iterable<Remark>

/** Computes the facts that the rules share. The lookup need not hold the chart itself. */
export function lintContext(index: ChartIndex, others: ChartLookup): LintContext {
  const charts = reachOf(index.id, (id) => (id === index.id ? index : others(id)))
  const graph = toChartGraph(index)
  const reached = reachableFrom(graph.graph, [...graph.starts, ...enteredFromElsewhere(index, charts, graph)])
  const passedFrom = new Map<NodeId, NodeId[]>()
  const jumpsInto = new Map<NodeId, NodeId[]>()
  for (const node of index.nodes.values()) {
    if (node.onlyFor?.otherwise !== undefined) list(passedFrom, node.onlyFor.otherwise, node.id)
    const arrival = node.kind === 'jump' && node.chart === index.id ? entryOf(index, node.at) : undefined
    if (arrival !== undefined) list(jumpsInto, arrival, node.id)
  }
  return {
    index,
    chart: index.chart,
    charts,
    missingCharts: new Set([...charts.values()].flatMap(chartsNamedBy).filter((id) => !charts.has(id))),
    graph,
    isReached: (id) => reached[graph.numberOf.get(id) ?? -1] === 1,
    passedFrom,
    jumpsInto,
  }
}

function list(lists: Map<NodeId, NodeId[]>, key: NodeId, id: NodeId): void {
  const known = lists.get(key)
  if (known === undefined) lists.set(key, [id])
  else known.push(id)
}

function enteredFromElsewhere(index: ChartIndex, charts: ChartSet, graph: ChartGraph): number[] {
  return [...charts.values()].flatMap((other) => {
    if (other === index) return []
    return other.chart.nodes.flatMap((node) => {
      const target = node.kind === 'jump' ? resolveJump(charts, node) : undefined
      return target?.found === true && target.chart === index ? (graph.numberOf.get(target.node.id) ?? []) : []
    })
  })
}

/** How a message names a node: by its title, a cause by the title in the library, else by its id. */
export function nameOf(index: ChartIndex, node: ChartNode): string {
  const title = node.title ?? (node.kind === 'cause' ? index.causes.get(node.causeId)?.title : undefined)
  return title === undefined || title.trim() === '' ? `node ${node.id}` : `"${title}"`
}

/** `nameOf` for a node id; an id without a node names itself. */
export function nameOfId(index: ChartIndex, id: NodeId): string {
  const node = index.nodes.get(id)
  return node === undefined ? `node ${id}` : nameOf(index, node)
}

/** How a message names an outcome: by its title, else by its id. */
export function outcomeName(outcome: Outcome): string {
  return `"${outcome.title.trim() === '' ? outcome.id : outcome.title}"`
}

/** Entries whose key was seen before, in order. */
export function repeated<T>(entries: readonly T[], keyOf: (entry: T) => string): readonly T[] {
  if (entries.length < 2) return []
  if (entries.length === 2) return entries[0] !== undefined && entries[1] !== undefined && keyOf(entries[0]) === keyOf(entries[1]) ? [entries[1]] : []
  const seen = new Set<string>()
  return entries.filter((entry) => seen.size === seen.add(keyOf(entry)).size)
}
