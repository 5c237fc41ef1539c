import fc from 'fast-check'
import { expect, test } from 'vitest'
import { reachableFrom, toDigraph } from '../digraph.ts'
import { essentialEdges } from './essential-edges.ts'

test('an edge that a longer way implies is left out, the others stay once', () => {
  expect(essentialEdges(4, [[0, 1], [1, 2], [0, 2], [0, 1], [2, 3], [0, 3]]).toSorted()).toEqual([[0, 1], [1, 2], [2, 3]])
})

test('the same nodes can be reached from every node, and no edge can be spared', () => {
  const dags = fc.integer({ min: 1, max: 14 }).chain((size) => fc.tuple(fc.constant(size), fc.array(fc.tuple(fc.nat(size - 1), fc.nat(size - 1)), { maxLength: 40 })))
  fc.assert(
    fc.property(dags, ([size, pairs]) => {
      const edges = pairs.filter(([a, b]) => a < b)
      const kept = essentialEdges(size, edges)
      const reach = (list: readonly (readonly [number, number])[]): string[] => Array.from({ length: size }, (_, node) => reachableFrom(toDigraph(size, list), [node]).join(''))
      expect(reach(kept)).toEqual(reach(edges))
      kept.forEach((_, at) => expect(reach(kept.filter((__, other) => other !== at))).not.toEqual(reach(edges)))
    }),
  )
})

test('a ring loses the edge that closes it', () => {
  expect(essentialEdges(3, [[0, 1], [1, 2], [2, 0], [1, 1]])).toHaveLength(2)
})
