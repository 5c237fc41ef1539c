import { describe, expect, test } from 'vitest'

import type { NodeId } from '#shared/lib/ids.ts'
import { ask, back, buildChart, cause, check, hold, jump, proof, reading, start, step } from '#tests/support/chart-builder.ts'
import {
  act,
  again,
  answer,
  asked,
  backTo,
  by,
  closedAs,
  notProven,
  noticed,
  people,
  proven,
  questionId,
  repaired,
  revs,
  runFailed,
  runPassed,
  saw,
  skipped,
  started,
  stepDone,
  storiesOn,
  tap,
} from '#tests/support/walk-builder.ts'
import { jumpingChart, otherChart, sawChart, sealChart } from '#tests/support/walk-charts.ts'
import { evolve } from './evolve.ts'
import { anyVersionOf } from './pinned-charts.ts'
import { newWalk, type StartedWalk } from './state.ts'

const { given } = storiesOn(sawChart)
const jumps = storiesOn(jumpingChart, sealChart, otherChart)
const spentOf = (walk: StartedWalk) => walk.trail.map(({ position, spent }) => [position.node, spent])
/** Filter dark, proven by the same reading: full speed is back without it. */
const toCause = [started(), tap('yes'), revs(9850), tap('dark'), revs(12_400)]

describe('the beginning', () => {
  test('a walk stands at the first node behind its start, the engine stopped and everything shut', () => {
    given(started()).thenAt('n1').thenPhase('at-node').then((walk) => {
      expect(walk).toMatchObject({ lastSeq: 1, start: 'saw/s', calls: [], metal: { engine: 'stopped', open: [], defeated: [] }, minutesUsed: 0 })
      expect(walk.holder).toEqual({ personId: people.junior.id, deviceId: people.junior.device })
    })
  })

  test('events before the start change nothing', () => {
    const charts = anyVersionOf([sawChart])
    const event = { type: 'paused', payload: {} } as never
    expect(evolve(charts, newWalk, event)).toBe(newWalk)
  })
})

describe('findings', () => {
  test('a finding follows the edge of its outcome, and charges its minutes with the access that it opens', () => {
    given(started(), tap('yes')).thenAt('n2').then((walk) => {
      expect(walk.minutesUsed).toBe(5)
      expect(walk.metal).toEqual({ engine: 'running', open: ['warm'], defeated: [] })
      expect(walk.secondsMeasured).toBe(5)
    })
  })

  test('the limits of a reading judge its value, and the trail keeps both', () => {
    given(started(), tap('yes'), revs(9850)).thenAt('n3').then((walk) => {
      expect(walk.trail.at(-1)).toMatchObject({ answer: { outcome: 'low', value: 9850, unit: '1/min' }, judgedBy: 'limits', values: [9850] })
    })
  })

  test('a dirty part is not yet a cause: the walk goes on and the work joins the service list', () => {
    given(started(), tap('yes'), revs(9850), tap('dusty')).thenAt('n4').then((walk) => expect(walk.serviceList).toEqual(['clean-filter']))
  })

  test('the steps of a page are done in the batch of its finding', () => {
    given(started(), tap('yes'), revs(12_000), tap('stripe')).thenAt('x4')
    given(started(), tap('yes'), revs(12_000), tap('stripe')).when(answer({ outcome: 'gone' as never, note: 'Blue, worn thin' })).thenAt('c4').then((walk) => {
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
    given(...toCause).thenAt('c3').thenPhase('at-cause').then((walk) => {
      expect(walk.trail.at(-1)).toMatchObject({ answer: { outcome: 'gone', value: 12_400 }, judgedBy: 'limits', before: null })
    })
    given(started(), tap('yes'), revs(9850), tap('dark'), revs(9900)).thenAt('n4')
  })

  const bare = buildChart({
    id: 'saw',
    access: [{ id: 'warm', title: 'Warm', minutes: 3 }],
    nodes: [start(), check('n1', ['good', 'dark']), reading('n2', { machine: 'running', needs: ['warm'], minutes: 1 }), proof('p1', 'filter-packed', { minutes: 2, compares: { node: 'n2', confirmsWhen: ['in'] } }), cause('c1', 'filter-packed'), ask()],
    edges: ['s > n1', 'n1.good > n2', 'n1.dark > p1', 'n2.low > ask', 'n2.in > ask', 'p1.gone > c1', 'p1.still > n2'],
  })

  test('a proof compares with the latest reading, where the walk came round to it again', () => {
    const round = buildChart({
      id: 'saw',
      nodes: [start(), reading('n2'), check('n3', ['round', 'dark']), proof('p3', 'filter-packed', { compares: { node: 'n2', confirmsWhen: ['in'] } }), cause('c3', 'filter-packed'), ask()],
      edges: ['s > n2', 'n2.low > n3', 'n2.in > ask', 'n3.round > n2', 'n3.dark > p3', 'p3.gone > c3', 'p3.still > ask'],
    })
    storiesOn(round).given(started(), revs(9000), tap('round'), revs(9500), tap('dark')).thenPage('proof', (page) => expect(page.before?.answer.value).toBe(9500))
  })

  test('where nothing was measured yet the proof takes the reading first, pays for it, and it counts from then on', () => {
    storiesOn(bare).given(started(), tap('dark')).thenPage('before', (page) => expect(page.proof.before).toBeNull())
    storiesOn(bare).given(started(), tap('dark'), answer({ values: [12_100], unit: '1/min', before: { values: [9000], unit: '1/min' } }))
      .thenAt('c1').then((walk, { page }) => {
        expect(walk.trail.at(-1)).toMatchObject({ before: { outcome: 'low', value: 9000, unit: '1/min' }, minutes: 6 })
        expect(walk.metal).toMatchObject({ engine: 'running', open: ['warm'] })
        expect(page.kind).toBe('cause')
      })
  })
})

describe('no answer', () => {
  test('not sure follows the first normal outcome, charges nothing, opens nothing, and joins the list', () => {
    given(started(), tap('yes'), revs(9850)).when(skipped('n3')).thenAt('n4').then((walk) => {
      expect(walk.trail.at(-1)).toMatchObject({ kind: 'skip', took: 'good', minutes: 0 })
      expect(walk.metal.open).toEqual(['warm'])
    })
  })

  test("can't do this follows the outcome that the chart names for it", () => {
    const chart = buildChart({ id: 'saw', nodes: [start(), check('n1', ['good', 'bad'], { ifSkipped: 'bad' }), ask('a-good'), ask('a-bad')], edges: ['s > n1', 'n1.good > a-good', 'n1.bad > a-bad'] })
    storiesOn(chart).given(started()).when(skipped('n1', 'cannot')).thenAt('a-bad')
  })

  test('on a proof it follows the first outcome that does not confirm', () => {
    given(started(), tap('yes'), revs(9850), tap('dark')).when(skipped('p3', 'cannot')).thenAt('n4')
  })

  test('could not reproduce ends the walk at the check that reproduces, and nowhere else', () => {
    given(started()).when(skipped('n1', 'not-reproduced')).thenPhase('escalated').then((walk) => expect(walk).toMatchObject({ reason: 'could-not-reproduce' }))
    given(started(), tap('yes'), revs(9850)).when(skipped('n3', 'not-reproduced')).thenAt('n4')
  })

  test('a check with no way for it asks the lead', () => {
    given(started()).when(skipped('n1')).thenPhase('escalated').then((walk) => expect(walk).toMatchObject({ reason: 'no-way-on' }))
  })

  test('the steps on the page of a check fall away with it', () => {
    given(started(), tap('yes'), revs(12_000), tap('stripe')).when(skipped('p4')).thenAt('n5').then((walk) => {
      expect(walk.trail.map(({ kind }) => kind)).toEqual(['finding', 'finding', 'finding', 'skip'])
      expect(walk.trail.at(-1)?.position.node).toBe('saw/p4')
    })
  })

  test('skipped checks are shown before the lead is asked, each with the event that steps back to it', () => {
    const atEnd = [started(), tap('yes'), revs(9850), skipped('n3'), skipped('n4', 'cannot'), tap('good')]
    given(...atEnd).thenAt('ask').thenPage('ask', (page) => {
      expect(page.reason).toBe('no-cause-found')
      expect(page.skipped.map(({ node, why }) => [node.place, why])).toEqual([['saw/n3', 'not-sure'], ['saw/n4', 'cannot']])
    })
    given(...atEnd).when(act('escalated', { reason: 'no-cause-found' })).thenPhase('escalated').thenPage('escalated', (page) => expect(page.skipped).toHaveLength(2))
    given(...atEnd).when(backTo('n3')).thenAt('n3')
  })
})

describe('jumps', () => {
  const toChoice = [started(), tap('yes')]

  test('a returning jump goes through the called chart and comes back to the edge of the caller', () => {
    jumps.given(...toChoice, tap('seal')).thenAt('seal/k1').then((walk) => expect(walk.calls).toEqual(['saw/j-seal']))
    jumps.given(...toChoice, tap('seal'), tap('tight')).thenAt('n3').then((walk) => expect(walk.calls).toEqual([]))
  })

  test('a cause may be found inside the called chart', () => {
    jumps.given(...toChoice, tap('seal'), tap('drop'), tap('gone')).thenAt('seal/d1').thenPhase('at-cause')
  })

  test('a one-way jump goes to the node that it names and forgets who called', () => {
    const away = buildChart({ id: 'seal', nodes: [start(), check('k1', ['tight', 'drop', 'off']), jump('j-off', 'other'), back()], edges: ['s > k1', 'k1.tight > back', 'k1.drop > back', 'k1.off > j-off'] })
    jumps.given(...toChoice, tap('away')).thenAt('other/n7')
    storiesOn(jumpingChart, away, otherChart).given(...toChoice, tap('seal'), tap('off')).thenAt('other/n6').then((walk) => expect(walk.calls).toEqual([]))
  })

  test('one-way jumps may lead round, back into the middle of the first chart', () => {
    jumps.given(...toChoice, tap('away'), tap('home')).thenAt('n3')
  })

  test('a one-way jump into a chart that is not there yet asks the lead', () => {
    jumps.given(...toChoice, tap('missing')).thenPhase('escalated').then((walk) => expect(walk).toMatchObject({ reason: 'not-here-yet', node: 'saw/j-missing' }))
  })

  test('a returning jump into a chart that is not there yet passes on, and the next page says so', () => {
    jumps.given(...toChoice, tap('absent')).thenAt('n3').then((walk) => expect(walk.arrival.missing).toEqual([{ jump: 'saw/j-absent', chartId: 'nobody-wrote-it' }]))
    jumps.given(...toChoice, tap('absent'), tap('good')).then((walk) => expect(walk.arrival.missing).toEqual([]))
  })

  test('a picked symptom starts there, its charts pinned beside the others', () => {
    const pick = act('jumped', { chartId: 'other' as never, version: 1, startId: 's' as NodeId as never, pins: {} })
    jumps.given(...toChoice, tap('else')).thenAt('j-pick').thenPage('pick', (page) => expect(page.starts.map(({ chartId }) => chartId)).toEqual(['saw', 'seal', 'other']))
    jumps.given(...toChoice, tap('else'), pick).thenAt('other/n6').then((walk) => {
      expect(walk.pins).toEqual({ saw: 1, seal: 1, other: 1 })
      expect(walk.trail.at(-1)).toMatchObject({ kind: 'pick', to: 'other/s' })
    })
    jumps.given(...toChoice, tap('else'), pick).when(act('stepped-back', ({ log }) => ({ toEventId: log.at(-1)?.id as never }))).thenAt('j-pick')
  })

  test('passing one node twice in one event is a ring, and the lead is asked', () => {
    const ring = buildChart({
      id: 'saw',
      nodes: [start(), check('n1', ['good', 'round']), jump('j1', 'saw', { at: 'j2' }), jump('j2', 'saw', { at: 'j1' }), ask()],
      edges: ['s > n1', 'n1.good > ask', 'n1.round > j1'],
    })
    storiesOn(ring).given(started(), tap('round')).thenPhase('escalated').then((walk) => expect(walk).toMatchObject({ reason: 'ring' }))
  })

  test('a chart that calls itself without end asks the lead', () => {
    const self = buildChart({ id: 'saw', nodes: [start(), check('n1', ['good', 'call']), jump('j1', 'saw', { returns: true }), back(), ask()], edges: ['s > n1', 'n1.good > ask', 'n1.call > j1', 'j1 > ask'] })
    storiesOn(self).given(started(), tap('call')).thenAt('n1').then((walk) => expect(walk.calls).toEqual(['saw/j1']))
    storiesOn(self).given(started(), tap('call'), tap('call')).thenPhase('escalated').then((walk) => expect(walk).toMatchObject({ reason: 'ring' }))
  })

  test('a back that nobody called counts as asking the lead', () => {
    storiesOn(sealChart).given(started(), tap('tight')).thenAt('back').thenPage('ask', (page) => expect(page.reason).toBe('no-cause-found'))
    storiesOn(sealChart).given(started(), tap('tight'), act('escalated', { reason: 'no-cause-found' })).thenPhase('escalated')
  })

  test('an outcome without an edge asks the lead', () => {
    const open = buildChart({ id: 'saw', nodes: [start(), check('n1', ['good', 'bad'])], edges: ['s > n1'] })
    storiesOn(open).given(started(), tap('bad')).thenPhase('escalated').then((walk) => expect(walk).toMatchObject({ reason: 'no-way-on', node: 'saw/n1' }))
  })
})

describe('nodes for other machines', () => {
  const trimmer = { class: 'line-trimmer', engine: 'two-stroke' } as const
  const chart = (otherwise?: string) =>
    buildChart({
      id: 'saw',
      nodes: [start(), check('n1', ['good', 'bad'], { onlyFor: { classes: ['chain-saw'], ...(otherwise ? { otherwise } : {}) } }), check('n2', ['good', 'bad']), check('n3', ['good', 'bad']), ask()],
      edges: ['s > n1', 'n1.good > n2', 'n1.bad > ask', 'n2.good > ask', 'n2.bad > ask', 'n3.good > ask', 'n3.bad > ask'],
    })

  test('on its own machine a node is asked, on another the walk passes along its normal edge, with no finding', () => {
    storiesOn(chart()).given(started()).thenAt('n1')
    storiesOn(chart()).given(started({ machine: trimmer })).thenAt('n2').then((walk) => expect(walk.trail).toEqual([]))
  })

  test('where the chart names another node, the walk goes there', () => {
    storiesOn(chart('n3')).given(started({ machine: trimmer })).thenAt('n3')
  })

  test('a machine that is identified later counts from the next node on', () => {
    const later = act('machine-identified', { machine: trimmer, limits: { fullSpeed: { min: 9000, unit: '1/min' } } as never })
    storiesOn(chart()).given(started(), later).thenAt('n1').then((walk) => expect([walk.machine, walk.limits]).toEqual([trimmer, { fullSpeed: { min: 9000, unit: '1/min' } }]))
  })
})

describe('stepping back', () => {
  const far = [started(), tap('yes'), revs(9850), tap('dusty'), tap('good')]

  test('the walk stands where it stood; later findings, their service items and calls are spent, the log keeps all', () => {
    given(...far).when(backTo('n3')).thenAt('n3').then((walk, { log }) => {
      expect(spentOf(walk)).toEqual([['saw/n1', null], ['saw/n2', null], ['saw/n3', 'stepped-back'], ['saw/n4', 'stepped-back']])
      expect(walk.serviceList).toEqual([])
      expect(log).toHaveLength(6)
    })
    jumps.given(started(), tap('yes'), tap('seal'), tap('tight')).when(backTo('seal/k1')).thenAt('seal/k1').then((walk) => expect(walk.calls).toEqual(['saw/j-seal']))
  })

  test('what is off stays off, and minutes stay used: the metal has not moved', () => {
    given(...far).then((before) => {
      given(...far).when(backTo('n1')).then((after) => expect([after.metal, after.minutesUsed]).toEqual([before.metal, before.minutesUsed]))
    })
  })

  test('the answer is offered again; one tap records it, and costs nothing', () => {
    given(...far, backTo('n3')).thenPage('check', (page) => expect(page.offered).toMatchObject({ title: 'Dusty', from: 'stepped-back' }))
    given(...far, backTo('n3')).when(again).thenAt('n4').then((walk) => {
      expect(walk.trail.at(-1)).toMatchObject({ answer: { outcome: 'dusty' }, minutes: 0 })
      expect(walk.serviceList).toEqual(['clean-filter'])
    })
  })

  test('nothing advances by itself, and on another route the same check still offers its answer', () => {
    given(...far, backTo('n2'), answer({ outcome: 'hunts' as never })).thenAt('n4').thenPage('check', (page) => expect(page.offered?.title).toBe('Good'))
  })

  test('an answer that was given anew is no longer offered when the walk comes round', () => {
    const loop = buildChart({ id: 'saw', nodes: [start(), check('n1', ['good', 'round']), ask()], edges: ['s > n1', 'n1.good > ask', 'n1.round > n1'] })
    storiesOn(loop).given(started(), tap('round')).thenPage('check', (page) => expect(page.offered).toBeNull())
    storiesOn(loop).given(started(), tap('round'), backTo('n1'), tap('round')).thenPage('check', (page) => expect(page.offered).toBeNull())
  })

  test('a proof that is offered again brings its reading before the change with it', () => {
    given(...toCause, backTo('n3'), again).thenPage('proof', (page) => expect(page.offered).toMatchObject({ answer: { outcome: 'gone', value: 12_400 } }))
    given(...toCause, backTo('n3'), again, again).thenAt('c3')
  })

  test('a proven cause can be taken back', () => {
    given(...toCause, proven).when(backTo('p3')).thenAt('p3').thenPhase('at-node').then((walk) => expect('cause' in walk).toBe(false))
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
    nodes: [start(), check('n1', ['good', 'bad']), check('n2', ['good', { id: 'dusty', title: 'Dusty', serviceable: true, serviceItem: 'clean-filter' }]), ask()],
    edges: ['s > n1', 'n1.good > n2', 'n1.bad > ask', 'n2.good > ask', 'n2.dusty > ask'],
  })

  test('what was noticed is charged, puts its work on the list, waits for its check, and is recorded there with one tap for nothing', () => {
    storiesOn(looking).given(started(), noticed('n2', 'dusty')).thenAt('n1').then((walk) => {
      expect(walk.minutesUsed).toBe(1)
      expect(walk.serviceList).toEqual(['clean-filter'])
    })
    storiesOn(looking).given(started(), noticed('n2', 'dusty'), tap('good')).thenAt('n2').thenPage('check', (page) => expect(page.offered).toMatchObject({ from: 'noticed', title: 'Dusty' }))
    storiesOn(looking).given(started(), noticed('n2', 'dusty'), tap('good'), again).thenAt('ask').then((walk) => {
      expect(walk.minutesUsed).toBe(2)
      expect(walk.serviceList).toEqual(['clean-filter'])
    })
  })

  test('what was noticed outlives a step back', () => {
    storiesOn(looking).given(started(), noticed('n2', 'dusty'), tap('good'), backTo('n1')).then((walk) => expect(walk.serviceList).toEqual(['clean-filter']))
  })

  test('a reading that was noticed is judged by its limits', () => {
    const measuring = buildChart({ id: 'saw', nodes: [start(), check('n1', ['good', 'bad']), reading('n2'), ask()], edges: ['s > n1', 'n1.good > n2', 'n1.bad > ask', 'n2.low > ask', 'n2.in > ask'] })
    const seen = act('noticed', { node: 'saw/n2', value: 9000, unit: '1/min', photoIds: [] } as never)
    storiesOn(measuring).given(started(), seen, tap('good')).thenPage('reading', (page) => expect(page.offered).toMatchObject({ title: 'Low', answer: { value: 9000 } }))
    storiesOn(measuring).given(started(), seen, tap('good'), again).thenAt('ask').then((walk) => expect(walk.trail.at(-1)).toMatchObject({ judgedBy: 'limits' }))
  })

  test('a suspect that was named is taken up at its proof, whatever lies between', () => {
    given(started(), tap('yes')).when(act('suspect-named', { causeId: 'drum-worn' } as never)).thenAt('p4').then((walk) => expect(walk.named).toEqual(['drum-worn']))
  })
})

describe('cause, repair and run', () => {
  test('a proof that confirms proves its cause, by the finding that says so', () => {
    given(...toCause, proven).thenPhase('proven').then((walk) => {
      expect(walk).toMatchObject({ cause: { causeId: 'filter-packed', proof: { by: 'finding', eventId: walk.trail.at(-1)?.eventId } } })
    })
  })

  test('from the cause to the closed walk', () => {
    given(...toCause, proven, repaired, runPassed).thenPhase('run-passed').thenPage('run-passed', (page) => expect(page.results).toEqual(['repaired']))
    given(...toCause, proven, repaired, runPassed, closedAs('repaired')).thenPhase('closed').then((walk) => {
      expect(walk).toMatchObject({ result: 'repaired', causeId: 'filter-packed', last: { phase: 'run-passed' } })
    })
  })

  test('after a failed run the cause is ruled out and the walk stands at its proof again, that finding spent and the others kept', () => {
    given(...toCause, proven, repaired, runFailed).thenAt('p3').thenPhase('at-node').then((walk) => {
      expect(walk.ruledOut).toMatchObject([{ causeId: 'filter-packed', how: 'run-failed' }])
      expect(spentOf(walk)).toEqual([['saw/n1', null], ['saw/n2', null], ['saw/n3', null], ['saw/p3', 'run-failed']])
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
    storiesOn(bySight).given(started(), tap('bad'), tap('stripe'), notProven).thenAt('n1').then((walk) => {
      expect(spentOf(walk)).toEqual([['saw/n1', 'cause-not-proven'], ['saw/n2', null]])
    })
  })

  test('where no finding could have led elsewhere, the lead is asked', () => {
    const one = buildChart({ id: 'saw', nodes: [start(), check('n1', ['stripe', 'blue']), cause('c1', 'band-drags')], edges: ['s > n1', 'n1.stripe > c1', 'n1.blue > c1'] })
    storiesOn(one).given(started(), tap('blue'), notProven).thenPhase('escalated').then((walk) => expect(walk).toMatchObject({ reason: 'no-cause-found' }))
  })

  test('a way to a hold, to a chart that is not there yet or to a pick counts as leading elsewhere', () => {
    for (const elsewhere of [hold('e'), jump('e', 'nobody-wrote-it'), { id: 'e', kind: 'jump', pick: 'symptom' }, ask('e')]) {
      const chart = buildChart({ id: 'saw', nodes: [start(), check('n1', ['stripe', 'other']), cause('c1', 'band-drags'), elsewhere], edges: ['s > n1', 'n1.stripe > c1', 'n1.other > e'] })
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
    jumps.given(started(), tap('yes'), tap('seal'), tap('drop'), tap('gone'), proven, repaired, runFailed).thenAt('seal/q1').then((walk) => expect(walk.calls).toEqual(['saw/j-seal']))
  })

  test('what led to it, the service list and its ticks are kept', () => {
    given(...toCause, proven, act('contributing-set', { causeIds: ['never-cleaned'] } as never), act('service-changed', { added: ['grease'], dropped: [] } as never), act('ticked', { list: 'service', id: 'grease', on: true }), act('ticked', { list: 'fix', id: 'part-1', on: true }))
      .thenPage('proven', (page) => {
        expect(page.contributing).toEqual([{ causeId: 'never-cleaned', title: 'Never cleaned', advice: 'Blow it out each day', isSet: true }])
        expect(page.service).toEqual([{ serviceItemId: 'grease', title: 'Grease the tip', minutes: 1, isTicked: true, byHand: true }])
        expect(page.fix).toMatchObject({ text: 'Clean the filter', minutes: 5, items: [{ id: 'remedy', isTicked: false }, { id: 'part-1', title: 'Filter', quantity: 1, isTicked: true }] })
      })
    given(...toCause, proven, act('ticked', { list: 'fix', id: 'part-1', on: true }), act('ticked', { list: 'fix', id: 'part-1', on: false })).then((walk) => expect(walk.ticks.fix).toEqual([]))
  })

  test('what a finding puts on the service list can be taken off by hand', () => {
    given(started(), tap('yes'), revs(9850), tap('dusty'), act('service-changed', { added: [], dropped: ['clean-filter'] } as never)).then((walk) => expect(walk.serviceList).toEqual([]))
  })

  test('a passed run means that every safety part is back', () => {
    const chart = buildChart({ id: 'saw', nodes: [start(), check('n1', ['good', 'bad'], { defeats: ['spark-screen'] }), cause('c1', 'screen-shut'), ask()], edges: ['s > n1', 'n1.good > ask', 'n1.bad > c1'] })
    storiesOn(chart).given(started(), tap('bad'), proven, repaired).thenPage('run', (page) => expect(page.defeated).toEqual(['spark-screen']))
    storiesOn(chart).given(started(), tap('bad'), proven, repaired, runPassed).then((walk) => expect(walk.metal.defeated).toEqual([]))
  })
})

describe('holding and asking', () => {
  test('a hold speaks of the cause that its node names', () => {
    given(started(), tap('yes'), revs(12_000), tap('good'), tap('loose')).thenPage('hold', (page) => expect(page.cause).toMatchObject({ title: 'Drum worn', isUnsafe: true }))
    given(started(), tap('yes'), revs(12_000), tap('good'), tap('loose'), act('held', { tagNo: '17', why: 'Drum is cracked' })).thenPhase('held').then((walk) => {
      expect(walk).toMatchObject({ causeId: 'drum-worn', tagNo: '17' })
    })
  })

  test('anything can be held, at any node, and speaks of a proven cause where there is one', () => {
    given(started(), act('held', { tagNo: '17', why: 'Tank leaks' }), closedAs('held')).thenPhase('closed').then((walk) => expect(walk).toMatchObject({ causeId: null, result: 'held' }))
    given(...toCause, proven, act('held', { tagNo: '17', why: 'Owner said no' })).then((walk) => expect(walk).toMatchObject({ causeId: 'filter-packed' }))
  })

  test('the answer of the lead is kept with the question and may send the walk to a node', () => {
    const goTo = (node: string) => by('lead', act('answered', { questionId, text: 'Look at the drum first', photoIds: [], goTo: node } as never))
    given(started(), tap('yes'), asked, by('lead', act('answered', { questionId, text: 'Yes', photoIds: [] }))).thenAt('n2').then((walk) => {
      expect(walk.questions).toMatchObject([{ text: 'Is this a rub stripe?', node: 'saw/n2', answer: { text: 'Yes', answeredBy: people.lead.id, goTo: null } }])
    })
    given(started(), tap('yes'), asked, goTo('saw/n4')).thenAt('n4').then((walk) => expect(walk.trail).toHaveLength(1))
    given(started(), act('escalated', { reason: 'Never seen this' }), asked, goTo('saw/n4')).thenAt('n4').thenPhase('at-node')
    jumps.given(started(), tap('yes'), tap('seal'), asked, goTo('seal/q1')).thenAt('seal/q1').then((walk) => expect(walk.calls).toEqual(['saw/j-seal']))
    jumps.given(started(), tap('yes'), tap('seal'), asked, goTo('saw/n3')).thenAt('n3').then((walk) => expect(walk.calls).toEqual([]))
    jumps.given(started(), tap('yes'), tap('seal'), asked, goTo('other/s')).thenAt('other/n6').then((walk) => expect(walk.calls).toEqual([]))
  })
})

describe('who holds the walk', () => {
  test('a paused walk goes on when its person resumes it, on whatever device', () => {
    given(started(), act('paused', { why: 'Lunch' })).thenPage('paused', (page) => expect([page.under.kind, page.isHandedOver]).toEqual(['check', false]))
    given(started(), act('paused', {}), by('junior', act('resumed', {}), 'mate')).then((walk) => {
      expect([walk.isPaused, walk.holder]).toEqual([false, { personId: people.junior.id, deviceId: people.mate.device }])
    })
  })

  test('a walk that was handed over waits until it is taken, and is then in other hands', () => {
    const handed = [started(), act('handed-over', { to: people.mate.id, why: 'Going home' })]
    given(...handed).thenPage('paused', (page) => expect(page.isHandedOver).toBe(true))
    given(...handed, by('mate', act('taken-over', { from: people.junior.id, why: 'Mine now' }))).then((walk) => {
      expect(walk).toMatchObject({ isPaused: false, handedTo: null, holder: { personId: people.mate.id, deviceId: people.mate.device } })
    })
  })

  test('whoever handed a walk over may take it back before it is taken', () => {
    given(started(), act('handed-over', { to: people.mate.id }), act('resumed', {})).then((walk) => expect([walk.handedTo, walk.isPaused]).toEqual([null, false]))
  })
})

describe('notes, flags, free walks', () => {
  test('notes and flags are kept with the node that they are about', () => {
    given(started(), tap('yes'), act('note-added', { text: 'Smells sour', photoIds: [] }), act('flagged', { node: 'saw/n1', text: 'Wording is odd', photoIds: [] } as never)).then((walk) => {
      expect(walk.notes.map(({ node, flagged, text }) => [node, flagged, text])).toEqual([['saw/n2', false, 'Smells sour'], ['saw/n1', true, 'Wording is odd']])
    })
  })

  test('a free walk notes checks and a cause while it is fixed', () => {
    const free = [by('lead', started({ kind: 'free' })), by('lead', act('check-noted', { title: 'Fuel line', found: 'Cracked at the clip', photoIds: [] }))]
    given(...free).thenAt('s').thenPage('free', (page) => expect(page.checks).toMatchObject([{ title: 'Fuel line', found: 'Cracked at the clip' }]))
    given(...free, by('lead', act('cause-noted', { title: 'Line cracked' }))).thenPhase('proven').thenPage('proven', (page) => {
      expect(page.cause).toEqual({ causeId: null, title: 'Line cracked', system: null, isUnsafe: false })
    })
    given(...free, by('lead', act('cause-noted', { causeId: 'filter-packed' } as never)), by('lead', repaired), by('lead', runFailed)).thenPhase('at-node').thenAt('s')
  })

  test('a walk can be given up, and remembers where', () => {
    given(started(), tap('yes'), act('abandoned', { why: 'Wrong machine' })).thenPhase('abandoned').then((walk) => expect(walk).toMatchObject({ last: { phase: 'at-node' }, node: 'saw/n2' }))
  })
})

describe('steps', () => {
  const steps = (more: Record<string, unknown>[] = []) =>
    buildChart({
      id: 'saw',
      cautions: [{ id: 'hot', word: 'CAUTION', harm: 'minor-injury', hazard: 'Hot', avoid: 'Wait' }],
      access: [{ id: 'hot-off', title: 'Hot part off', minutes: 1, cautions: ['hot'] }],
      nodes: [start(), ...more, check('n9', ['good', 'bad']), ask()],
      edges: [`s > ${String(more[0]?.['id'] ?? 'n9')}`, ...more.map((node, index) => `${String(node['id'])} > ${String(more[index + 1]?.['id'] ?? 'n9')}`), 'n9.good > ask', 'n9.bad > ask'],
    })

  test('up to three harmless steps stand on the page of the check that they prepare', () => {
    storiesOn(steps([step('x1'), step('x2'), step('x3')])).given(started()).thenPage('check', (page) => {
      expect(page.lines.map(({ place }) => place)).toEqual(['saw/x1', 'saw/x2', 'saw/x3'])
    })
    storiesOn(steps([step('x1'), step('x2'), step('x3')])).given(started(), tap('good')).thenAt('ask').then((walk) => expect(walk.minutesUsed).toBe(4))
  })

  test('of four the first has a page of its own', () => {
    const four = steps([step('x1'), step('x2'), step('x3'), step('x4')])
    storiesOn(four).given(started()).thenPage('step', (page) => expect(page.node.place).toBe('saw/x1'))
    storiesOn(four).given(started(), stepDone).thenPage('check', (page) => expect(page.lines).toHaveLength(3))
  })

  test('a step with a caution, a timer, a part that it puts out of action, or access that carries a caution has a page of its own', () => {
    for (const more of [{ cautions: ['hot'] }, { timer: { seconds: 5, rule: 'at-most' } }, { defeats: ['brake'] }, { needs: ['hot-off'] }]) {
      storiesOn(steps([step('x1', more)])).given(started(), (bench) => (bench.page.kind === 'caution' ? [{ type: 'caution-acknowledged', payload: { node: bench.place('x1'), cautionIds: [...bench.page.cautionIds] } }] : [])).thenPage('step', (page) => {
        expect(page.node.place).toBe('saw/x1')
      })
    }
  })

  test('a step ahead of an end stands alone', () => {
    const chart = buildChart({ id: 'saw', nodes: [start(), step('x1'), ask()], edges: ['s > x1', 'x1 > ask'] })
    storiesOn(chart).given(started()).thenPage('step')
    storiesOn(chart).given(started(), stepDone).thenAt('ask').then((walk) => expect(walk.secondsMeasured).toBe(10))
  })
})

test('the machine of a walk is the one that it was started for', () => {
  given(started({ machine: { ...saw, serial: '4471' } })).then((walk) => expect(walk.machine).toEqual({ ...saw, serial: '4471' }))
})
