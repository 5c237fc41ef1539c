import { describe, expect, test } from 'vitest'
import type { CauseId, ChartId } from '#shared/lib/ids.ts'
import { ask, back, buildChart, cause, check, jump, soundSketch, start, step, type ChartSketch } from '#tests/support/chart-builder.ts'
import { mustPass, reachOf, resolveJump, toChartSet } from './chart-set.ts'

const id = (text: string) => text as ChartId

function charts(...sketches: ChartSketch[]) {
  return toChartSet(sketches.map(buildChart))
}

const caller: ChartSketch = {
  id: 'caller',
  nodes: [start(), check('n1', ['good', 'bad', 'lost']), jump('j1', 'sub', { returns: true }), jump('j2', 'other', { at: 'n5' }), ask()],
  edges: ['s > n1', 'n1.good > j1', 'j1 > ask', 'n1.bad > j2', 'n1.lost > ask'],
}
const sub: ChartSketch = { id: 'sub', nodes: [start(), check('k1'), back(), cause('c', 'seal')], edges: ['s > k1', 'k1.good > back', 'k1.bad > c'] }
const other: ChartSketch = { id: 'other', nodes: [start(), check('n5'), ask(), jump('j', 'far')], edges: ['s > n5', 'n5.good > ask', 'n5.bad > j'] }

describe('charts joined by jumps', () => {
  test('the reach of a chart is itself and, breadth first, whatever its jumps lead to; missing charts are left out', () => {
    const all = charts(other, sub, caller)
    expect([...reachOf(id('caller'), (name) => all.get(name)).keys()]).toEqual(['caller', 'sub', 'other'])
    expect([...reachOf(id('nowhere'), (name) => all.get(name)).keys()]).toEqual([])
  })

  test('a jump arrives at the node it names, else at the single start', () => {
    const all = charts(caller, sub, other)
    const arrivals = [...(all.get(id('caller'))?.nodes.values() ?? [])].flatMap((node) => (node.kind === 'jump' ? [resolveJump(all, node)] : []))
    expect(arrivals.map((target) => (target.found ? `${target.chart.id}/${target.node.id}` : target.why))).toEqual(['sub/s', 'other/n5'])
  })

  test.each([
    [{ chart: 'nowhere' }, 'chart-missing'],
    [{ chart: 'sub', at: 'k9' }, 'node-missing'],
    [{ chart: 'two' }, 'no-single-start'],
    [{ chart: undefined, pick: 'symptom' }, 'pick'],
    [{ chart: undefined }, 'no-chart-named'],
  ])('a jump %j that arrives nowhere says why', (fields, why) => {
    const two: ChartSketch = { id: 'two', nodes: [start('s1'), start('s2'), ask()], edges: ['s1 > ask', 's2 > ask'] }
    const all = charts({ id: 'from', nodes: [start(), { id: 'j', kind: 'jump', ...fields }], edges: ['s > j'] }, sub, two)
    const node = all.get(id('from'))?.chart.nodes[1]
    expect(node?.kind === 'jump' && resolveJump(all, node)).toEqual({ found: false, why })
  })
})

describe('what every route to a cause passes', () => {
  const musts = (sketch: ChartSketch, ...others: ChartSketch[]) => {
    const all = charts(sketch, ...others)
    const root = all.get(id(sketch.id ?? 'under-test'))
    if (root === undefined) throw new Error('no such chart')
    return Object.fromEntries(mustPass(root, all))
  }

  test('the nodes that no route can avoid, in route order', () => {
    expect(musts(soundSketch)).toEqual({ 'filter-packed': ['s', 'n1', 'n2', 'p2'] })
  })

  test('a safety step on one of two routes is no must', () => {
    const nodes = [start(), check('n1'), step('safe'), check('n2'), cause('c', 'band-drags'), ask()]
    const edges = ['s > n1', 'n1.good > safe', 'safe > n2', 'n1.bad > n2', 'n2.bad > c', 'n2.good > ask']
    expect(musts({ nodes, edges })).toEqual({ 'band-drags': ['s', 'n1', 'n2'] })
  })

  test('of a cause with several nodes, what all of them share; of several starts, neither', () => {
    const nodes = [start('s1'), start('s2'), check('n1'), check('n2'), cause('c1', 'worn'), cause('c2', 'worn')]
    expect(musts({ nodes, edges: ['s1 > n1', 's2 > n1', 'n1.good > n2', 'n1.bad > c1', 'n2.bad > c2', 'n2.good > c2'] })).toEqual({ worn: ['n1'] })
  })

  test('on another machine the walk passes a node, so what stands behind it is no must', () => {
    const nodes = [
      start(),
      check('n1', undefined, { onlyFor: { classes: ['chain-saw'], otherwise: 'n3' } }),
      check('n2'),
      check('n3'),
      cause('c', 'worn'),
      ask(),
    ]
    const edges = ['s > n1', 'n1.good > n2', 'n1.bad > ask', 'n2.good > n3', 'n2.bad > ask', 'n3.bad > c', 'n3.good > ask']
    expect(musts({ nodes, edges })).toEqual({ worn: ['s', 'n1', 'n3'] })
  })

  test('a cause without a route is left out', () => {
    expect(musts({ nodes: [start(), ask(), cause('c', 'worn')], edges: ['s > ask'] })).toEqual({})
  })

  test('a route through another chart that comes back further on counts, where that chart is known', () => {
    const here: ChartSketch = {
      id: 'here',
      nodes: [start(), check('n1'), jump('j', 'there'), step('safe'), check('n2'), cause('c', 'worn'), ask()],
      edges: ['s > n1', 'n1.good > safe', 'n1.bad > j', 'safe > n2', 'n2.bad > c', 'n2.good > ask'],
    }
    const there: ChartSketch = { id: 'there', nodes: [start(), jump('home', 'here', { at: 'n2' })], edges: ['s > home'] }
    expect(musts(here)).toEqual({ worn: ['s', 'n1', 'safe', 'n2'] })
    expect(musts(here, there)).toEqual({ worn: ['s', 'n1', 'n2'] })
  })

  test('a called chart comes back to its caller alone', () => {
    const first: ChartSketch = {
      id: 'first',
      nodes: [start(), check('n1'), jump('j1', 'sub', { returns: true }), step('safe'), jump('j2', 'sub', { returns: true }), cause('c', 'worn'), ask()],
      edges: ['s > n1', 'n1.good > j1', 'n1.bad > ask', 'j1 > safe', 'safe > j2', 'j2 > c'],
    }
    expect(musts(first, sub)['worn' as CauseId]).toEqual(['s', 'n1', 'j1', 'safe', 'j2'])
  })
})
