import { describe, expect, test } from 'vitest'
import { forwardGraph, listEdges, onCycle, strongComponents, toDigraph, type Digraph } from '#shared/chart/digraph.ts'
import { dominanceFrontiers, dominators, dominatorsOf, entry, postDominators, unreached } from '#shared/chart/dominance.ts'

/** "5>4 4>1" with whatever names, as a graph, and the way back from numbers to names. */
function graphOf(edges: string): { graph: Digraph; names: string[]; of: (name: string) => number } {
  const pairs = edges.split(' ').map((edge) => edge.split('>') as [string, string])
  const names = [...new Set(pairs.flat())].sort()
  const of = (name: string) => names.indexOf(name)
  return {
    graph: toDigraph(
      names.length,
      pairs.map(([from, to]) => [of(from), of(to)] as const),
    ),
    names,
    of,
  }
}

/** A dominator tree as { node: immediate dominator }, the roots left out. */
function treeOf(tree: Int32Array, names: readonly string[]): Record<string, string> {
  return Object.fromEntries(names.flatMap((name, number) => ((tree[number] ?? unreached) >= 0 ? [[name, names[tree[number] ?? 0] ?? '']] : [])))
}

function frontiersOf(edges: string, root: string): Record<string, string[]> {
  const { graph, names, of } = graphOf(edges)
  const frontiers = dominanceFrontiers(graph, dominators(graph, [of(root)]), [of(root)])
  return Object.fromEntries(names.map((name, number) => [name, (frontiers[number] ?? []).map((node) => names[node] ?? '')]))
}

function idomOf(edges: string, root: string): Record<string, string> {
  const { graph, names, of } = graphOf(edges)
  return treeOf(dominators(graph, [of(root)]), names)
}

function postIdomOf(edges: string, exit: string): Record<string, string> {
  const { graph, names, of } = graphOf(edges)
  return treeOf(postDominators(graph, [of(exit)]), names)
}

function componentsOf(edges: string): string[] {
  const { graph, names } = graphOf(edges)
  const { of, count } = strongComponents(graph)
  return Array.from({ length: count }, (_, component) => names.filter((_, number) => of[number] === component).join(' ')).sort()
}

// K. Cooper, T. Harvey, K. Kennedy, "A Simple, Fast Dominance Algorithm", 2001 (Rice University report, 2006), figures 2 and 4.
// Edges and results read as the NetworkX project codes them in its dominance tests.
describe('Cooper, Harvey, Kennedy, A Simple, Fast Dominance Algorithm (2001)', () => {
  const figure2 = '5>4 5>3 4>1 3>2 1>2 2>1'
  test('figure 2: every node is dominated by the root alone (read)', () => {
    expect(idomOf(figure2, '5')).toEqual({ 1: '5', 2: '5', 3: '5', 4: '5' })
  })
  test('figure 2: dominance frontiers (read)', () => {
    expect(frontiersOf(figure2, '5')).toEqual({ 1: ['2'], 2: ['1'], 3: ['2'], 4: ['1'], 5: [] })
  })
  const figure4 = '6>5 6>4 5>1 4>2 4>3 1>2 2>1 2>3 3>2'
  test('figure 4: every node is dominated by the root alone (read)', () => {
    expect(idomOf(figure4, '6')).toEqual({ 1: '6', 2: '6', 3: '6', 4: '6', 5: '6' })
  })
  test('figure 4: dominance frontiers (read)', () => {
    expect(frontiersOf(figure4, '6')).toEqual({ 1: ['2'], 2: ['1', '3'], 3: ['2'], 4: ['2', '3'], 5: ['1'], 6: [] })
  })
})

// The control-flow graph drawn for "dominator relations" on Wikimedia Commons (Domrel), read as the NetworkX project codes it.
describe('a reducible flow graph with an exit (Wikimedia Commons, Domrel)', () => {
  const edges = '1>2 2>3 2>4 2>6 3>5 4>5 5>2'
  test('immediate dominators from node 1 (read)', () => {
    expect(idomOf(edges, '1')).toEqual({ 2: '1', 3: '2', 4: '2', 5: '2', 6: '2' })
  })
  test('immediate post-dominators from exit 6 (read)', () => {
    expect(postIdomOf(edges, '6')).toEqual({ 1: '2', 2: '6', 3: '5', 4: '5', 5: '2' })
  })
})

// The flow graph of the Boost Graph Library manual, page "lengauer_tarjan_dominator_tree", read as the NetworkX project codes it.
describe('the flow graph of the Boost Graph Library manual (dominator tree)', () => {
  const edges = '0>1 1>2 1>3 2>7 3>4 4>5 4>6 5>7 6>4'
  test('immediate dominators from node 0 (read)', () => {
    expect(idomOf(edges, '0')).toEqual({ 1: '0', 2: '1', 3: '1', 4: '3', 5: '4', 6: '4', 7: '1' })
  })
  test('immediate post-dominators from exit 7 (read)', () => {
    expect(postIdomOf(edges, '7')).toEqual({ 0: '1', 1: '7', 2: '7', 3: '4', 4: '5', 5: '7', 6: '4' })
  })
})

describe('strong components', () => {
  // NetworkX project, tests of strongly connected components.
  test('eight nodes in three components (NetworkX test file, read)', () => {
    expect(componentsOf('1>2 2>3 2>8 3>4 3>7 4>5 5>3 5>6 7>4 7>6 8>1 8>7')).toEqual(['1 2 8', '3 4 5 7', '6'])
  })
  test('five nodes in two components (NetworkX test file, read)', () => {
    expect(componentsOf('0>1 1>2 1>3 1>4 2>0 2>3 3>4 4>3')).toEqual(['0 1 2', '3 4'])
  })
  // T. Cormen, C. Leiserson, R. Rivest, C. Stein, "Introduction to Algorithms", 3rd edition (2009), figure 22.9.
  test('four components of figure 22.9 (Cormen et al., Introduction to Algorithms, 2009; from memory)', () => {
    expect(componentsOf('a>b b>c b>e b>f c>d c>g d>c d>h e>a e>f f>g g>f g>h h>h')).toEqual(['a b e', 'c d', 'f g', 'h'])
  })
  test('a node that leads to itself is a cycle, though its component has size 1 (own arithmetic)', () => {
    const { graph, names } = graphOf('g>h h>h')
    expect([...onCycle(graph)].map((mark, number) => `${names[number]}:${mark}`)).toEqual(['g:0', 'h:1'])
  })
})

test('with two roots a node on both routes is dominated by neither; a node without a route is told apart', () => {
  const { graph, of } = graphOf('a>c b>c c>d x>d')
  const tree = dominators(graph, [of('a'), of('b')])
  expect(tree[of('c')]).toBe(entry)
  expect(dominatorsOf(tree, of('d'))).toEqual([of('c')])
  expect(tree[of('x')]).toBe(unreached)
})

test('the forward graph drops exactly the edges that close a cycle, depth-first, edges in order', () => {
  const { graph, names, of } = graphOf('s>a a>b b>a b>c c>s a>c')
  const kept = listEdges(forwardGraph(graph, [of('s')])).map(([from, to]) => `${names[from]}>${names[to]}`)
  expect(kept.sort()).toEqual(['a>b', 'a>c', 'b>c', 's>a'])
})
