import { depthFirst, reverse, successorsOf, type Digraph } from './digraph.ts'

/** In a dominator tree: the entry before all roots. It stands for "no node", since the roots may be several. */
export const entry = -1
/** In a dominator tree: the node cannot be reached from the roots. */
export const unreached = -2

/**
 * The immediate dominator of every node: the last node, before it, that every route from the roots to it passes; `entry`
 * for a root and for a node that the roots reach by separate routes, `unreached` where no route leads.
 * K. Cooper, T. Harvey, K. Kennedy, "A Simple, Fast Dominance Algorithm" (2001), figure 3, on a graph with an entry added
 * before the roots. The predecessors of a node are intersected as one set, marking what was climbed, so that a node which
 * many checks lead to (an escalation) costs one climb, not one a predecessor.
 */
export function dominators(graph: Digraph, roots: readonly number[]): Int32Array {
  const { postorder } = depthFirst(graph, roots)
  const rank = new Int32Array(graph.size).fill(-1)
  postorder.forEach((node, index) => (rank[node] = index))
  const top = postorder.length
  // By postorder rank from here on; `top` is the entry, -1 is "not known yet".
  const above = new Int32Array(top + 1).fill(-1)
  above[top] = top
  const isRoot = new Uint8Array(top)
  for (const root of roots) isRoot[rank[root] ?? 0] = 1
  const into = reverse(graph)
  const climbed = new Int32Array(top + 1).fill(-1)
  let stamp = 0
  for (let changed = true; changed;) {
    changed = false
    for (let index = top - 1; index >= 0; index -= 1) {
      stamp += 1
      let meet = isRoot[index] === 1 ? top : -1
      for (const source of successorsOf(into, postorder[index] ?? 0)) {
        const from = rank[source] ?? -1
        if (from === -1 || above[from] === -1) continue
        meet = meet === -1 ? from : intersect(above, climbed, stamp, meet, from)
      }
      if (above[index] === meet) continue
      above[index] = meet
      changed = true
    }
  }
  const tree = new Int32Array(graph.size).fill(unreached)
  postorder.forEach((node, index) => (tree[node] = above[index] === top ? entry : (postorder[above[index] ?? 0] ?? entry)))
  return tree
}

/** Climbs two fingers until they meet; what carries the stamp was climbed before for the same node, so it lies under `meet`. */
function intersect(above: Int32Array, climbed: Int32Array, stamp: number, meet: number, from: number): number {
  let left = meet
  let right = from
  while (left !== right) {
    if (right < left) {
      if (climbed[right] === stamp) return left
      climbed[right] = stamp
      right = above[right] ?? left
    } else {
      climbed[left] = stamp
      left = above[left] ?? right
    }
  }
  return left
}

/** The immediate post-dominator of every node: the first node after it that every route from it to an exit passes. As `dominators`, on the graph turned round. */
export function postDominators(graph: Digraph, exits: readonly number[]): Int32Array {
  return dominators(reverse(graph), exits)
}

/** The dominators of a node in route order, itself left out; none for a node that is unreached. */
export function dominatorsOf(tree: Int32Array, node: number): number[] {
  const list: number[] = []
  for (let above = tree[node] ?? unreached; above >= 0; above = tree[above] ?? unreached) list.push(above)
  return list.reverse()
}

/**
 * What all of several nodes have among their dominators, in route order, the nodes themselves left out; unreached ones do
 * not count. Every node of the tree is climbed over at most once, however many nodes share it.
 */
export function commonDominators(tree: Int32Array, nodes: readonly number[]): number[] {
  const [first, ...others] = nodes.filter((node) => tree[node] !== unreached)
  if (first === undefined) return []
  const path = dominatorsOf(tree, first)
  const meetsAt = new Map(path.map((node, place) => [node, place]))
  let length = path.length
  for (const node of others) {
    const climbed: number[] = []
    let above = tree[node] ?? entry
    while (above >= 0 && !meetsAt.has(above)) {
      climbed.push(above)
      above = tree[above] ?? entry
    }
    const place = meetsAt.get(above) ?? -1
    for (const passed of climbed) meetsAt.set(passed, place)
    length = Math.min(length, place + 1)
  }
  return path.slice(0, length)
}

/**
 * The dominance frontier of every node: where its dominance ends, the nodes it does not strictly dominate though it
 * dominates a predecessor of theirs; ascending. Cooper, Harvey, Kennedy (2001), figure 5, the entry counting as a predecessor of the roots.
 */
export function dominanceFrontiers(graph: Digraph, tree: Int32Array, roots: readonly number[]): number[][] {
  const frontiers: number[][] = Array.from({ length: graph.size }, () => [])
  const into = reverse(graph)
  const isRoot = new Set(roots)
  for (let node = 0; node < graph.size; node += 1) {
    const stop = tree[node] ?? unreached
    if (stop === unreached) continue
    const sources = successorsOf(into, node).filter((source) => tree[source] !== unreached)
    if (sources.length + (isRoot.has(node) ? 1 : 0) < 2) continue
    for (const source of sources) {
      for (let runner = source; runner >= 0 && runner !== stop; runner = tree[runner] ?? unreached) {
        const frontier = frontiers[runner]
        if (frontier === undefined || frontier.at(-1) === node) break
        frontier.push(node)
      }
    }
  }
  return frontiers
}
