import { describe, expect, test } from 'vitest'

import { ask, buildChart, cause, check, proof, reading, start } from '#tests/support/chart-builder.ts'
import { act, again, answer, backTo, noticed, proven, revs, skipped, started, storiesOn, tap } from '#tests/support/walk-builder.ts'
import { toCause } from '#tests/support/saw-stories.ts'
import { jumpingChart, otherChart, sawChart, sealChart } from '#tests/support/walk-charts.ts'
import { evolve } from './evolve.ts'
import type { StartedWalk } from './state.ts'

const { given } = storiesOn(sawChart)
const jumps = storiesOn(jumpingChart, sealChart, otherChart)
const spentOf = (walk: StartedWalk) => walk.trail.map(({ position, spent }) => [position.node, spent])

describe('findings', () => {
  test('a finding follows the edge of its outcome, and charges its minutes with the access that it opens', () => {
    given(started(), tap('yes'))
      .thenAt('n2')
      .then((walk) => {
        expect(walk.minutesUsed).toBe(5)
        expect(walk.metal).toEqual({ engine: 'running', open: ['warm'], defeated: [] })
        expect(walk.secondsMeasured).toBe(5)
      })
  })

  test('the limits of a reading judge its value, and the trail keeps both', () => {
    given(started(), tap('yes'), revs(9850))
      .thenAt('n3')
      .then((walk) => {
        expect(walk.trail.at(-1)).toMatchObject({ answer: { outcome: 'low', value: 9850, unit: '1/min' }, judgedBy: 'limits', values: [9850] })
      })
  })

  test('a dirty part is not yet a cause: the walk goes on and the work joins the service list', () => {
    given(started(), tap('yes'), revs(9850), tap('dusty'))
      .thenAt('n4')
      .then((walk) => expect(walk.serviceList).toEqual(['clean-filter']))
  })

  test('the steps of a page are done in the batch of its finding', () => {
    given(started(), tap('yes'), revs(12_000), tap('stripe')).thenAt('x4')
    given(started(), tap('yes'), revs(12_000), tap('stripe'))
      .when(answer({ outcome: 'gone' as never, note: 'Blue, worn thin' }))
      .thenAt('c4')
      .then((walk) => {
        expect(walk.trail.map(({ kind }) => kind)).toEqual(['finding', 'finding', 'finding', 'step', 'finding'])
        expect(walk.phase).toBe('at-cause')
      })
  })

  test('a finding of a node where the walk does not stand changes nothing in a log that holds it all the same', () => {
    given(started()).then((walk, { charts, log }) => {
      const [first] = log
      const stray = { ...first, seq: 2, type: 'finding-recorded', payload: { node: 'saw/n4', outcome: 'good', judgedBy: 'hand', photoIds: [], seconds: 0 } }
      expect(evolve(charts, walk, stray as never)).toEqual({ ...walk, lastSeq: 2 })
    })
  })
})

describe('proofs', () => {
  test('a proof compares with the reading on the trail and its value is judged by the limits of that reading', () => {
    given(started(), tap('yes'), revs(9850), tap('dark')).thenPage('proof', (page) => {
      expect(page.before).toMatchObject({ answer: { value: 9850 }, title: 'Low' })
      expect(page.suspect?.title).toBe('Filter packed')
    })
    given(...toCause)
      .thenAt('c3')
      .thenPhase('at-cause')
      .then((walk) => {
        expect(walk.trail.at(-1)).toMatchObject({ answer: { outcome: 'gone', value: 12_400 }, judgedBy: 'limits', before: null })
      })
    given(started(), tap('yes'), revs(9850), tap('dark'), revs(9900)).thenAt('n4')
  })

  const bare = buildChart({
    id: 'saw',
    access: [{ id: 'warm', title: 'Warm', minutes: 3 }],
    nodes: [
      start(),
      check('n1', ['good', 'dark']),
      reading('n2', { machine: 'running', needs: ['warm'], minutes: 1 }),
      proof('p1', 'filter-packed', { minutes: 2, compares: { node: 'n2', confirmsWhen: ['in'] } }),
      cause('c1', 'filter-packed'),
      ask(),
    ],
    edges: ['s > n1', 'n1.good > n2', 'n1.dark > p1', 'n2.low > ask', 'n2.in > ask', 'p1.gone > c1', 'p1.still > n2'],
  })

  test('a proof compares with the latest reading, where the walk came round to it again', () => {
    const round = buildChart({
      id: 'saw',
      nodes: [
        start(),
        reading('n2'),
        check('n3', ['round', 'dark']),
        proof('p3', 'filter-packed', { compares: { node: 'n2', confirmsWhen: ['in'] } }),
        cause('c3', 'filter-packed'),
        ask(),
      ],
      edges: ['s > n2', 'n2.low > n3', 'n2.in > ask', 'n3.round > n2', 'n3.dark > p3', 'p3.gone > c3', 'p3.still > ask'],
    })
    storiesOn(round)
      .given(started(), revs(9000), tap('round'), revs(9500), tap('dark'))
      .thenPage('proof', (page) => expect(page.before?.answer.value).toBe(9500))
  })

  test('where nothing was measured yet the proof takes the reading first, pays for it, and it counts from then on', () => {
    storiesOn(bare)
      .given(started(), tap('dark'))
      .thenPage('before', (page) => expect(page.proof.before).toBeNull())
    storiesOn(bare)
      .given(started(), tap('dark'), answer({ values: [12_100], unit: '1/min', before: { values: [9000], unit: '1/min' } }))
      .thenAt('c1')
      .then((walk, { page }) => {
        expect(walk.trail.at(-1)).toMatchObject({ before: { outcome: 'low', value: 9000, unit: '1/min' }, minutes: 6 })
        expect(walk.metal).toMatchObject({ engine: 'running', open: ['warm'] })
        expect(page.kind).toBe('cause')
      })
  })
})

describe('no answer', () => {
  test('not sure follows the first normal outcome, charges nothing, opens nothing, and joins the list', () => {
    given(started(), tap('yes'), revs(9850))
      .when(skipped('n3'))
      .thenAt('n4')
      .then((walk) => {
        expect(walk.trail.at(-1)).toMatchObject({ kind: 'skip', took: 'good', minutes: 0 })
        expect(walk.metal.open).toEqual(['warm'])
      })
  })

  test("can't do this follows the outcome that the chart names for it", () => {
    const chart = buildChart({
      id: 'saw',
      nodes: [start(), check('n1', ['good', 'bad'], { ifSkipped: 'bad' }), ask('a-good'), ask('a-bad')],
      edges: ['s > n1', 'n1.good > a-good', 'n1.bad > a-bad'],
    })
    storiesOn(chart).given(started()).when(skipped('n1', 'cannot')).thenAt('a-bad')
  })

  test('on a proof it follows the first outcome that does not confirm', () => {
    given(started(), tap('yes'), revs(9850), tap('dark')).when(skipped('p3', 'cannot')).thenAt('n4')
  })

  test('could not reproduce ends the walk at the check that reproduces, and nowhere else', () => {
    given(started())
      .when(skipped('n1', 'not-reproduced'))
      .thenPhase('escalated')
      .then((walk) => expect(walk).toMatchObject({ reason: 'could-not-reproduce' }))
    given(started(), tap('yes'), revs(9850)).when(skipped('n3', 'not-reproduced')).thenAt('n4')
  })

  test('a check with no way for it asks the lead', () => {
    given(started())
      .when(skipped('n1'))
      .thenPhase('escalated')
      .then((walk) => expect(walk).toMatchObject({ reason: 'no-way-on' }))
  })

  test('the steps on the page of a check fall away with it', () => {
    given(started(), tap('yes'), revs(12_000), tap('stripe'))
      .when(skipped('p4'))
      .thenAt('n5')
      .then((walk) => {
        expect(walk.trail.map(({ kind }) => kind)).toEqual(['finding', 'finding', 'finding', 'skip'])
        expect(walk.trail.at(-1)?.position.node).toBe('saw/p4')
      })
  })

  test('skipped checks are shown before the lead is asked, each with the event that steps back to it', () => {
    const atEnd = [started(), tap('yes'), revs(9850), skipped('n3'), skipped('n4', 'cannot'), tap('good')]
    given(...atEnd)
      .thenAt('ask')
      .thenPage('ask', (page) => {
        expect(page.reason).toBe('no-cause-found')
        expect(page.skipped.map(({ node, why }) => [node.place, why])).toEqual([
          ['saw/n3', 'not-sure'],
          ['saw/n4', 'cannot'],
        ])
      })
    given(...atEnd)
      .when(act('escalated', { reason: 'no-cause-found' }))
      .thenPhase('escalated')
      .thenPage('escalated', (page) => expect(page.skipped).toHaveLength(2))
    given(...atEnd)
      .when(backTo('n3'))
      .thenAt('n3')
  })
})

describe('stepping back', () => {
  const far = [started(), tap('yes'), revs(9850), tap('dusty'), tap('good')]

  test('the walk stands where it stood; later findings, their service items and calls are spent, the log keeps all', () => {
    given(...far)
      .when(backTo('n3'))
      .thenAt('n3')
      .then((walk, { log }) => {
        expect(spentOf(walk)).toEqual([
          ['saw/n1', null],
          ['saw/n2', null],
          ['saw/n3', 'stepped-back'],
          ['saw/n4', 'stepped-back'],
        ])
        expect(walk.serviceList).toEqual([])
        expect(log).toHaveLength(6)
      })
    jumps
      .given(started(), tap('yes'), tap('seal'), tap('tight'))
      .when(backTo('seal/k1'))
      .thenAt('seal/k1')
      .then((walk) => expect(walk.calls).toEqual(['saw/j-seal']))
  })

  test('what is off stays off, and minutes stay used: the metal has not moved', () => {
    given(...far).then((before) => {
      given(...far)
        .when(backTo('n1'))
        .then((after) => expect([after.metal, after.minutesUsed]).toEqual([before.metal, before.minutesUsed]))
    })
  })

  test('the answer is offered again; one tap records it, and costs nothing', () => {
    given(...far, backTo('n3')).thenPage('check', (page) => expect(page.offered).toMatchObject({ title: 'Dusty', from: 'stepped-back' }))
    given(...far, backTo('n3'))
      .when(again)
      .thenAt('n4')
      .then((walk) => {
        expect(walk.trail.at(-1)).toMatchObject({ answer: { outcome: 'dusty' }, minutes: 0 })
        expect(walk.serviceList).toEqual(['clean-filter'])
      })
  })

  test('nothing advances by itself, and on another route the same check still offers its answer', () => {
    given(...far, backTo('n2'), answer({ outcome: 'hunts' as never }))
      .thenAt('n4')
      .thenPage('check', (page) => expect(page.offered?.title).toBe('Good'))
  })

  test('an answer that was given anew is no longer offered when the walk comes round', () => {
    const loop = buildChart({ id: 'saw', nodes: [start(), check('n1', ['good', 'round']), ask()], edges: ['s > n1', 'n1.good > ask', 'n1.round > n1'] })
    storiesOn(loop)
      .given(started(), tap('round'))
      .thenPage('check', (page) => expect(page.offered).toBeNull())
    storiesOn(loop)
      .given(started(), tap('round'), backTo('n1'), tap('round'))
      .thenPage('check', (page) => expect(page.offered).toBeNull())
  })

  test('a proof that is offered again brings its reading before the change with it', () => {
    given(...toCause, backTo('n3'), again).thenPage('proof', (page) => expect(page.offered).toMatchObject({ answer: { outcome: 'gone', value: 12_400 } }))
    given(...toCause, backTo('n3'), again, again).thenAt('c3')
  })

  test('a proven cause can be taken back', () => {
    given(...toCause, proven)
      .when(backTo('p3'))
      .thenAt('p3')
      .thenPhase('at-node')
      .then((walk) => expect('cause' in walk).toBe(false))
  })
})

describe('out of turn', () => {
  const atReading = [started(), tap('yes'), act('access-changed', { opened: ['top-off'], closed: [] } as never)]

  test('opening access out of turn is charged once, and not again when the walk comes to it', () => {
    given(...atReading).then((walk) => expect(walk.minutesUsed).toBe(7))
    given(...atReading, revs(9850), tap('good')).then((walk) => expect(walk.minutesUsed).toBe(9))
  })

  const looking = buildChart({
    id: 'saw',
    nodes: [
      start(),
      check('n1', ['good', 'bad']),
      check('n2', ['good', { id: 'dusty', title: 'Dusty', serviceable: true, serviceItem: 'clean-filter' }]),
      ask(),
    ],
    edges: ['s > n1', 'n1.good > n2', 'n1.bad > ask', 'n2.good > ask', 'n2.dusty > ask'],
  })

  test('what was noticed is charged, puts its work on the list, waits for its check, and is recorded there with one tap for nothing', () => {
    storiesOn(looking)
      .given(started(), noticed('n2', 'dusty'))
      .thenAt('n1')
      .then((walk) => {
        expect(walk.minutesUsed).toBe(1)
        expect(walk.serviceList).toEqual(['clean-filter'])
      })
    storiesOn(looking)
      .given(started(), noticed('n2', 'dusty'), tap('good'))
      .thenAt('n2')
      .thenPage('check', (page) => expect(page.offered).toMatchObject({ from: 'noticed', title: 'Dusty' }))
    storiesOn(looking)
      .given(started(), noticed('n2', 'dusty'), tap('good'), again)
      .thenAt('ask')
      .then((walk) => {
        expect(walk.minutesUsed).toBe(2)
        expect(walk.serviceList).toEqual(['clean-filter'])
      })
  })

  test('what was noticed outlives a step back', () => {
    storiesOn(looking)
      .given(started(), noticed('n2', 'dusty'), tap('good'), backTo('n1'))
      .then((walk) => expect(walk.serviceList).toEqual(['clean-filter']))
  })

  test('a reading that was noticed is judged by its limits', () => {
    const measuring = buildChart({
      id: 'saw',
      nodes: [start(), check('n1', ['good', 'bad']), reading('n2'), ask()],
      edges: ['s > n1', 'n1.good > n2', 'n1.bad > ask', 'n2.low > ask', 'n2.in > ask'],
    })
    const seen = act('noticed', { node: 'saw/n2', value: 9000, unit: '1/min', photoIds: [] } as never)
    storiesOn(measuring)
      .given(started(), seen, tap('good'))
      .thenPage('reading', (page) => expect(page.offered).toMatchObject({ title: 'Low', answer: { value: 9000 } }))
    storiesOn(measuring)
      .given(started(), seen, tap('good'), again)
      .thenAt('ask')
      .then((walk) => expect(walk.trail.at(-1)).toMatchObject({ judgedBy: 'limits' }))
  })

  test('a suspect that was named is taken up at its proof, whatever lies between', () => {
    given(started(), tap('yes'))
      .when(act('suspect-named', { causeId: 'drum-worn' } as never))
      .thenAt('p4')
      .then((walk) => expect(walk.named).toEqual(['drum-worn']))
  })
})
