import { describe, expect, test } from 'vitest'
import type { ChartId, NodeId, OutcomeId, Place } from '#shared/lib/ids.ts'
import { ask, back, buildChart, cause, check, hold, jump, proof, reading, reproducing, soundSketch, start, step } from '#tests/support/chart-builder.ts'
import { drawChart, type PictureOptions } from './chart-picture.ts'
import { styleOf } from './mark-style.ts'
import type { Mark, MarkGroup, Picture } from './marks.ts'
import { routeOnChart } from './picture-route.ts'

const id = (text: string): NodeId => text as NodeId
const place = (text: string): Place => text as Place
const sound = buildChart(soundSketch)

function nodeOf(picture: Picture, node: string): Extract<MarkGroup, { of: 'node' }> {
  const group = picture.groups.find((each) => each.of === 'node' && each.node === node)
  if (group?.of !== 'node') throw new Error(`There is no ${node} in the picture.`)
  return group
}
const textsOf = (marks: readonly Mark[]): string[] => marks.flatMap((mark) => (mark.kind === 'text' ? [mark.text] : []))
const rolesOf = (marks: readonly Mark[]): string[] => [...new Set(marks.map(({ role }) => role))]

describe('each kind of node has an outline and a further mark of its own', () => {
  const chart = buildChart({
    nodes: [
      start(),
      reproducing(),
      reading('n2'),
      step('n3'),
      check('n4', ['good', 'bad', 'worse']),
      proof('p4', 'screen-shut'),
      cause('c4', 'screen-shut'),
      jump('j1', 'seal-test', { returns: true }),
      jump('j2', 'hard-to-start'),
      hold('h1', { title: undefined, causeId: 'screen-shut' }),
      ask('a1'),
      back('b1'),
    ],
    causes: [{ id: 'screen-shut', title: 'Spark screen shut', system: 'exhaust' }],
    edges: ['s > n1', 'n1.yes > n2', 'n1.no > j2', 'n2.low > n3', 'n2.in > h1', 'n3 > n4', 'n4.good > j1', 'n4.bad > p4', 'n4.worse > b1', 'p4.gone > c4', 'p4.still > j1', 'j1 > a1'],
  })
  const picture = drawChart(chart, { chartTitles: new Map([['seal-test' as ChartId, 'Seal test']]) })

  test.each([
    ['s', ['START'], ['body']],
    ['n2', ['at least', '11\u202f000\u00a0rpm'], ['body', 'tab', 'glyph']],
    ['n3', ['3', 'Do n3'], ['body']],
    ['n4', ['4', 'Look at n4'], ['body', 'tab']],
    ['p4', ['PROOF: SPARK', 'SCREEN SHUT'], ['body', 'tab', 'tab-inner']],
    ['c4', ['Spark screen shut', 'EXHAUST'], ['cause-body']],
    ['j1', ['Seal test', 'COMES BACK'], ['body', 'inner-line']],
    ['j2', ['hard to start', 'OTHER CHART'], ['body']],
    ['h1', ['Spark screen shut', 'HOLD: NOT SAFE'], ['body', 'bar']],
    ['a1', ['Ask the lead', 'ASK'], ['body', 'inner-line']],
    ['b1', ['BACK'], ['body', 'glyph']],
  ])('%s', (node, words, roles) => {
    const { marks } = nodeOf(picture, node)
    const all = textsOf(marks).join(' ')
    for (const word of words) expect(all).toContain(word)
    expect(rolesOf(marks)).toEqual(expect.arrayContaining(roles))
  })

  test('numbers stand on what is done or asked', () => {
    expect(nodeOf(picture, 'n4').label).toBe('Check 4: Look at n4. 1 Good, 2 Bad, 3 Worse')
    expect(nodeOf(picture, 'p4').label).toMatch(/^Proof 4a: Prove screen-shut\. Proof: Spark screen shut\. 1 Gone, 2 Still there$/)
  })

  test('limits of the machine are shown where they are known', () => {
    const keyed = buildChart({ ...soundSketch, nodes: [...soundSketch.nodes, reading('n9', { limits: { spec: 'fullSpeed' } })] })
    const figure = (options: PictureOptions): string => textsOf(nodeOf(drawChart(keyed, options), 'n9').marks).at(-1) ?? ''
    expect(figure({})).toBe('rpm')
    expect(figure({ specLimits: { fullSpeed: { max: 9000, unit: '1/min' } } as never })).toContain('9\u202f000\u00a0rpm')
  })

  test('outcomes can be listed in the boxes by their numerals', () => {
    const texts = textsOf(nodeOf(drawChart(chart, { outcomes: 'listed' }), 'n4').marks)
    expect(texts).toEqual(['4', 'Look at n4', '1', 'Good', '2', 'Bad', '3', 'Worse'])
  })
})

describe('a route', () => {
  const stretches = [
    { from: place('sound/s'), to: place('sound/n1'), outcome: null, isSpent: false },
    { from: place('sound/n1'), to: place('sound/n2'), outcome: 'yes' as OutcomeId, isSpent: false },
    { from: place('sound/n2'), to: place('sound/ask'), outcome: 'good' as OutcomeId, isSpent: true },
    { from: place('sound/n2'), to: place('sound/p2'), outcome: 'bad' as OutcomeId, isSpent: false },
    { from: place('sound/p2'), to: place('elsewhere/n1'), outcome: 'gone' as OutcomeId, isSpent: false },
  ]
  const route = routeOnChart('sound' as ChartId, stretches, place('sound/p2'))

  test('is the part of the walk that ran on this chart', () => {
    expect(route).toEqual({
      nodes: ['s', 'n1', 'n2', 'p2'],
      edges: [
        { from: 's', to: 'n1', outcome: null },
        { from: 'n1', to: 'n2', outcome: 'yes' },
        { from: 'n2', to: 'p2', outcome: 'bad' },
      ],
      spentNodes: ['n2', 'ask'],
      spentEdges: [{ from: 'n2', to: 'ask', outcome: 'good' }],
      current: 'p2',
    })
    expect(routeOnChart('elsewhere' as ChartId, stretches, place('sound/p2'))).toEqual({ nodes: ['n1'], edges: [], spentNodes: [], spentEdges: [] })
  })

  test('is drawn as a thick cord, with what was stepped back from in dashes and the rest faint', () => {
    const picture = drawChart(sound, { route })
    const toneOf = (from: string, to: string): string | undefined => picture.groups.find((group) => group.of === 'edge' && group.from === from && group.to === to)?.marks[0]?.tone
    expect([toneOf('s', 'n1'), toneOf('n1', 'n2'), toneOf('n2', 'p2')]).toEqual(['walked', 'walked', 'walked'])
    expect(toneOf('n2', 'ask')).toBe('spent')
    expect(toneOf('n1', 'a0')).toBe('quiet')
    expect(nodeOf(picture, 'p2').marks[0]?.tone).toBe('current')
    expect(nodeOf(picture, 'ask').marks[0]?.tone).toBe('spent')
    expect(styleOf('edge', 'walked').strokeWidth).toBeGreaterThan(2 * styleOf('edge', 'quiet').strokeWidth)
    expect(styleOf('edge', 'spent').dash).toBeDefined()
  })

  test('comes first in the order of the nodes and in the summary', () => {
    const picture = drawChart(sound, { route })
    expect(picture.groups.flatMap((group) => (group.of === 'node' ? [group.node] : [])).slice(0, 4)).toEqual(['s', 'n1', 'n2', 'p2'])
    expect(picture.summary).toBe('Flowchart "Chart under test": 2 checks, 1 proof, 1 cause. The route drawn: Start s, then 1 Look at n1, then 2 Look at n2, then 2a Prove filter-packed.')
  })

  test('can be drawn alone with where its outcomes lead', () => {
    const near = drawChart(sound, { route: { nodes: [id('s'), id('n1')], edges: [] }, scope: 'near-route' })
    expect(near.groups.flatMap((group) => (group.of === 'node' ? [group.node] : []))).toEqual(['s', 'n1', 'n2', 'a0'])
  })
})

describe('faulty charts still have a picture', () => {
  test('edges to nothing, twice the same id, loops onto oneself, nothing at all', () => {
    expect(drawChart(buildChart({ nodes: [], edges: [] })).groups).toEqual([])
    const faulty = buildChart({ nodes: [start(), start(), check('n1'), check('n1'), step('n2')], edges: ['s > n1', 'n1.good > nowhere', 'n1.bad > n1', 'ghost > n1', 'n2 > n2', 's > n2', 'n1.made-up > n2'] })
    const picture = drawChart(faulty)
    expect(picture.groups.filter((group) => group.of === 'node').map(({ node }) => node).toSorted()).toEqual(['n1', 'n2', 's'])
    for (const group of picture.groups) for (const mark of group.marks) expect(JSON.stringify(mark)).not.toMatch(/null|NaN/)
  })
})
