import { describe, expect, test } from 'vitest'
import { check, proof, soundSketch, step, type ChartSketch } from '#tests/support/chart-builder.ts'
import { saysOf, vary } from '#tests/support/lint.ts'

const withStep = (more: Record<string, unknown>): ChartSketch =>
  vary(soundSketch, { nodes: [step('w', more)], drop: ['n2.good > ask'], edges: ['n2.good > w', 'w > ask'] })
const withOutcome = (title: string): ChartSketch =>
  vary(soundSketch, {
    nodes: [
      check('n2', [
        { id: 'good', title: 'Dry', normal: true },
        { id: 'bad', title },
      ]),
    ],
  })
const withText = (good: string): ChartSketch => vary(soundSketch, { nodes: [check('n2', undefined, { good })] })

const twenty = Array.from({ length: 20 }, (_, index) => `word${index}`).join(' ')

describe('steps', () => {
  test('have at most twenty words a sentence', () => {
    expect(saysOf(withStep({ title: 'Set the gap', do: twenty }))).toEqual([])
    expect(saysOf(withStep({ title: 'Set the gap', do: `${twenty} more` }))).toEqual(['step-too-long w'])
    expect(saysOf(withStep({ title: 'Set the gap', do: `${twenty}. ${twenty}` }))).toEqual([])
    expect(saysOf(withStep({ title: `${twenty} more` }))).toEqual(['step-too-long w'])
    expect(saysOf(vary(soundSketch, { nodes: [proof('p2', 'filter-packed', { change: `${twenty} more` })] }))).toEqual(['step-too-long p2'])
  })

  test('and checks have a title', () => {
    expect(saysOf(withStep({ title: ' ' }))).toEqual(['title-missing w'])
    expect(saysOf(vary(soundSketch, { nodes: [check('n2', undefined, { title: undefined })] }))).toEqual(['title-missing n2'])
  })
})

describe('outcomes', () => {
  test.each(['Spark jumps 6 mm', 'Dusty – light shows', 'Steady, below full'])('"%s" is short enough', (title) => {
    expect(saysOf(withOutcome(title))).toEqual([])
  })
  test('have at most four words', () => {
    expect(saysOf(withOutcome('Dark all over, grey felt'))).toEqual(['outcome-title-too-long n2.bad'])
  })
  test.each(['otherwise', 'OK', 'ok.', 'Checked', 'Done', 'Wet otherwise', ''])('"%s" does not say what was found', (title) => {
    expect(saysOf(withOutcome(title))).toEqual(['outcome-says-nothing n2.bad'])
  })
  test.each(['Okra', 'Not done yet', 'Chokes'])('"%s" does', (title) => {
    expect(saysOf(withOutcome(title))).toEqual([])
  })
})

describe('values', () => {
  test.each(['about 3000 rpm', 'Approx. 7 psi', 'roughly 2,800'])('"%s" is no range', (text) => {
    expect(saysOf(withText(text))).toEqual(['vague-value n2'])
  })
  test.each(['3000 +- 200 rpm', '3000 +/- 200', '7 ± 1 psi', '3000 + - 200'])('"%s" leaves the sum to the reader', (text) => {
    expect(saysOf(withText(text))).toEqual(['plus-minus n2'])
  })
  test.each(['2700 to 3100 rpm', 'Ask about the fuel', 'Turn it about', '7-10 pulls'])('"%s" is fine', (text) => {
    expect(saysOf(withText(text))).toEqual([])
  })
  test('stand on one line with their unit', () => {
    expect(saysOf(withText('Gap 0.5\nmm'))).toEqual(['value-torn-from-unit n2'])
    expect(saysOf(withText('Pull 5 times\nmove the lever'))).toEqual([])
    expect(saysOf(withText('Step 5\nmore slack'))).toEqual([])
  })
  test('are looked at in cautions, accesses and fixes too', () => {
    expect(saysOf({ ...soundSketch, cautions: [{ id: 'x', word: 'CAUTION', harm: 'minor-injury', hazard: 'Hot at about 90 degC', avoid: 'Wait' }] })).toEqual([
      'vague-value',
    ])
    expect(
      saysOf({ ...soundSketch, causes: [{ id: 'filter-packed', title: 'Filter packed', system: 'air', remedy: { text: 'Blow at 25 +- 2 psi' } }] }),
    ).toEqual(['plus-minus'])
  })
})

describe('conditions', () => {
  test.each(['If the plug is wet and black or bridged, renew it', 'When it stalls or dies and smokes, stop'])('"%s" ties AND to OR', (text) => {
    expect(saysOf(withText(text))).toEqual(['and-with-or n2'])
  })
  test.each([
    'If the plug is wet, dry it and pull or choke it',
    'If chips or dust sit between band and drum, clean it',
    'Wet and black or bridged',
    'If it is wet and black, renew it',
  ])('"%s" does not', (text) => {
    expect(saysOf(withText(text))).toEqual([])
  })
})
