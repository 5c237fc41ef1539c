import type { OutcomeId } from '#shared/lib/ids.ts'
import { reachableFrom, reverse, strongComponents, successorsOf } from '../digraph.ts'
import type { ChartEdge, ChartNode, Outcome } from '../document.ts'
import { isDecision, isTerminator, type ChartIndex } from '../graph.ts'
import { nameOf, nameOfId, outcomeName, repeated, type LintContext, type Rule } from './context.ts'
import { edgeAt, remark, type Remark } from './remark.ts'

/** Every node can be reached from a start. */
export const reachability: Rule = function* ({ index, isReached }) {
  if (index.starts.length === 0) {
    yield remark('no-start', {}, 'This chart has no start. Add a start node and lead it to the first check.')
    return
  }
  for (const node of index.nodes.values()) {
    if (!isReached(node.id))
      yield remark('unreachable-node', { node: node.id }, `No route leads to ${nameOf(index, node)}. Lead an outcome to it, or take it out.`)
  }
}

/** Every outcome has one edge, and every edge has two ends. */
export const edges: Rule = function* ({ index }) {
  for (const [id, leaving] of index.edgesFrom) {
    const from = index.nodes.get(id)
    for (const edge of leaving) if (from === undefined || !index.order.has(edge.to) || !isFitting(from, edge)) yield* edgeEnds(index, from, edge)
    if (from !== undefined && leaving.length > 1) yield* secondEdges(index, from, leaving)
  }
  for (const node of index.nodes.values()) {
    const leaving = index.edgesFrom.get(node.id) ?? []
    if (isDecision(node)) {
      for (const outcome of node.outcomes) if (!leads(leaving, outcome.id)) yield withoutEdge(index, node, outcome)
    } else if ((node.kind === 'start' || node.kind === 'step') && !leads(leaving, undefined)) {
      yield remark('node-without-edge', { node: node.id, edge: { from: node.id } }, `Nothing follows ${nameOf(index, node)}. Lead it to the next node.`)
    }
  }
}

function leads(leaving: readonly ChartEdge[], outcome: OutcomeId | undefined): boolean {
  for (const edge of leaving) if (edge.outcome === outcome) return true
  return false
}

function withoutEdge(index: ChartIndex, node: ChartNode, outcome: Outcome): Remark {
  const words = `Outcome ${outcomeName(outcome)} of ${nameOf(index, node)} leads nowhere. Lead it to the next node.`
  return remark('outcome-without-edge', { node: node.id, edge: { from: node.id, outcome: outcome.id } }, words)
}

/** Whether an edge begins where its node lets one begin; an end lets none. */
function isFitting(from: ChartNode, edge: ChartEdge): boolean {
  if (isDecision(from)) return edge.outcome !== undefined && from.outcomes.some((outcome) => outcome.id === edge.outcome)
  return edge.outcome === undefined && !isEnd(from)
}

function* edgeEnds(index: ChartIndex, from: ChartNode | undefined, edge: ChartEdge): Iterable<Remark> {
  if (from === undefined) {
    yield remark('edge-from-nothing', { edge: edgeAt(edge) }, `An edge begins at node ${edge.from}, which does not exist. Take the edge out, or add the node.`)
    return
  }
  if (!index.nodes.has(edge.to))
    yield remark(
      'edge-to-nothing',
      { node: from.id, edge: edgeAt(edge) },
      `An edge of ${nameOf(index, from)} leads to node ${edge.to}, which does not exist. Lead it to another node.`,
    )
  if (isEnd(from)) {
    yield remark(
      'edge-out-of-end',
      { node: from.id, edge: edgeAt(edge) },
      `${nameOf(index, from)} ends the walk, yet an edge leads on from it. Nobody will walk it: take it out.`,
    )
    return
  }
  if (isFitting(from, edge)) return
  const message =
    edge.outcome === undefined
      ? `An edge leads on from ${nameOf(index, from)} without saying from which outcome. Give it one.`
      : `An edge leads on from outcome ${edge.outcome} of ${nameOf(index, from)}, which has no such outcome. Take the edge out, or add the outcome.`
  yield remark('edge-from-nothing', { node: from.id, edge: edgeAt(edge) }, message)
}

function* secondEdges(index: ChartIndex, from: ChartNode, leaving: readonly ChartEdge[]): Iterable<Remark> {
  for (const edge of repeated(leaving, ({ outcome }) => outcome ?? '')) {
    const where = edge.outcome === undefined ? nameOf(index, from) : `outcome ${edge.outcome} of ${nameOf(index, from)}`
    yield remark('second-edge', { node: from.id, edge: edgeAt(edge) }, `Two edges lead on from ${where}. A walk can take one only: take the other out.`)
  }
}

function isEnd(node: ChartNode): boolean {
  return isTerminator(node) && node.kind !== 'jump'
}

/** From every node that a walk can reach, an end can be reached. One remark for each knot of nodes that has no way out. */
export const ends: Rule = function* (context) {
  const { index, graph, isReached } = context
  const exits: number[] = []
  index.chart.nodes.forEach((node, number) => {
    if (leadsOut(context, node)) exits.push(number)
  })
  const escapes = reachableFrom(reverse(graph.graph), exits)
  if (!escapes.includes(0)) return
  const { of, count } = strongComponents(graph.graph)
  const isTrap = new Uint8Array(count).fill(1)
  graph.ids.forEach((_, number) => {
    const component = of[number] ?? 0
    if (escapes[number] === 1 || successorsOf(graph.graph, number).some((target) => of[target] !== component)) isTrap[component] = 0
  })
  const told = new Set<number>()
  for (const [number, id] of graph.ids.entries()) {
    const component = of[number] ?? 0
    if (isTrap[component] !== 1 || told.has(component) || graph.numberOf.get(id) !== number || !isReached(id)) continue
    told.add(component)
    yield remark(
      'no-end-reachable',
      { node: id },
      `A walk that comes to ${nameOfId(index, id)} never ends: no cause and no other end can be reached from it. Lead one of its outcomes out.`,
    )
  }
}

/** Ends, jumps out, calls of a chart that has ends of its own, and nodes whose missing way on is a remark already. */
function leadsOut({ index, charts }: LintContext, node: ChartNode): boolean {
  if (isTerminator(node)) return true
  const edges = index.edgesFrom.get(node.id) ?? []
  if (isDecision(node)) return node.outcomes.some((outcome) => !edges.some((edge) => edge.outcome === outcome.id && index.nodes.has(edge.to)))
  if (!edges.some((edge) => edge.outcome === undefined && index.nodes.has(edge.to))) return true
  if (node.kind !== 'jump' || node.chart === undefined || node.chart === index.id) return false
  return charts.get(node.chart)?.chart.nodes.some((other) => isTerminator(other) && other.kind !== 'back') === true
}

/** A node for some machines only says where a walk of another machine goes on. */
export const onlyFor: Rule = function* ({ index }) {
  for (const node of index.nodes.values()) {
    if (node.onlyFor === undefined) continue
    const { otherwise } = node.onlyFor
    if (otherwise !== undefined) {
      if (!index.nodes.has(otherwise))
        yield remark(
          'edge-to-nothing',
          { node: node.id },
          `On other machines ${nameOf(index, node)} hands over to node ${otherwise}, which does not exist. Name another node.`,
        )
      continue
    }
    const normal = isDecision(node) ? node.outcomes.filter((outcome) => outcome.normal === true).length : 0
    if (normal !== 1)
      yield remark(
        'only-for-without-way',
        { node: node.id },
        `${nameOf(index, node)} is not for every machine, and it does not say where the others go on. Name the node for other machines, or mark exactly one outcome as normal.`,
      )
  }
}
