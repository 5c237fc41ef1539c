import { splitPlace, type ChartId, type NodeId, type OutcomeId, type Place } from '#shared/lib/ids.ts'
import type { Tone } from './marks.ts'

/** One way from node to node, as it was taken; `outcome` is `null` on the way on of a step, and of a node that was passed. */
export interface WalkedEdge {
  readonly from: NodeId
  readonly to: NodeId
  readonly outcome: OutcomeId | null
}

/** A walk as it is drawn on its chart: what it passed in its order, what it was stepped back from, and where it stands. */
export interface PictureRoute {
  readonly nodes: readonly NodeId[]
  readonly edges: readonly WalkedEdge[]
  /** Passed and stepped back from; what is also in `nodes` or `edges` counts as walked. */
  readonly spentNodes?: readonly NodeId[]
  readonly spentEdges?: readonly WalkedEdge[]
  /** Drawn with the node wash: where the walk stands, or what it found. */
  readonly current?: NodeId
}

/** One piece of a walk's route over its charts. */
export interface RouteStretch {
  readonly from: Place
  readonly to: Place
  readonly outcome: OutcomeId | null
  readonly isSpent: boolean
}

/** The part of a route that runs on one chart. Where a jump led into it or out of it, the node on this side still counts. */
export function routeOnChart(chartId: ChartId, stretches: readonly RouteStretch[], current: Place | null): PictureRoute {
  const nodes = new Set<NodeId>()
  const spentNodes = new Set<NodeId>()
  const edges: WalkedEdge[] = []
  const spentEdges: WalkedEdge[] = []
  for (const { from, to, outcome, isSpent } of stretches) {
    const ends = [splitPlace(from), splitPlace(to)] as const
    for (const end of ends) if (end.chartId === chartId) (isSpent ? spentNodes : nodes).add(end.nodeId)
    if (ends.every((end) => end.chartId === chartId)) (isSpent ? spentEdges : edges).push({ from: ends[0].nodeId, to: ends[1].nodeId, outcome })
  }
  const stand = current === null ? null : splitPlace(current)
  const standsHere = stand !== null && stand.chartId === chartId
  return { nodes: [...nodes], edges, spentNodes: [...spentNodes], spentEdges, ...(standsHere ? { current: stand.nodeId } : {}) }
}

/** The tones of a picture's parts. */
export interface RouteTones {
  node(id: NodeId): Tone
  /** The tone of a line: that of the strongest of the ways that share it. */
  link(link: { readonly from: NodeId; readonly to: NodeId; readonly outcomes: readonly OutcomeId[] }): Tone
  balloon(from: NodeId, outcome: OutcomeId): Tone
}

/** How every node, line and balloon stands to the route; all `plain` without one. */
export function toTones(route: PictureRoute | undefined): RouteTones {
  if (route === undefined) return { node: () => 'plain', link: () => 'plain', balloon: () => 'plain' }
  const nodes = new Set(route.nodes)
  const spentNodes = new Set(route.spentNodes)
  const isIn = (edges: readonly WalkedEdge[] | undefined, from: NodeId, matches: (edge: WalkedEdge) => boolean): boolean => edges?.some((edge) => edge.from === from && matches(edge)) === true
  const toneOf = (from: NodeId, matches: (edge: WalkedEdge) => boolean): Tone => (isIn(route.edges, from, matches) ? 'walked' : isIn(route.spentEdges, from, matches) ? 'spent' : 'quiet')
  return {
    node: (id) => (route.current === id ? 'current' : nodes.has(id) ? 'walked' : spentNodes.has(id) ? 'spent' : 'quiet'),
    link: ({ from, to, outcomes }) => toneOf(from, (edge) => (edge.outcome === null ? edge.to === to : outcomes.includes(edge.outcome))),
    balloon: (from, outcome) => toneOf(from, (edge) => edge.outcome === outcome),
  }
}

/** What a tone says in words, for those who do not see it. */
export const toneWords: Readonly<Record<Tone, string>> = { plain: '', quiet: '', spent: 'stepped back from', walked: 'on the route', current: 'the route stands here' }
