import { reachableFrom, reverse, strongComponents, successorsOf } from '../digraph.ts'
import type { ChartNode } from '../document.ts'
import { isDecision, isTerminator } from '../graph.ts'
import { nameOf, nameOfId, outcomeName, repeated, type LintContext, type Rule } from './context.ts'
import { remark, type Remark } from './remark.ts'

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
export const edges: Rule = function* ({ index, chart }) {
  for (const edge of chart.edges) {
    const at = { edge: { from: edge.from, ...(edge.outcome === undefined ? {} : { outcome: edge.outcome }) } }
    const from = index.nodes.get(edge.from)
    if (from === undefined) {
      yield remark('edge-from-nothing', at, `An edge begins at node ${edge.from}, which does not exist. Take the edge out, or add the node.`)
      continue
    }
    const here = { node: edge.from, ...at }
    if (!index.nodes.has(edge.to))
      yield remark('edge-to-nothing', here, `An edge of ${nameOf(index, from)} leads to node ${edge.to}, which does not exist. Lead it to another node.`)
    if (isEnd(from))
      yield remark('edge-out-of-end', here, `${nameOf(index, from)} ends the walk, yet an edge leads on from it. Nobody will walk it: take it out.`)
    else if (isDecision(from) && edge.outcome === undefined)
      yield remark('edge-from-nothing', here, `An edge leads on from ${nameOf(index, from)} without saying from which outcome. Give it one.`)
    else if (edge.outcome !== undefined && !(isDecision(from) && from.outcomes.some((outcome) => outcome.id === edge.outcome)))
      yield remark(
        'edge-from-nothing',
        here,
        `An edge leads on from outcome ${edge.outcome} of ${nameOf(index, from)}, which has no such outcome. Take the edge out, or add the outcome.`,
      )
  }
  for (const edge of repeated(chart.edges, ({ from, outcome }) => `${from} ${outcome ?? ''}`)) {
    const where = edge.outcome === undefined ? nameOfId(index, edge.from) : `outcome ${edge.outcome} of ${nameOfId(index, edge.from)}`
    yield remark(
      'second-edge',
      { node: edge.from, edge: { from: edge.from, ...(edge.outcome === undefined ? {} : { outcome: edge.outcome }) } },
      `Two edges lead on from ${where}. A walk can take one only: take the other out.`,
    )
  }
  for (const node of index.nodes.values()) yield* waysOn(index, node)
}

function isEnd(node: ChartNode): boolean {
  return isTerminator(node) && node.kind !== 'jump'
}

function* waysOn(index: LintContext['index'], node: ChartNode): Iterable<Remark> {
  const leading = new Set((index.edgesFrom.get(node.id) ?? []).map((edge) => edge.outcome))
  if (isDecision(node)) {
    for (const outcome of node.outcomes) {
      if (leading.has(outcome.id)) continue
      yield remark(
        'outcome-without-edge',
        { node: node.id, edge: { from: node.id, outcome: outcome.id } },
        `Outcome ${outcomeName(outcome)} of ${nameOf(index, node)} leads nowhere. Lead it to the next node.`,
      )
    }
  } else if ((node.kind === 'start' || node.kind === 'step') && !leading.has(undefined)) {
    yield remark('node-without-edge', { node: node.id, edge: { from: node.id } }, `Nothing follows ${nameOf(index, node)}. Lead it to the next node.`)
  }
}

/** From every node that a walk can reach, an end can be reached. One remark for each knot of nodes that has no way out. */
export const ends: Rule = function* (context) {
  const { index, graph, isReached } = context
  const exits = graph.ids.flatMap((id, number) => {
    const node = index.nodes.get(id)
    return node !== undefined && leadsOut(context, node) ? [number] : []
  })
  const escapes = reachableFrom(reverse(graph.graph), exits)
  const { of, count } = strongComponents(graph.graph)
  const isTrap = new Uint8Array(count).fill(1)
  graph.ids.forEach((_, number) => {
    const component = of[number] ?? 0
    if (escapes[number] === 1 || successorsOf(graph.graph, number).some((target) => of[target] !== component)) isTrap[component] = 0
  })
  const told = new Set<number>()
  for (const [number, id] of graph.ids.entries()) {
    const component = of[number] ?? 0
    if (isTrap[component] !== 1 || told.has(component) || !isReached(id)) continue
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
