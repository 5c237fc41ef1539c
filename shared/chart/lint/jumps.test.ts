import { describe, expect, test } from 'vitest'
import { back, ask, check, jump, soundSketch, start, step, type ChartSketch } from '#tests/support/chart-builder.ts'
import { saysOf, vary } from '#tests/support/lint.ts'

const sub: ChartSketch = { id: 'sub', nodes: [start(), check('k1'), back(), ask()], edges: ['s > k1', 'k1.good > back', 'k1.bad > ask'] }
const oneWay = (more: Record<string, unknown>) => vary(soundSketch, { nodes: [jump('j', 'sub', more)], drop: ['n2.good > ask'], edges: ['n2.good > j'] })
const returning = (more: Record<string, unknown> = {}) => vary(oneWay({ returns: true, ...more }), { edges: ['j > ask'] })

describe('jumps', () => {
  test('arrive at a node that their chart has', () => {
    expect(saysOf(oneWay({ at: 'k1' }), [sub])).toEqual([])
    expect(saysOf(oneWay({ at: 'k9' }), [sub])).toEqual(['jump-node-missing j'])
  })

  test('without a node arrive at the single start', () => {
    expect(saysOf(oneWay({}), [sub])).toEqual([])
    expect(saysOf(oneWay({}), [{ ...sub, nodes: [...sub.nodes, start('s2')], edges: [...sub.edges, 's2 > k1'] }])).toEqual(['jump-node-missing j'])
  })

  test('into their own chart are followed there', () => {
    expect(
      saysOf(vary(soundSketch, { nodes: [jump('j', 'sound', { at: 'n2' }), step('w')], drop: ['n2.good > ask'], edges: ['n2.good > w', 'w > j'] })),
    ).toEqual([])
    expect(saysOf(vary(soundSketch, { nodes: [jump('j', 'sound', { at: 'n9' })], drop: ['n2.good > ask'], edges: ['n2.good > j'] }))).toEqual([
      'jump-node-missing j',
    ])
  })

  test('to a chart that is not published are worth a look, on the command line a note', () => {
    expect(saysOf(oneWay({}))).toEqual(['jump-chart-missing j'])
    expect(saysOf(returning())).toEqual(['jump-chart-missing j'])
    expect(saysOf(oneWay({}), [], { missing: 'not-beside' })).toEqual(['jump-chart-not-beside j'])
  })

  test('name a chart or let the person pick', () => {
    expect(saysOf(oneWay({ chart: undefined }))).toEqual(['jump-without-target j'])
    expect(saysOf(oneWay({ chart: undefined, pick: 'symptom' }))).toEqual([])
  })

  test('that do not come back have no edge out', () => {
    expect(saysOf(vary(oneWay({}), { edges: ['j > ask'] }), [sub])).toEqual(['one-way-jump-with-edge j'])
    expect(saysOf(vary(oneWay({ chart: undefined, pick: 'symptom' }), { edges: ['j > ask'] }))).toEqual(['one-way-jump-with-edge j'])
  })

  test('that come back have an edge out and a "back" to come from', () => {
    expect(saysOf(returning(), [sub])).toEqual([])
    expect(saysOf(oneWay({ returns: true }), [sub])).toEqual(['returning-jump-without-edge j'])
    const noBack = vary(sub, { without: ['back'], drop: ['k1.good > back'], edges: ['k1.good > ask'] })
    expect(saysOf(returning(), [noBack])).toEqual(['returning-jump-without-back j'])
  })
})

describe('rings of charts', () => {
  const callingHome = (returns: boolean) =>
    vary(sub, {
      nodes: [jump('home', 'sound', returns ? { returns: true } : { at: 'n2' }), step('w')],
      drop: ['k1.bad > ask'],
      edges: ['k1.bad > w', 'w > home', ...(returns ? ['home > back'] : [])],
    })
  test('two charts that call each other and both come back are an error', () => {
    const here = vary(returning(), { nodes: [step('w'), back()], drop: ['j > ask'], edges: ['j > w', 'w > back'] })
    expect(saysOf(here, [callingHome(true)])).toEqual(['returning-ring j'])
  })

  test('a ring with a jump that does not come back is none', () => {
    expect(saysOf(returning(), [callingHome(false)])).toEqual([])
  })

  test('a chart that calls itself is a ring', () => {
    const self = vary(soundSketch, {
      nodes: [jump('j', 'sound', { returns: true }), check('n3'), back()],
      drop: ['n2.good > ask'],
      edges: ['n2.good > n3', 'n3.good > j', 'n3.bad > back', 'j > ask'],
    })
    expect(saysOf(self)).toEqual(['returning-ring j'])
  })

  test('a ring among joined charts is told of the chart that leads into it', () => {
    const third: ChartSketch = {
      id: 'third',
      nodes: [start(), check('m'), jump('again', 'sub', { returns: true }), back()],
      edges: ['s > m', 'm.good > back', 'm.bad > again', 'again > back'],
    }
    const second = vary(sub, { nodes: [jump('on', 'third', { returns: true })], drop: ['k1.bad > ask'], edges: ['k1.bad > on', 'on > back'] })
    expect(saysOf(returning(), [second, third])).toEqual(['returning-ring'])
  })
})
