import { describe, expect, test } from 'vitest'
import { isDecision, chartNumbers, follow, indexChart, physicalCheck, toChartGraph } from './graph.ts'
import type { NodeId, OutcomeId } from '#shared/lib/ids.ts'
import { ask, buildChart, cause, check, jump, proof, reproducing, soundSketch, start, type ChartSketch } from '#tests/support/chart-builder.ts'

const index = (sketch: ChartSketch) => indexChart(buildChart(sketch))
const node = (id: string) => id as NodeId

describe('the index of a chart', () => {
  test('edges stand in the order of the outcomes, however the file has them', () => {
    const chart = index({ ...soundSketch, edges: [...soundSketch.edges].reverse() })
    expect(chart.edgesFrom.get(node('n2'))?.map((edge) => edge.outcome)).toEqual(['good', 'bad'])
    expect(
      chart.edgesInto
        .get(node('ask'))
        ?.map((edge) => edge.from)
        .sort(),
    ).toEqual(['n2', 'p2'])
  })

  test('an outcome leads where its edge says, or nowhere', () => {
    const chart = index(soundSketch)
    expect(follow(chart, node('n2'), 'bad' as OutcomeId)).toBe('p2')
    expect(follow(chart, node('s'))).toBe('n1')
    expect(follow(chart, node('n2'))).toBeUndefined()
    expect(follow(chart, node('n2'), 'odd' as OutcomeId)).toBeUndefined()
  })

  test('of two nodes with one id the first counts', () => {
    const chart = index({ nodes: [start(), check('n1'), ask('n1')], edges: ['s > n1', 's > n1'] })
    expect(chart.nodes.get(node('n1'))?.kind).toBe('check')
    const { graph, numberOf } = toChartGraph(chart)
    expect([...graph.targets]).toEqual([1, 1])
    expect([...numberOf]).toEqual([
      ['s', 0],
      ['n1', 1],
    ])
  })

  test('a jump into its own chart is a way on, and so is the node that takes over on another machine', () => {
    const chart = index({
      nodes: [start(), check('n1', undefined, { onlyFor: { classes: ['mower'], otherwise: 'ask' } }), jump('j', 'under-test', { at: 'n1' }), ask()],
      edges: ['s > n1', 'n1.bad > j'],
    })
    const { graph, ids } = toChartGraph(chart)
    const named = ids.map((id, number) => `${id}: ${[...graph.targets.slice(graph.rows[number], graph.rows[number + 1])].map((to) => ids[to]).join(' ')}`)
    expect(named).toEqual(['s: n1', 'n1: j ask', 'j: n1', 'ask: '])
  })
})

describe('one physical check', () => {
  const physical = (nodes: ChartSketch['nodes']) => {
    const chart = index({ id: 'x', nodes, edges: [] })
    return chart.chart.nodes.filter(isDecision).map((entry) => physicalCheck(chart, entry))
  }
  test('is named by its own id, by the node that it is the same as, or by its place', () => {
    expect(
      physical([check('a', undefined, { checkId: 'light' }), check('b', undefined, { sameAs: 'a' }), check('c', undefined, { sameAs: 'd' }), check('d')]),
    ).toEqual(['light', 'light', 'x/d', 'x/d'])
  })
  test('survives a ring and a gap in the shorthand', () => {
    expect(physical([check('a', undefined, { sameAs: 'b' }), check('b', undefined, { sameAs: 'a' }), check('c', undefined, { sameAs: 'nowhere' })])).toEqual([
      'x/a',
      'x/a',
      'x/c',
    ])
  })
})

describe('check numbers', () => {
  const numbers = (sketch: ChartSketch) => Object.fromEntries(chartNumbers(index(sketch)))
  test('an id that is n and a number gives it, a step or a proof stands beside the node that leads to it, the others take what is free, depth-first; a start has none', () => {
    expect(numbers(soundSketch)).toEqual({ n1: '1', n2: '2', ask: '3', p2: '2a', c2: '4', a0: '5' })
  })
  test('letters belong to the number', () => {
    const nodes = [start(), reproducing('n9'), check('n9b'), proof('p9', 'worn'), cause('c', 'worn')]
    expect(numbers({ nodes, edges: ['s > n9', 'n9.yes > n9b', 'n9.no > c', 'n9b.bad > p9', 'p9.gone > c'] })).toEqual({ n9: '9', n9b: '9b', p9: '9c', c: '1' })
  })
  test('no two nodes carry one number, and nodes without a route come last', () => {
    const nodes = [ask('lost'), start(), check('n01'), check('n1'), check('x')]
    expect(numbers({ nodes, edges: ['s > x', 'x.good > n1', 'x.bad > n01'] })).toEqual({ x: '2', n1: '1', n01: '3', lost: '4' })
  })
})
