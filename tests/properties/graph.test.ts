import fc from 'fast-check'
import { expect, test } from 'vitest'
import { depthFirst, forwardGraph, listEdges, onCycle, reachableFrom, strongComponents, successorsOf, toDigraph, type Digraph } from '#shared/chart/digraph.ts'
import { commonDominators, dominanceFrontiers, dominators, dominatorsOf, unreached } from '#shared/chart/dominance.ts'

/** Small graphs with loops, parallel edges, unreachable parts and one to three roots. */
const rooted = fc.integer({ min: 1, max: 9 }).chain((size) => {
  const node = fc.nat(size - 1)
  return fc.record({
    graph: fc.array(fc.tuple(node, node), { maxLength: 24 }).map((edges) => toDigraph(size, edges)),
    roots: fc.uniqueArray(node, { minLength: 1, maxLength: 3 }),
  })
})

const everyNode = (graph: Digraph) => Array.from({ length: graph.size }, (_, node) => node)
const without = (graph: Digraph, node: number) => Uint8Array.from(everyNode(graph), (other) => (other === node ? 1 : 0))

/** By definition: d dominates n if, d taken away, no route from the roots leads to n any more. */
function naiveDominators(graph: Digraph, roots: readonly number[], node: number): number[] {
  return everyNode(graph).filter((other) => other !== node && reachableFrom(graph, roots, without(graph, other))[node] !== 1)
}

test('dominators are the nodes without which no route leads on', () => {
  fc.assert(
    fc.property(rooted, ({ graph, roots }) => {
      const tree = dominators(graph, roots)
      const reached = reachableFrom(graph, roots)
      for (const node of everyNode(graph)) {
        if (reached[node] !== 1) expect(tree[node]).toBe(unreached)
        else expect(dominatorsOf(tree, node).sort()).toEqual(naiveDominators(graph, roots, node).sort())
      }
    }),
    { numRuns: 400 },
  )
})

test('what several nodes have in common among their dominators is what each of them has', () => {
  fc.assert(
    fc.property(rooted, fc.array(fc.nat(8), { minLength: 1, maxLength: 4 }), ({ graph, roots }, picks) => {
      const tree = dominators(graph, roots)
      const nodes = picks.map((pick) => pick % graph.size).filter((node) => tree[node] !== unreached)
      const [first = [], ...others] = nodes.map((node) => dominatorsOf(tree, node))
      expect(commonDominators(tree, nodes)).toEqual(first.filter((above) => others.every((list) => list.includes(above))))
    }),
    { numRuns: 400 },
  )
})

test('a dominance frontier is where dominance ends', () => {
  fc.assert(
    fc.property(rooted, ({ graph, roots }) => {
      const tree = dominators(graph, roots)
      const reached = everyNode(graph).filter((node) => tree[node] !== unreached)
      const strictly = new Map(reached.map((node) => [node, new Set(dominatorsOf(tree, node))]))
      const frontiers = dominanceFrontiers(graph, tree, roots)
      for (const node of reached) {
        const reflexively = (other: number) => other === node || strictly.get(other)?.has(node) === true
        const expected = reached.filter(
          (join) => reached.some((source) => successorsOf(graph, source).includes(join) && reflexively(source)) && strictly.get(join)?.has(node) !== true,
        )
        expect(frontiers[node]).toEqual(expected)
      }
    }),
    { numRuns: 400 },
  )
})

test('two nodes share a component exactly when each reaches the other', () => {
  fc.assert(
    fc.property(rooted, ({ graph }) => {
      const { of } = strongComponents(graph)
      const reach = everyNode(graph).map((node) => reachableFrom(graph, [node]))
      for (const left of everyNode(graph))
        for (const right of everyNode(graph)) expect(of[left] === of[right]).toBe(reach[left]?.[right] === 1 && reach[right]?.[left] === 1)
      for (const [from, to] of listEdges(graph)) expect(of[from]).toBeGreaterThanOrEqual(of[to] ?? 0)
    }),
  )
})

test('the forward graph has no cycle and reaches all that the graph reaches', () => {
  fc.assert(
    fc.property(rooted, ({ graph, roots }) => {
      const forward = forwardGraph(graph, roots)
      expect(onCycle(forward).includes(1)).toBe(false)
      expect(reachableFrom(forward, roots)).toEqual(reachableFrom(graph, roots))
      const { preorder, postorder } = depthFirst(graph, roots)
      expect([...preorder].sort()).toEqual([...postorder].sort())
    }),
  )
})

test('a route of 200 000 nodes overflows nothing, and a node that all of them lead to costs one climb', () => {
  const size = 200_000
  const end = size - 1
  const graph = toDigraph(
    size,
    everyNode({ size } as Digraph).flatMap((node) =>
      node >= end - 1
        ? [[node, end] as const]
        : ([
            [node, node + 1],
            [node, end],
          ] as const),
    ),
  )
  const tree = dominators(graph, [0])
  expect(tree[end]).toBe(0)
  expect(tree[end - 1]).toBe(end - 2)
  expect(strongComponents(graph).count).toBe(size)
  expect(depthFirst(graph, [0]).preorder).toHaveLength(size)
})
