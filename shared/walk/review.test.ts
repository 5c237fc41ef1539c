import { describe, expect, test } from 'vitest'

import {
  act,
  answer,
  backTo,
  closedAs,
  found,
  noticed,
  proven,
  repaired,
  revs,
  runFailed,
  runPassed,
  skipped,
  started,
  storiesOn,
  tap,
  type Act,
} from '#tests/support/walk-builder.ts'
import { jumpingChart, otherChart, sawChart, sealChart } from '#tests/support/walk-charts.ts'
import { routeLegs, toReview, type ReviewLine } from './review.ts'

const { given } = storiesOn(sawChart)
const jumps = storiesOn(jumpingChart, sealChart, otherChart)

function told(...acts: Act[]): readonly ReviewLine[] {
  let lines: readonly ReviewLine[] = []
  given(...acts).then((_walk, { charts, log }) => (lines = toReview(charts, log)))
  return lines
}

describe('the story of a walk', () => {
  const whole = told(
    started(),
    tap('yes'),
    revs(9850),
    tap('dusty'),
    tap('good'),
    backTo('n3'),
    tap('dark'),
    revs(12_400),
    proven,
    repaired,
    runPassed,
    closedAs('repaired'),
  )

  test('tells every event in order, each finding with its balloon, its judgement and its minutes', () => {
    expect(
      whole.map(({ type, node, outcome, judgement, minutes }) => [type, node.number, outcome?.title ?? null, outcome?.balloon ?? null, judgement, minutes]),
    ).toEqual([
      ['started', '', null, null, null, 0],
      ['finding-recorded', '1', 'It does it', 1, 'reproduced', 5],
      ['finding-recorded', '2', 'Low', 1, 'off', 1],
      ['finding-recorded', '3', 'Dusty', 2, 'serviceable', 3],
      ['finding-recorded', '4', 'Good', 1, 'good', 6],
      ['stepped-back', '5', null, null, null, 0],
      ['finding-recorded', '3', 'Dark', 3, 'off', 1],
      ['finding-recorded', whole[7]?.node.number, 'Gone', 1, 'proven', 2],
      ['cause-proven', whole[8]?.node.number, null, null, null, 0],
      ['repair-done', whole[8]?.node.number, null, null, null, 0],
      ['run-passed', whole[8]?.node.number, null, null, null, 0],
      ['closed', whole[8]?.node.number, null, null, null, 0],
    ])
  })

  test('marks what was stepped back over', () => {
    expect(whole.map(({ spent }) => spent).slice(1, 7)).toEqual([null, null, 'stepped-back', 'stepped-back', null, null])
  })

  test('keeps values with their unit, and names the cause', () => {
    expect(whole[2]?.reading).toEqual({ before: null, values: [9850], unit: '1/min' })
    expect(whole[8]?.cause?.title).toBe('Filter packed')
  })

  test('holds the value of a proof against the one found before the change, in the same unit', () => {
    expect(whole[7]?.reading).toEqual({ before: 9850, values: [12_400], unit: '1/min' })
  })

  test('says how the walk ended, what led to the cause and what joined the service list', () => {
    const lines = told(
      started(),
      tap('yes'),
      revs(9850),
      tap('dark'),
      revs(12_400),
      proven,
      act('contributing-set', { causeIds: ['never-cleaned'] } as never),
      act('service-changed', { added: ['clean-filter'], dropped: [] } as never),
      act('service-changed', { added: [], dropped: ['clean-filter'] } as never),
      repaired,
      runPassed,
      closedAs('repaired'),
    )
    expect(lines.flatMap(({ type, text }) => (type === 'contributing-set' || type === 'service-changed' ? [text] : []))).toEqual([
      'Never cleaned',
      'Clean the filter',
      'Clean the filter: left out',
    ])
    expect(lines.at(-1)?.result).toBe('repaired')
  })

  test('keeps every word that was written', () => {
    const lines = told(
      started(),
      act('note-added', { text: 'Smells sour', photoIds: [] }),
      act('access-changed', { opened: ['top-off'], closed: [] } as never),
      act('access-changed', { opened: [], closed: ['top-off'] } as never),
      noticed('n5', 'good'),
      tap('yes'),
      revs(12_000),
      tap('stripe'),
      answer({ outcome: 'gone' as never, note: 'Blue' }),
      act('cause-not-proven', { causeId: 'drum-worn', sight: { note: 'Measured: sound', photoIds: [] } } as never),
      skipped('p4', 'cannot'),
      act('escalated', { reason: 'Never seen this' }),
      act('paused', { why: 'Lunch' }),
    )
    expect(lines.flatMap(({ text }) => text ?? [])).toEqual([
      'Smells sour',
      'Top cover off',
      'Top cover off: closed',
      'Blue',
      'Measured: sound',
      'Never seen this',
      'Lunch',
    ])
    expect(lines.find(({ type }) => type === 'check-skipped')).toMatchObject({ judgement: 'no-answer', noAnswer: 'cannot' })
  })

  test('a finding that a failed run spent says so', () => {
    const lines = told(started(), tap('yes'), revs(9850), tap('dark'), revs(12_400), proven, repaired, runFailed, found('p3', 'still'))
    expect(lines.filter(({ type }) => type === 'finding-recorded').map(({ judgement, spent }) => [judgement, spent])).toEqual([
      ['reproduced', null],
      ['off', null],
      ['off', null],
      ['proven', 'run-failed'],
      ['not-proven', null],
    ])
  })
})

describe('the route over the charts', () => {
  test('goes from the start through everything that was passed; what was stepped back over is marked', () => {
    given(started(), tap('yes'), revs(9850), tap('good'), backTo('n3'), tap('dusty')).then((walk, { charts }) => {
      expect(routeLegs(charts, walk).map(({ from, to, outcome, isSpent }) => [from, outcome, to, isSpent])).toEqual([
        ['saw/s', null, 'saw/n1', false],
        ['saw/n1', 'yes', 'saw/n2', false],
        ['saw/n2', 'low', 'saw/n3', false],
        ['saw/n3', 'good', 'saw/n4', true],
        ['saw/n3', 'dusty', 'saw/n4', false],
      ])
    })
  })

  test('leads through jumps into other charts and back', () => {
    jumps.given(started(), tap('yes'), tap('seal'), tap('tight')).then((walk, { charts }) => {
      expect(
        routeLegs(charts, walk)
          .slice(2)
          .map(({ from, to, outcome }) => [from, outcome, to]),
      ).toEqual([
        ['saw/n2', 'seal', 'saw/j-seal'],
        ['saw/j-seal', null, 'seal/s'],
        ['seal/s', null, 'seal/k1'],
        ['seal/k1', 'tight', 'seal/back'],
        ['seal/back', null, 'saw/n3'],
      ])
    })
    jumps
      .given(started(), tap('yes'), tap('else'), act('jumped', { chartId: 'other', version: 1, startId: 's', pins: {} } as never))
      .then((walk, { charts }) => {
        expect(
          routeLegs(charts, walk)
            .slice(2)
            .map(({ from, to }) => [from, to]),
        ).toEqual([
          ['saw/n2', 'saw/j-pick'],
          ['saw/j-pick', 'other/s'],
          ['other/s', 'other/n6'],
        ])
      })
  })

  test('ends at a dead end', () => {
    jumps
      .given(started(), tap('yes'), tap('missing'))
      .then((walk, { charts }) => expect(routeLegs(charts, walk).at(-1)).toMatchObject({ from: 'saw/n2', to: 'saw/j-missing' }))
    given(started(), skipped('n1', 'not-reproduced')).then((walk, { charts }) => expect(routeLegs(charts, walk)).toHaveLength(1))
  })
})
