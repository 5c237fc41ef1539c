/**
 * A directed graph whose nodes are the numbers 0 to `size` - 1, stored as compressed rows: the targets of node `v` are
 * `targets[rows[v]]` up to, not including, `targets[rows[v + 1]]`, in the order in which its edges were given.
 */
export type Digraph = { readonly size: number; readonly rows: Int32Array; readonly targets: Int32Array }

/** Builds a graph from pairs; edges of one node keep their order, and parallel edges and self-loops are kept. */
export function toDigraph(size: number, edges: readonly (readonly [from: number, to: number])[]): Digraph {
  const rows = new Int32Array(size + 1)
  for (const [from] of edges) rows[from + 1] = at(rows, from + 1) + 1
  for (let node = 0; node < size; node += 1) rows[node + 1] = at(rows, node + 1) + at(rows, node)
  const next = rows.slice(0, size)
  const targets = new Int32Array(edges.length)
  for (const [from, to] of edges) {
    targets[at(next, from)] = to
    next[from] = at(next, from) + 1
  }
  return { size, rows, targets }
}

/** The same graph with every edge turned round. */
export function reverse(graph: Digraph): Digraph {
  return toDigraph(
    graph.size,
    listEdges(graph).map(([from, to]) => [to, from] as const),
  )
}

/** All edges, by node and then in their order. */
export function listEdges(graph: Digraph): (readonly [from: number, to: number])[] {
  const edges: (readonly [number, number])[] = []
  for (let node = 0; node < graph.size; node += 1) for (const target of successorsOf(graph, node)) edges.push([node, target])
  return edges
}

/** The targets of a node's edges, in their order. */
export function successorsOf(graph: Digraph, node: number): Int32Array {
  return graph.targets.subarray(at(graph.rows, node), at(graph.rows, node + 1))
}

/** Marks (1) what can be reached from the roots, the roots included. `blocked` nodes are neither entered nor left. */
export function reachableFrom(graph: Digraph, roots: Iterable<number>, blocked?: Uint8Array): Uint8Array {
  const seen = new Uint8Array(graph.size)
  const stack: number[] = []
  const enter = (node: number) => {
    if (seen[node] === 1 || blocked?.[node] === 1) return
    seen[node] = 1
    stack.push(node)
  }
  for (const root of roots) enter(root)
  for (let node = stack.pop(); node !== undefined; node = stack.pop()) successorsOf(graph, node).forEach(enter)
  return seen
}

/** What a depth-first walk saw: nodes as they were entered, nodes as they were left, and the edges that close a cycle. */
export type DepthFirst = {
  readonly preorder: readonly number[]
  readonly postorder: readonly number[]
  /** Indexes into `targets` of the edges into a node that was still on the path. */
  readonly closing: ReadonlySet<number>
}

/** Depth-first from the roots in order, each node's edges in order; without recursion, so depth is bounded by memory alone. */
export function depthFirst(graph: Digraph, roots: Iterable<number>): DepthFirst {
  const fresh = 0
  const open = 1
  const done = 2
  const state = new Uint8Array(graph.size)
  const next = graph.rows.slice()
  const preorder: number[] = []
  const postorder: number[] = []
  const closing = new Set<number>()
  const path: number[] = []
  const enter = (node: number) => {
    state[node] = open
    preorder.push(node)
    path.push(node)
  }
  for (const root of roots) {
    if (state[root] === fresh) enter(root)
    for (let node = path.at(-1); node !== undefined; node = path.at(-1)) {
      const edge = at(next, node)
      if (edge === at(graph.rows, node + 1)) {
        state[node] = done
        postorder.push(node)
        path.pop()
        continue
      }
      next[node] = edge + 1
      const target = at(graph.targets, edge)
      if (state[target] === fresh) enter(target)
      else if (state[target] === open) closing.add(edge)
    }
  }
  return { preorder, postorder, closing }
}

/** The graph without the edges that close a cycle in the depth-first walk from the roots, and without what it never meets. */
export function forwardGraph(graph: Digraph, roots: Iterable<number>): Digraph {
  const { preorder, closing } = depthFirst(graph, roots)
  const edges: (readonly [number, number])[] = []
  for (const node of preorder) {
    for (let edge = at(graph.rows, node); edge < at(graph.rows, node + 1); edge += 1) if (!closing.has(edge)) edges.push([node, at(graph.targets, edge)])
  }
  return toDigraph(graph.size, edges)
}

/**
 * The strong component of every node, numbered in reverse topological order (an edge between components leads to the
 * lower number). R. Tarjan, "Depth-first search and linear graph algorithms", SIAM J. Comput. 1 (1972), without recursion.
 */
export function strongComponents(graph: Digraph): { readonly of: Int32Array; readonly count: number } {
  const order = new Int32Array(graph.size).fill(-1)
  const low = new Int32Array(graph.size)
  const of = new Int32Array(graph.size).fill(-1)
  const next = graph.rows.slice()
  const path: number[] = []
  const pending: number[] = []
  let clock = 0
  let count = 0
  const enter = (node: number) => {
    order[node] = clock
    low[node] = clock
    clock += 1
    path.push(node)
    pending.push(node)
  }
  const leave = (node: number) => {
    path.pop()
    const above = path.at(-1)
    if (above !== undefined) low[above] = Math.min(at(low, above), at(low, node))
    if (at(low, node) !== at(order, node)) return
    for (let member = pending.pop(); member !== undefined; member = pending.pop()) {
      of[member] = count
      if (member === node) break
    }
    count += 1
  }
  for (let root = 0; root < graph.size; root += 1) {
    if (order[root] === -1) enter(root)
    for (let node = path.at(-1); node !== undefined; node = path.at(-1)) {
      const edge = at(next, node)
      if (edge === at(graph.rows, node + 1)) {
        leave(node)
        continue
      }
      next[node] = edge + 1
      const target = at(graph.targets, edge)
      if (order[target] === -1) enter(target)
      else if (of[target] === -1) low[node] = Math.min(at(low, node), at(order, target))
    }
  }
  return { of, count }
}

/** Marks (1) every node that lies on a cycle; a self-loop is one. */
export function onCycle(graph: Digraph): Uint8Array {
  const { of, count } = strongComponents(graph)
  const members = new Int32Array(count)
  for (const component of of) members[component] = at(members, component) + 1
  const marks = new Uint8Array(graph.size)
  for (let node = 0; node < graph.size; node += 1) {
    if (at(members, at(of, node)) > 1 || successorsOf(graph, node).includes(node)) marks[node] = 1
  }
  return marks
}

/** Reads a typed array at an index that is in range by construction. */
function at(array: Int32Array, index: number): number {
  return array[index] ?? 0
}
