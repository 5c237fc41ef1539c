import { describe, expect, test } from 'vitest'
import { ask, back, check, jump, soundSketch, start, step, type ChartSketch } from '#tests/support/chart-builder.ts'
import { saysOf, vary } from '#tests/support/lint.ts'

describe('routes', () => {
  test('a chart needs a start', () => {
    expect(saysOf({ nodes: [ask()], edges: [] })).toEqual(['no-start'])
    expect(saysOf(vary(soundSketch, { without: ['s'], drop: ['s > n1'] }))).toEqual(['no-start'])
  })

  test('a node that no route leads to is an error until an outcome leads to it', () => {
    const lost = vary(soundSketch, { nodes: [step('lost')], edges: ['lost > ask'] })
    expect(saysOf(lost)).toEqual(['unreachable-node lost'])
    expect(saysOf(vary(lost, { drop: ['n2.good > ask'], edges: ['n2.good > lost'] }))).toEqual([])
  })

  test('a node that only a joined chart jumps to is reached', () => {
    const entered = vary(soundSketch, { nodes: [step('side'), jump('j', 'other')], drop: ['n2.good > ask'], edges: ['n2.good > j', 'side > ask'] })
    const other: ChartSketch = { id: 'other', nodes: [start(), jump('home', 'sound', { at: 'side' })], edges: ['s > home'] }
    expect(saysOf(entered, [other])).toEqual([])
    expect(saysOf(entered, [{ ...other, nodes: [start(), ask('home')] }])).toEqual(['unreachable-node side'])
  })

  test('an outcome without an edge is an error', () => {
    expect(saysOf(vary(soundSketch, { drop: ['n2.good > ask'] }))).toEqual(['outcome-without-edge n2.good'])
  })

  test('a start and a step without an edge are errors', () => {
    expect(saysOf(vary(soundSketch, { nodes: [step('w')], drop: ['n2.good > ask'], edges: ['n2.good > w'] }))).toEqual(['node-without-edge w'])
  })

  test('an edge to nothing, from nothing, from no outcome and from one that does not exist are errors', () => {
    expect(saysOf(vary(soundSketch, { drop: ['n2.good > ask'], edges: ['n2.good > gone'] }))).toEqual(['edge-to-nothing n2.good'])
    expect(saysOf(vary(soundSketch, { edges: ['gone > ask'] }))).toEqual(['edge-from-nothing gone'])
    expect(saysOf(vary(soundSketch, { edges: ['n2 > ask'] }))).toEqual(['edge-from-nothing n2'])
    expect(saysOf(vary(soundSketch, { edges: ['n2.odd > ask'] }))).toEqual(['edge-from-nothing n2.odd'])
  })

  test('two edges out of one outcome are an error, an edge out of an end is worth a look', () => {
    expect(saysOf(vary(soundSketch, { edges: ['n2.good > a0'] }))).toEqual(['second-edge n2.good'])
    expect(saysOf(vary(soundSketch, { edges: ['c2 > ask'] }))).toEqual(['edge-out-of-end c2'])
  })

  test('a knot of checks without a way out is one error, and one outcome that leads out mends it', () => {
    const trap = vary(soundSketch, {
      nodes: [check('n3'), check('n4')],
      drop: ['n2.good > ask'],
      edges: ['n2.good > n3', 'n3.good > n4', 'n3.bad > n4', 'n4.good > n3', 'n4.bad > n4'],
    })
    expect(saysOf(trap)).toEqual(['no-end-reachable n3'])
    expect(saysOf(vary(trap, { drop: ['n4.bad > n4'], edges: ['n4.bad > ask'] }))).toEqual([])
  })

  test('a call of a chart that has ends of its own is a way out', () => {
    const ring = vary(soundSketch, {
      nodes: [jump('j', 'sub', { returns: true }), step('w')],
      drop: ['n2.good > ask'],
      edges: ['n2.good > j', 'j > w', 'w > j'],
    })
    const sub: ChartSketch = { id: 'sub', nodes: [start(), check('k'), back(), ask()], edges: ['s > k', 'k.good > back', 'k.bad > ask'] }
    expect(saysOf(ring, [sub])).toEqual([])
    expect(saysOf(ring, [vary(sub, { without: ['ask'], drop: ['k.bad > ask'], edges: ['k.bad > back'] })])).toEqual(['no-end-reachable j'])
  })
})

describe('nodes that are not for every machine', () => {
  const saws = { classes: ['chain-saw'] }
  test('the walk of another machine needs a way: a node that takes over, or exactly one normal outcome', () => {
    const noWay = vary(soundSketch, { nodes: [check('n2', ['fine', 'bad'], { onlyFor: saws })], drop: ['n2.good > ask'], edges: ['n2.fine > ask'] })
    expect(saysOf(noWay)).toEqual(['only-for-without-way n2'])
    expect(saysOf(vary(noWay, { nodes: [check('n2', ['fine', 'bad'], { onlyFor: { ...saws, otherwise: 'ask' } })] }))).toEqual([])
    expect(saysOf(vary(soundSketch, { nodes: [check('n2', undefined, { onlyFor: saws })] }))).toEqual([])
  })

  test('two normal outcomes leave it open, and a step has none', () => {
    const two = check('n2', ['good', 'bad', { id: 'fresh', title: 'Fresh', normal: true }], { onlyFor: saws })
    expect(saysOf(vary(soundSketch, { nodes: [two], edges: ['n2.fresh > ask'] }))).toEqual(['only-for-without-way n2'])
    expect(saysOf(vary(soundSketch, { nodes: [step('w', { onlyFor: saws })], drop: ['n2.good > ask'], edges: ['n2.good > w', 'w > ask'] }))).toEqual([
      'only-for-without-way w',
    ])
  })

  test('the node that takes over exists', () => {
    expect(saysOf(vary(soundSketch, { nodes: [check('n2', undefined, { onlyFor: { ...saws, otherwise: 'gone' } })] }))).toEqual(['edge-to-nothing n2'])
  })
})

describe('rings of nodes that take no event', () => {
  const passing = (engines: [string[], string[]]): ChartSketch =>
    vary(soundSketch, {
      nodes: [
        check('n3', undefined, { onlyFor: { engines: engines[0], otherwise: 'n4' } }),
        check('n4', undefined, { onlyFor: { engines: engines[1], otherwise: 'n3' } }),
      ],
      drop: ['n2.good > ask'],
      edges: ['n2.good > n3', 'n3.good > n4', 'n3.bad > ask', 'n4.good > ask', 'n4.bad > ask'],
    })

  test('two nodes that hand the same machine to each other are an error', () => {
    expect(saysOf(passing([['two-stroke'], ['two-stroke']]))).toEqual(['silent-ring n3'])
  })

  test('two nodes of which one is always for the machine are none', () => {
    expect(saysOf(passing([['two-stroke'], ['four-stroke']]))).toEqual([])
  })

  test('charts that jump to each other are a ring, unless a check or a step stands in it', () => {
    const here = vary(soundSketch, { nodes: [start('s2'), jump('j', 'other')], drop: ['n2.good > ask'], edges: ['n2.good > j', 's2 > j'] })
    const other: ChartSketch = { id: 'other', nodes: [start(), jump('home', 'sound', { at: 's2' })], edges: ['s > home'] }
    expect(saysOf(here, [other])).toEqual(['silent-ring s2', 'start-without-reproducing-check s2'])
    const withStep = vary(other, { nodes: [step('w')], drop: ['s > home'], edges: ['s > w', 'w > home'] })
    expect(saysOf(here, [withStep])).toEqual(['start-without-reproducing-check s2'])
  })

  test('a call that asks nothing and comes back to where it was made is a ring', () => {
    const here = vary(soundSketch, {
      nodes: [jump('j', 'sub', { returns: true }), jump('j2', 'sub', { returns: true })],
      drop: ['n2.good > ask'],
      edges: ['n2.good > j', 'j > j2', 'j2 > j'],
    })
    const empty: ChartSketch = { id: 'sub', nodes: [start(), back()], edges: ['s > back'] }
    expect(saysOf(here, [empty])).toContain('silent-ring j')
    const asking = vary(empty, { nodes: [check('k'), ask()], drop: ['s > back'], edges: ['s > k', 'k.good > back', 'k.bad > ask'] })
    expect(saysOf(here, [asking])).toEqual([])
  })
})
