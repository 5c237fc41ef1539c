import { describe, expect, test } from 'vitest'
import { ask, back, cause, check, hold, jump, proof, reproducing, soundSketch, start, step, type ChartSketch } from '#tests/support/chart-builder.ts'
import { saysOf, vary } from '#tests/support/lint.ts'

describe('every start reproduces the symptom first', () => {
  test('a start without a reproducing check is worth a look', () => {
    const plain = vary(soundSketch, { nodes: [check('n1', ['yes', 'no'])] })
    expect(saysOf(plain)).toEqual(['start-without-reproducing-check s'])
    expect(saysOf({ ...plain, basis: 'printed-table' })).toEqual([])
  })

  test('a chart that is called and comes back has had it reproduced by its caller', () => {
    const called = vary(soundSketch, { nodes: [check('n1', ['yes', 'no']), back()], drop: ['n2.good > ask'], edges: ['n2.good > back'] })
    expect(saysOf(called)).toEqual([])
  })

  test('two of them, one on each way or one behind the other, are worth a look', () => {
    const fork = vary(soundSketch, {
      nodes: [check('n0'), reproducing('n1b')],
      drop: ['s > n1'],
      edges: ['s > n0', 'n0.good > n1', 'n0.bad > n1b', 'n1b.yes > n2', 'n1b.no > a0'],
    })
    expect(saysOf(fork)).toEqual(['start-with-several-reproducing-checks s'])
    const chain = vary(soundSketch, { nodes: [reproducing('n1b')], drop: ['n1.yes > n2'], edges: ['n1.yes > n1b', 'n1b.yes > n2', 'n1b.no > a0'] })
    expect(saysOf(chain)).toEqual(['start-with-several-reproducing-checks s'])
  })

  test('a machine that does something else may go on to the check of another start', () => {
    const other = vary(soundSketch, {
      nodes: [start('s2'), reproducing('n1b')],
      drop: ['n1.no > a0'],
      edges: ['n1.no > n1b', 's2 > n1b', 'n1b.yes > n2', 'n1b.no > a0'],
    })
    expect(saysOf(other)).toEqual([])
  })

  test('looks that must be safe before a start may precede it, also where one of them leads to a proof', () => {
    const safeFirst = vary(soundSketch, {
      nodes: [check('n0'), proof('p0', 'started-dry'), cause('c0', 'started-dry'), step('w')],
      drop: ['s > n1'],
      edges: ['s > w', 'w > n0', 'n0.good > n1', 'n0.bad > p0', 'p0.gone > c0', 'p0.still > n1'],
    })
    expect(saysOf(safeFirst)).toEqual([])
  })

  test('a check that reproduces only behind a proof comes too late', () => {
    const late = vary(soundSketch, { nodes: [proof('p0', 'worn'), cause('c0', 'worn')], drop: ['s > n1'], edges: ['s > p0', 'p0.gone > c0', 'p0.still > n1'] })
    expect(saysOf(late)).toEqual(['start-without-reproducing-check s'])
  })

  test('a check that reproduces says by which outcome it did', () => {
    expect(saysOf(vary(soundSketch, { nodes: [check('n1', ['yes', 'no'], { reproduces: true })] }))).toEqual(['nothing-reproduced n1'])
  })
})

describe('where all is good, nothing was found', () => {
  const into = (node: Record<string, unknown>, id: string) =>
    vary(soundSketch, { nodes: [node], without: ['ask'], drop: ['n2.good > ask', 'p2.still > ask'], edges: [`n2.good > ${id}`, `p2.still > ${id}`] })

  test('that route ends with the lead, on hold, back at the caller or in another chart', () => {
    const other: ChartSketch = { id: 'other', nodes: [start(), ask()], edges: ['s > ask'] }
    expect(saysOf(into(hold(), 'hold'))).toEqual([])
    expect(saysOf(into(back(), 'back'))).toEqual([])
    expect(saysOf(into(jump('j', 'other'), 'j'), [other])).toEqual([])
  })

  test('a cause at its end is worth a look', () => {
    const table = vary(soundSketch, {
      without: ['p2'],
      drop: ['n2.good > ask', 'n2.bad > p2', 'p2.gone > c2', 'p2.still > ask'],
      edges: ['n2.good > c2', 'n2.bad > ask'],
      more: { basis: 'printed-table' },
    })
    expect(saysOf(table)).toEqual(['all-good-route n2.good'])
    expect(saysOf(vary(table, { drop: ['n2.good > c2', 'n2.bad > ask'], edges: ['n2.good > ask', 'n2.bad > c2'] }))).toEqual([])
  })

  test('what is dirty but not the cause counts as good, and the route goes on over steps and checks', () => {
    const dusty = { id: 'dusty', title: 'Dusty', serviceable: true }
    const table = vary(soundSketch, {
      nodes: [check('n2', ['good', 'bad', dusty]), step('w')],
      edges: ['n2.dusty > w', 'w > c2'],
      more: { basis: 'printed-table' },
    })
    expect(saysOf(table)).toEqual(['all-good-route c2'])
  })
})
