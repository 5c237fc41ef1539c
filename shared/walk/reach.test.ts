import { describe, expect, test } from 'vitest'

import { ask, buildChart, cause, check, hold, jump, start } from '#tests/support/chart-builder.ts'
import { act, closedAs, notProven, proven, repaired, revs, runFailed, runPassed, started, storiesOn, tap } from '#tests/support/walk-builder.ts'
import { toCause } from '#tests/support/saw-stories.ts'
import { jumpingChart, otherChart, sawChart, sealChart } from '#tests/support/walk-charts.ts'
import type { StartedWalk } from './state.ts'

const { given } = storiesOn(sawChart)
const jumps = storiesOn(jumpingChart, sealChart, otherChart)
const spentOf = (walk: StartedWalk) => walk.trail.map(({ position, spent }) => [position.node, spent])

describe('cause, repair and run', () => {
  test('a proof that confirms proves its cause, by the finding that says so', () => {
    given(...toCause, proven)
      .thenPhase('proven')
      .then((walk) => {
        expect(walk).toMatchObject({ cause: { causeId: 'filter-packed', proof: { by: 'finding', eventId: walk.trail.at(-1)?.eventId } } })
      })
  })

  test('from the cause to the closed walk', () => {
    given(...toCause, proven, repaired, runPassed)
      .thenPhase('run-passed')
      .thenPage('run-passed', (page) => expect(page.results).toEqual(['repaired']))
    given(...toCause, proven, repaired, runPassed, closedAs('repaired'))
      .thenPhase('closed')
      .then((walk) => {
        expect(walk).toMatchObject({ result: 'repaired', causeId: 'filter-packed', last: { phase: 'run-passed' } })
      })
  })

  test('after a failed run the cause is ruled out and the walk stands at its proof again, that finding spent and the others kept', () => {
    given(...toCause, proven, repaired, runFailed)
      .thenAt('p3')
      .thenPhase('at-node')
      .then((walk) => {
        expect(walk.ruledOut).toMatchObject([{ causeId: 'filter-packed', how: 'run-failed' }])
        expect(spentOf(walk)).toEqual([
          ['saw/n1', null],
          ['saw/n2', null],
          ['saw/n3', null],
          ['saw/p3', 'run-failed'],
        ])
        expect([walk.contributing, walk.ticks]).toEqual([[], { fix: [], service: [], run: [] }])
      })
    given(...toCause, proven, repaired, runFailed).thenPage('proof', (page) => expect(page.offered).toBeNull())
  })

  const bySight = buildChart({
    id: 'saw',
    nodes: [start(), check('n1', ['good', 'bad']), check('n2', ['stripe', 'blue']), cause('c2', 'band-drags'), cause('c2b', 'band-drags'), ask()],
    edges: ['s > n1', 'n1.good > ask', 'n1.bad > n2', 'n2.stripe > c2', 'n2.blue > c2b'],
  })

  test('a cause that turns out not to be it leads back past every check that could only name it again', () => {
    storiesOn(bySight)
      .given(started(), tap('bad'), tap('stripe'), notProven)
      .thenAt('n1')
      .then((walk) => {
        expect(spentOf(walk)).toEqual([
          ['saw/n1', 'cause-not-proven'],
          ['saw/n2', null],
        ])
      })
  })

  test('where no finding could have led elsewhere, the lead is asked', () => {
    const one = buildChart({
      id: 'saw',
      nodes: [start(), check('n1', ['stripe', 'blue']), cause('c1', 'band-drags')],
      edges: ['s > n1', 'n1.stripe > c1', 'n1.blue > c1'],
    })
    storiesOn(one)
      .given(started(), tap('blue'), notProven)
      .thenPhase('escalated')
      .then((walk) => expect(walk).toMatchObject({ reason: 'no-cause-found' }))
  })

  test('a way to a hold, to a chart that is not there yet or to a pick counts as leading elsewhere', () => {
    for (const elsewhere of [hold('e'), jump('e', 'nobody-wrote-it'), { id: 'e', kind: 'jump', pick: 'symptom' }, ask('e')]) {
      const chart = buildChart({
        id: 'saw',
        nodes: [start(), check('n1', ['stripe', 'other']), cause('c1', 'band-drags'), elsewhere],
        edges: ['s > n1', 'n1.stripe > c1', 'n1.other > e'],
      })
      storiesOn(chart).given(started(), tap('stripe'), notProven).thenAt('n1')
    }
  })

  test('causes that were ruled out before stay out', () => {
    const two = buildChart({
      id: 'saw',
      nodes: [start(), check('n1', ['a', 'b']), cause('ca', 'one'), cause('cb', 'two')],
      edges: ['s > n1', 'n1.a > ca', 'n1.b > cb'],
    })
    storiesOn(two).given(started(), tap('a'), notProven).thenAt('n1')
    storiesOn(two).given(started(), tap('a'), notProven, tap('b'), notProven).thenPhase('escalated')
  })

  test('a failed run in a called chart leads back into the call', () => {
    jumps
      .given(started(), tap('yes'), tap('seal'), tap('drop'), tap('gone'), proven, repaired, runFailed)
      .thenAt('seal/q1')
      .then((walk) => expect(walk.calls).toEqual(['saw/j-seal']))
  })

  test('what led to it, the service list and its ticks are kept', () => {
    given(
      ...toCause,
      proven,
      act('contributing-set', { causeIds: ['never-cleaned'] } as never),
      act('service-changed', { added: ['grease'], dropped: [] } as never),
      act('ticked', { list: 'service', id: 'grease', on: true }),
      act('ticked', { list: 'fix', id: 'part-1', on: true }),
    ).thenPage('proven', (page) => {
      expect(page.contributing).toEqual([{ causeId: 'never-cleaned', title: 'Never cleaned', advice: 'Blow it out each day', isSet: true }])
      expect(page.service).toEqual([{ serviceItemId: 'grease', title: 'Grease the tip', minutes: 1, isTicked: true, byHand: true }])
      expect(page.fix).toMatchObject({
        text: 'Clean the filter',
        minutes: 5,
        items: [
          { id: 'remedy', isTicked: false },
          { id: 'part-1', title: 'Filter', quantity: 1, isTicked: true },
        ],
      })
    })
    given(...toCause, proven, act('ticked', { list: 'fix', id: 'part-1', on: true }), act('ticked', { list: 'fix', id: 'part-1', on: false })).then((walk) =>
      expect(walk.ticks.fix).toEqual([]),
    )
  })

  test('what a finding puts on the service list can be taken off by hand', () => {
    given(started(), tap('yes'), revs(9850), tap('dusty'), act('service-changed', { added: [], dropped: ['clean-filter'] } as never)).then((walk) =>
      expect(walk.serviceList).toEqual([]),
    )
  })

  test('a passed run means that every safety part is back', () => {
    const chart = buildChart({
      id: 'saw',
      nodes: [start(), check('n1', ['good', 'bad'], { defeats: ['spark-screen'] }), cause('c1', 'screen-shut'), ask()],
      edges: ['s > n1', 'n1.good > ask', 'n1.bad > c1'],
    })
    storiesOn(chart)
      .given(started(), tap('bad'), proven, repaired)
      .thenPage('run', (page) => expect(page.defeated).toEqual(['spark-screen']))
    storiesOn(chart)
      .given(started(), tap('bad'), proven, repaired, runPassed)
      .then((walk) => expect(walk.metal.defeated).toEqual([]))
  })
})
