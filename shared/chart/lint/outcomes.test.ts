import { describe, expect, test } from 'vitest'
import { ask, check, jump, soundSketch, start, type ChartSketch } from '#tests/support/chart-builder.ts'
import { saysOf, vary } from '#tests/support/lint.ts'

const withOutcomes = (count: number): ChartSketch => {
  const names = ['good', 'bad', ...Array.from({ length: Math.max(0, count - 2) }, (_, index) => `o${index}`)].slice(0, count)
  const dropped = ['n2.good > ask', 'n2.bad > p2'].slice(count)
  return vary(soundSketch, { nodes: [check('n2', names)], drop: dropped, edges: names.slice(2).map((name) => `n2.${name} > ask`) })
}

describe('outcomes', () => {
  test.each([
    [1, 'outcome-count n2'],
    [2, undefined],
    [5, undefined],
    [6, 'many-outcomes n2'],
    [9, 'many-outcomes n2'],
    [10, 'outcome-count n2'],
  ])('%i outcomes', (count, said) => {
    expect(saysOf(withOutcomes(count)).filter((entry) => entry.includes('outcome'))).toEqual(said === undefined ? [] : [said])
  })

  test('a check without an outcome is an error', () => {
    expect(saysOf({ nodes: [start(), check('n1', []), ask()], edges: ['s > n1'] })).toContain('outcome-count n1')
  })

  test('two outcomes that read alike cannot be told apart', () => {
    const alike = [
      { id: 'good', title: 'Dry', normal: true },
      { id: 'bad', title: ' dry ' },
    ]
    expect(saysOf(vary(soundSketch, { nodes: [check('n2', alike)] }))).toEqual(['outcome-titles-alike n2.bad'])
  })
})

describe('one physical check', () => {
  test('nodes with one check id have the same outcome ids, in whatever order', () => {
    const twice = (outcomes: string[]) =>
      vary(soundSketch, {
        nodes: [check('n2', undefined, { checkId: 'light' }), check('n3', outcomes, { checkId: 'light' })],
        drop: ['n2.good > ask'],
        edges: ['n2.good > n3', ...outcomes.map((outcome) => `n3.${outcome} > ask`)],
      })
    expect(saysOf(twice(['good', 'none']))).toEqual(['same-check-other-outcomes n3'])
    expect(saysOf(twice(['bad', 'good']))).toEqual([])
  })

  test('the shorthand for one check counts alike', () => {
    const copy = (outcomes: string[]) =>
      vary(soundSketch, {
        nodes: [check('n3', outcomes, { sameAs: 'n2' })],
        drop: ['n2.good > ask'],
        edges: ['n2.good > n3', ...outcomes.map((outcome) => `n3.${outcome} > ask`)],
      })
    expect(saysOf(copy(['good', 'worse']))).toEqual(['same-check-other-outcomes n3'])
    expect(saysOf(copy(['good', 'bad']))).toEqual([])
  })

  test('so do nodes of a joined chart', () => {
    const here = vary(soundSketch, {
      nodes: [check('n2', undefined, { checkId: 'light' }), jump('j', 'other')],
      drop: ['n2.good > ask'],
      edges: ['n2.good > j'],
    })
    const other = (outcomes: string[]): ChartSketch => ({
      id: 'other',
      nodes: [start(), check('k', outcomes, { checkId: 'light' }), ask()],
      edges: ['s > k', ...outcomes.map((outcome) => `k.${outcome} > ask`)],
    })
    expect(saysOf(here, [other(['good', 'none'])])).toEqual(['same-check-other-outcomes n2'])
    expect(saysOf(here, [other(['good', 'bad'])])).toEqual([])
  })
})
