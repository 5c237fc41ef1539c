import { describe, expect, test } from 'vitest'
import { readFileSync } from 'node:fs'
import { indexChart } from '../graph.ts'
import { parseChartText } from '../parse.ts'
import { remarkCodes } from './codes.ts'
import { hasErrors, lintChart } from './lint-chart.ts'
import { ask, check, soundSketch, start, step } from '#tests/support/chart-builder.ts'
import { remarksOf, saysOf, vary } from '#tests/support/lint.ts'
import { largeChart } from '#tests/support/large-chart.ts'

describe('the chart check as a whole', () => {
  test('has nothing to say about a sound chart, however long', () => {
    expect(saysOf(soundSketch)).toEqual([])
    expect(lintChart(indexChart(largeChart(400)))).toEqual([])
  })

  test('lists errors before warnings before notes, and within those by the order of the nodes', () => {
    const faulty = vary(soundSketch, {
      nodes: [check('n2', ['good', { id: 'bad', title: 'otherwise' }], { needs: ['cover-off'] }), step('lost'), check('n9')],
      drop: ['n2.good > ask'],
      edges: ['n2.good > nowhere'],
    })
    expect(saysOf(faulty)).toEqual([
      'edge-to-nothing n2.good',
      'unreachable-node lost',
      'node-without-edge lost',
      'unreachable-node n9',
      'outcome-without-edge n9.good',
      'outcome-without-edge n9.bad',
      'outcome-says-nothing n2.bad',
      'proof-without-access p2',
    ])
  })

  test('every message names its node by the title and ends as a sentence', () => {
    const remarks = remarksOf({ nodes: [start(), check('n1', ['only']), ask()], edges: ['s > n1', 'n1.only > n1'] })
    for (const { message, node } of remarks) {
      expect(message).toMatch(/^["A-Z].*\.$/)
      if (node !== undefined) expect(message).toMatch(/"(Start s|Look at n1|Ask the lead)"/)
    }
    expect(hasErrors(remarks)).toBe(true)
  })

  test('every code is kebab-case, and its severity is one of three', () => {
    for (const [code, severity] of Object.entries(remarkCodes)) {
      expect(code).toMatch(/^[a-z]+(-[a-z]+)*$/)
      expect(['error', 'warning', 'note']).toContain(severity)
    }
  })

  test('the two worked examples have no error; a proof on a machine that stays closed is noted', () => {
    const load = (name: string) => {
      const parsed = parseChartText(readFileSync(new URL(`../../../tests/documents/${name}`, import.meta.url), 'utf8'))
      if (!parsed.ok) throw new Error(parsed.error.detail)
      return indexChart(parsed.value)
    }
    const [bench, seal] = [load('b-bench.json'), load('b-seal.json')]
    const remarks = lintChart(bench, { others: () => seal })
    expect(remarks.map(({ code, node }) => [code, node])).toEqual([
      ['unused-access', undefined],
      ['proof-without-access', 'p4'],
    ])
    expect(hasErrors(lintChart(seal))).toBe(false)
  })
})
