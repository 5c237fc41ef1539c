import { describe, expect, test } from 'vitest'
import { highestWord } from '#shared/trade/signal-words.ts'
import { check, proof, reproducing, soundSketch, step, type ChartSketch } from '#tests/support/chart-builder.ts'
import { saysOf, vary } from '#tests/support/lint.ts'

const withParts = { more: { safetyParts: ['screen', 'stop-wire'] } }
const sketchOf = (change: Parameters<typeof vary>[1]): ChartSketch => ({ ...vary(soundSketch, change), ...withParts })

describe('safety parts', () => {
  test('what a node puts out of action it may put back itself', () => {
    expect(saysOf(sketchOf({ nodes: [proof('p2', 'filter-packed', { defeats: ['screen'], restores: ['screen'] })] }))).toEqual([])
    expect(saysOf(sketchOf({ nodes: [proof('p2', 'filter-packed', { defeats: ['screen'] })] }))).toEqual(['defeated-never-restored p2'])
    expect(saysOf(sketchOf({ nodes: [proof('p2', 'filter-packed', { defeats: ['screen', 'stop-wire'], restores: ['screen'] })] }))).toEqual([
      'defeated-never-restored p2',
    ])
  })

  test('every way on must pass a node that puts it back, not some of them', () => {
    const defeating = { nodes: [check('n2', undefined, { defeats: ['screen'] }), step('refit', { restores: ['screen'] })] }
    const oneWay = sketchOf({ ...defeating, drop: ['n2.bad > p2'], edges: ['n2.bad > refit', 'refit > p2'] })
    expect(saysOf(oneWay)).toEqual(['defeated-never-restored n2'])
    const bothWays = sketchOf({
      nodes: [check('n2', undefined, { defeats: ['screen'] }), check('n3', undefined, { restores: ['screen'] })],
      drop: ['n2.good > ask', 'n2.bad > p2'],
      edges: ['n2.good > n3', 'n2.bad > n3', 'n3.good > ask', 'n3.bad > p2'],
    })
    expect(saysOf(bothWays)).toEqual([])
  })
})

// ANSI Z535.4-2007, "Product Safety Signs and Labels", 4.14: definitions of the signal words (read).
describe('signal words (ANSI Z535.4-2007, 4.14)', () => {
  const hazard = { id: 'h', hazard: 'Ring of carbon breaks off', avoid: 'Stop at once' }
  const withCaution = (caution: Record<string, unknown>): ChartSketch =>
    vary(soundSketch, { nodes: [check('n2', undefined, { cautions: ['h'] })], more: { cautions: [{ ...hazard, ...caution }] } })

  test.each(['DANGER', 'WARNING', 'CAUTION'])('damage alone is a NOTICE, never %s', (word) => {
    expect(saysOf(withCaution({ word, harm: 'damage' }))).toEqual(['word-contradicts-harm'])
    expect(saysOf(withCaution({ word: 'NOTICE', harm: 'damage' }))).toEqual([])
  })

  test('adding that death or serious injury could result forces WARNING', () => {
    const graver = { harm: 'serious-injury', consequence: 'Death or serious injury could result' }
    expect(saysOf(withCaution({ word: 'NOTICE', ...graver }))).toEqual(['word-contradicts-harm'])
    expect(saysOf(withCaution({ word: 'CAUTION', ...graver }))).toEqual(['word-contradicts-harm'])
    expect(saysOf(withCaution({ word: 'WARNING', ...graver }))).toEqual([])
  })

  test('so does the text alone, where the harm was left as it was', () => {
    expect(saysOf(withCaution({ word: 'NOTICE', harm: 'damage', consequence: 'Death or serious injury could result' }))).toEqual(['word-contradicts-harm'])
  })

  test('death is DANGER or WARNING, minor injury is CAUTION', () => {
    expect(saysOf(withCaution({ word: 'DANGER', harm: 'death' }))).toEqual([])
    expect(saysOf(withCaution({ word: 'WARNING', harm: 'death' }))).toEqual([])
    expect(saysOf(withCaution({ word: 'CAUTION', harm: 'minor-injury' }))).toEqual([])
    expect(saysOf(withCaution({ word: 'WARNING', harm: 'minor-injury' }))).toEqual(['word-contradicts-harm'])
  })

  test('several hazards on one node stand under the highest word, once', () => {
    expect(highestWord(['NOTICE', 'WARNING', 'CAUTION', 'WARNING'])).toBe('WARNING')
    expect(highestWord(['NOTICE'])).toBe('NOTICE')
    expect(highestWord([])).toBeNull()
  })
})

describe('a running engine', () => {
  const starts = { id: 'start', word: 'WARNING', harm: 'serious-injury', hazard: 'Chain moves', avoid: 'Brake set', again: ['running'] }
  const running = (node: Record<string, unknown>, more: Partial<ChartSketch>): ChartSketch =>
    vary(soundSketch, { nodes: [reproducing('n1', { machine: 'running', ...node })], more })

  test('needs a caution that comes again with the engine: on the node, on an access of it, or on the chart', () => {
    expect(saysOf(running({}, {}))).toEqual(['running-without-caution n1'])
    expect(saysOf(running({ cautions: ['start'] }, { cautions: [starts] }))).toEqual([])
    expect(saysOf(running({}, { cautions: [{ ...starts, standing: true }] }))).toEqual([])
    const warm = { id: 'warm', title: 'Warm', minutes: 3, cautions: ['start'] }
    expect(saysOf(running({ needs: ['warm'] }, { cautions: [starts], access: [warm] }))).toEqual([])
    expect(saysOf(running({ needs: ['hot'] }, { cautions: [starts], access: [warm, { id: 'hot', title: 'Hot', minutes: 1, needs: ['warm'] }] }))).toEqual([])
  })

  test('a caution that is shown once, or only listed, does not do', () => {
    expect(saysOf(running({ cautions: ['start'] }, { cautions: [{ ...starts, again: [] }] }))).toEqual(['running-without-caution n1'])
    expect(saysOf(running({}, { cautions: [starts] }))).toEqual(['running-without-caution n1'])
  })
})
