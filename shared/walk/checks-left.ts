import { depthFirst, toDigraph } from '#shared/chart/digraph.ts'
import { isDecision } from '#shared/chart/graph.ts'
import { locate, type PinnedCharts } from './pinned-charts.ts'
import { positionOf } from './record.ts'
import { positionKey, waysOn } from './route.ts'
import type { OpenWalk, Position } from './state.ts'

/** How many checks can still come, this page's included, on the shortest and on the longest way to an end. */
export interface ChecksLeft {
  readonly shortest: number
  readonly longest: number
  /** A loop, or a jump that does not come back, is ahead: it may take more than `shortest` says. */
  readonly isAtLeast: boolean
}

/** The positions ahead as a graph; a way that ends, or leaves by a one-way jump, has no edge. */
interface Ahead {
  readonly positions: readonly Position[]
  readonly edges: readonly (readonly [number, number])[]
  /** Positions from which some way comes to an end at once. */
  readonly ending: ReadonlySet<number>
  /** Positions from which some way leaves for another chart and does not come back. */
  readonly leaving: ReadonlySet<number>
}

function graphAhead(charts: PinnedCharts, walk: OpenWalk): Ahead {
  const positions: Position[] = [positionOf(walk)]
  const numberOf = new Map([[positionKey(positionOf(walk)), 0]])
  const edges: (readonly [number, number])[] = []
  const ending = new Set<number>()
  const leaving = new Set<number>()
  for (let from = 0; from < positions.length; from += 1) {
    const position = positions[from]
    if (position === undefined) break
    if (locate(charts, walk.pins, position.node)?.node.kind === 'jump') leaving.add(from)
    const ways = waysOn(charts, walk, position)
    if (ways.length === 0) ending.add(from)
    for (const way of ways) {
      if (way.wentOneWay) leaving.add(from)
      if (way.wentOneWay || way.deadEnd !== null) {
        ending.add(from)
        continue
      }
      const key = positionKey(way.position)
      const to = numberOf.get(key) ?? positions.length
      if (to === positions.length) {
        numberOf.set(key, to)
        positions.push(way.position)
      }
      edges.push([from, to])
    }
  }
  return { positions, edges, ending, leaving }
}

/**
 * Checks left in the forward graph from where the walk stands: depth-first, outcomes in order, edges that close a loop dropped. Nothing is
 * left once a cause is reached.
 */
export function checksLeft(charts: PinnedCharts, walk: OpenWalk): ChecksLeft {
  if (walk.phase !== 'at-node') return { shortest: 0, longest: 0, isAtLeast: false }
  const { positions, edges, ending, leaving } = graphAhead(charts, walk)
  const graph = toDigraph(positions.length, edges)
  const { postorder, closing } = depthFirst(graph, [0])
  const left: ChecksLeft[] = []
  for (const from of postorder) {
    const start = graph.rows[from] ?? 0
    const targets = [...graph.targets.subarray(start, graph.rows[from + 1])]
    const onward = targets.flatMap((target, index) => (closing.has(start + index) ? [] : (left[target] ?? [])))
    const closes = onward.length < targets.length
    const ends = ending.has(from) || onward.length === 0 ? [0] : []
    const position = positions[from]
    const node = position && locate(charts, walk.pins, position.node)?.node
    const own = node && isDecision(node) ? 1 : 0
    left[from] = {
      shortest: own + Math.min(...ends, ...onward.map(({ shortest }) => shortest)),
      longest: own + Math.max(...ends, ...onward.map(({ longest }) => longest)),
      isAtLeast: closes || leaving.has(from) || onward.some(({ isAtLeast }) => isAtLeast),
    }
  }
  return left[0] ?? { shortest: 0, longest: 0, isAtLeast: false }
}
