import { depthFirst, listEdges, successorsOf, toDigraph } from '../digraph.ts'

/** Larger graphs keep their implied edges: finding them takes memory in the square of the size. */
const mostNodes = 3000

/**
 * The edges of an acyclic graph that no longer way implies (its transitive reduction), each once; layouts from them have the same ranks at a fraction of
 * the work. Edges that close a cycle, which faulty input can have, are left out. Nodes are 0 to `size` - 1.
 */
export function essentialEdges(size: number, edges: readonly (readonly [number, number])[]): readonly (readonly [number, number])[] {
  const given = toDigraph(size, edges)
  const { closing, postorder } = depthFirst(given, Array.from({ length: size }, (_, node) => node))
  const graph = toDigraph(size, listEdges(given).filter((_, place) => !closing.has(place)))
  const place = new Int32Array(size)
  postorder.forEach((node, at) => (place[node] = size - at))
  const kept: (readonly [number, number])[] = []
  const reached: Uint8Array[] = []
  for (const node of postorder) {
    const nearestFirst = [...new Set(successorsOf(graph, node))].sort((a, b) => (place[a] ?? 0) - (place[b] ?? 0))
    const seen = new Uint8Array(size <= mostNodes ? size : 0)
    for (const next of nearestFirst) {
      if (seen[next] === 1) continue
      kept.push([node, next])
      seen[next] = 1
      reached[next]?.forEach((flag, other) => flag === 1 && (seen[other] = 1))
    }
    reached[node] = seen
  }
  return kept
}
