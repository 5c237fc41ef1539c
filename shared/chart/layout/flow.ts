import type { NodeId, OutcomeId } from '#shared/lib/ids.ts'
import { depthFirst, toDigraph } from '../digraph.ts'
import type { ChartNode, DecisionNode } from '../document.ts'
import { isDecision, type ChartIndex } from '../graph.ts'

/** What a picture draws as one line from node to node: all outcomes that lead the same way, the plain way on, or the way of other machines. */
export interface FlowLink {
  readonly from: NodeId
  readonly to: NodeId
  /** Outcomes that lead here, in their order; none on the way on of a step and on the way of machines that the node is not for. */
  readonly outcomes: readonly OutcomeId[]
  /** The way of machines that the node is not for (`onlyFor.otherwise`). */
  readonly isOtherwise: boolean
  /** Leads back to a node on the way to itself, depth-first from the starts. */
  readonly isLoop: boolean
}

/** A chart as a picture sees it: nodes in route order, links, and for each node the one link that goes straight down. */
export interface ChartFlow {
  /** Depth-first from the starts, outcomes in order; then what no start reaches. */
  readonly order: readonly NodeId[]
  /** Every link goes from an earlier to a later node of this list, loops excepted. */
  readonly topological: readonly NodeId[]
  readonly links: readonly FlowLink[]
  readonly forwardFrom: ReadonlyMap<NodeId, readonly FlowLink[]>
  readonly forwardInto: ReadonlyMap<NodeId, readonly FlowLink[]>
  readonly mainOf: ReadonlyMap<NodeId, NodeId>
}

/** Longer side ways than this, in checks and readings, take the straight line from the normal outcome. */
const longSideWay = 3

/** Reads the flow of a chart. Edges to nothing are left out; total on faulty charts, near-linear. */
export function toFlow(index: ChartIndex): ChartFlow {
  const ids = [...index.nodes.keys()]
  const numberOf = new Map(ids.map((id, number) => [id, number]))
  const drafts = ids.map((id) => linksFrom(index, id))
  const graph = toDigraph(
    ids.length,
    drafts.flatMap((links, from) => links.map(({ to }) => [from, numberOf.get(to) ?? 0] as const)),
  )
  const roots = [...index.starts.map(({ id }) => numberOf.get(id) ?? 0), ...ids.keys()]
  const { preorder, postorder, closing } = depthFirst(graph, roots)
  const links = drafts.flatMap((list, from) => list.map((link, place) => ({ ...link, isLoop: closing.has((graph.rows[from] ?? 0) + place) })))
  const forward = links.filter(({ isLoop }) => !isLoop)
  const idOf = (number: number): NodeId[] => ids.slice(number, number + 1)
  const forwardFrom = groupBy(forward, 'from')
  const heights = toHeights(index, postorder.flatMap(idOf), forwardFrom)
  const mainOf = new Map<NodeId, NodeId>()
  for (const [id, list] of forwardFrom) {
    const main = mainLink(index.nodes.get(id), list, heights)
    if (main !== undefined) mainOf.set(id, main.to)
  }
  return {
    order: preorder.flatMap(idOf),
    topological: postorder.toReversed().flatMap(idOf),
    links,
    forwardFrom,
    forwardInto: groupBy(forward, 'to'),
    mainOf,
  }
}

type LinkDraft = Omit<FlowLink, 'isLoop'>

function linksFrom(index: ChartIndex, from: NodeId): readonly LinkDraft[] {
  const byTarget = new Map<NodeId, { from: NodeId; to: NodeId; outcomes: OutcomeId[]; isOtherwise: boolean }>()
  const drawnOutcomes = new Set<OutcomeId | undefined>()
  for (const { to, outcome } of index.edgesFrom.get(from) ?? []) {
    if (!index.nodes.has(to) || drawnOutcomes.has(outcome)) continue
    drawnOutcomes.add(outcome)
    const link = byTarget.get(to)
    if (link === undefined) byTarget.set(to, { from, to, outcomes: outcome === undefined ? [] : [outcome], isOtherwise: false })
    else if (outcome !== undefined) link.outcomes.push(outcome)
  }
  const otherwise = index.nodes.get(from)?.onlyFor?.otherwise
  if (otherwise !== undefined && index.nodes.has(otherwise) && !byTarget.has(otherwise)) {
    byTarget.set(otherwise, { from, to: otherwise, outcomes: [], isOtherwise: true })
  }
  return [...byTarget.values()]
}

function groupBy(links: readonly FlowLink[], end: 'from' | 'to'): ReadonlyMap<NodeId, readonly FlowLink[]> {
  const groups = new Map<NodeId, FlowLink[]>()
  for (const link of links) {
    const group = groups.get(link[end])
    if (group === undefined) groups.set(link[end], [link])
    else group.push(link)
  }
  return groups
}

/** Most checks and readings on any forward way from a node, the node included; `postorder` has every node after those it leads to. */
function toHeights(index: ChartIndex, postorder: readonly NodeId[], forwardFrom: ReadonlyMap<NodeId, readonly FlowLink[]>): ReadonlyMap<NodeId, number> {
  const heights = new Map<NodeId, number>()
  for (const id of postorder) {
    const kind = index.nodes.get(id)?.kind
    const below = Math.max(0, ...(forwardFrom.get(id) ?? []).map(({ to }) => heights.get(to) ?? 0))
    heights.set(id, below + (kind === 'check' || kind === 'reading' ? 1 : 0))
  }
  return heights
}

/** How much an outcome asks for the straight line: what is as it should be first, then what is reproduced, then what merely joins the service list. */
function rankOfLink(node: DecisionNode, link: FlowLink): number {
  const outcomes = node.outcomes.filter(({ id }) => link.outcomes.includes(id))
  if (node.kind === 'proof') return outcomes.some(({ confirms }) => confirms === true) ? 3 : 0
  if (outcomes.some(({ normal }) => normal === true)) return 0
  if (outcomes.some(({ reproduced }) => reproduced === true)) return 0
  return outcomes.some(({ serviceable }) => serviceable === true) ? 1 : 2
}

/** The link that goes straight down: the best ranked one, unless another leads over far more checks and so is the chart's main line. */
function mainLink(node: ChartNode | undefined, links: readonly FlowLink[], heights: ReadonlyMap<NodeId, number>): FlowLink | undefined {
  const own = links.filter(({ isOtherwise }) => !isOtherwise)
  const [first] = own
  if (node === undefined || first === undefined || !isDecision(node)) return first ?? links[0]
  const heightOf = (link: FlowLink): number => heights.get(link.to) ?? 0
  const ranked = own.toSorted((a, b) => rankOfLink(node, a) - rankOfLink(node, b))
  const [best = first] = ranked
  if (node.kind === 'proof') return rankOfLink(node, best) < 3 ? best : undefined
  const longest = ranked.reduce((most, link) => (heightOf(link) > heightOf(most) ? link : most), best)
  const isLonger = heightOf(longest) >= heightOf(best) + longSideWay || rankOfLink(node, best) === 2
  return isLonger ? longest : best
}
