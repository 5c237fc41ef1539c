import { describe, expect, test } from 'vitest'

import type { NodeId } from '#shared/lib/ids.ts'
import { ask, back, buildChart, check, jump, start } from '#tests/support/chart-builder.ts'
import { act, started, storiesOn, tap } from '#tests/support/walk-builder.ts'
import { jumpingChart, otherChart, sealChart } from '#tests/support/walk-charts.ts'

const jumps = storiesOn(jumpingChart, sealChart, otherChart)

describe('jumps', () => {
  const toChoice = [started(), tap('yes')]

  test('a returning jump goes through the called chart and comes back to the edge of the caller', () => {
    jumps
      .given(...toChoice, tap('seal'))
      .thenAt('seal/k1')
      .then((walk) => expect(walk.calls).toEqual(['saw/j-seal']))
    jumps
      .given(...toChoice, tap('seal'), tap('tight'))
      .thenAt('n3')
      .then((walk) => expect(walk.calls).toEqual([]))
  })

  test('a cause may be found inside the called chart', () => {
    jumps
      .given(...toChoice, tap('seal'), tap('drop'), tap('gone'))
      .thenAt('seal/d1')
      .thenPhase('at-cause')
  })

  test('a one-way jump goes to the node that it names and forgets who called', () => {
    const away = buildChart({
      id: 'seal',
      nodes: [start(), check('k1', ['tight', 'drop', 'off']), jump('j-off', 'other'), back()],
      edges: ['s > k1', 'k1.tight > back', 'k1.drop > back', 'k1.off > j-off'],
    })
    jumps.given(...toChoice, tap('away')).thenAt('other/n7')
    storiesOn(jumpingChart, away, otherChart)
      .given(...toChoice, tap('seal'), tap('off'))
      .thenAt('other/n6')
      .then((walk) => expect(walk.calls).toEqual([]))
  })

  test('one-way jumps may lead round, back into the middle of the first chart', () => {
    jumps.given(...toChoice, tap('away'), tap('home')).thenAt('n3')
  })

  test('a one-way jump into a chart that is not there yet asks the lead', () => {
    jumps
      .given(...toChoice, tap('missing'))
      .thenPhase('escalated')
      .then((walk) => expect(walk).toMatchObject({ reason: 'not-here-yet', node: 'saw/j-missing' }))
  })

  test('a returning jump into a chart that is not there yet passes on, and the next page says so', () => {
    jumps
      .given(...toChoice, tap('absent'))
      .thenAt('n3')
      .then((walk) => expect(walk.arrival.missing).toEqual([{ jump: 'saw/j-absent', chartId: 'nobody-wrote-it' }]))
    jumps.given(...toChoice, tap('absent'), tap('good')).then((walk) => expect(walk.arrival.missing).toEqual([]))
  })

  test('a picked symptom starts there, its charts pinned beside the others', () => {
    const pick = act('jumped', { chartId: 'other' as never, version: 1, startId: 's' as NodeId as never, pins: {} })
    jumps
      .given(...toChoice, tap('else'))
      .thenAt('j-pick')
      .thenPage('pick', (page) => expect(page.starts.map(({ chartId }) => chartId)).toEqual(['saw', 'seal', 'other']))
    jumps
      .given(...toChoice, tap('else'), pick)
      .thenAt('other/n6')
      .then((walk) => {
        expect(walk.pins).toEqual({ saw: 1, seal: 1, other: 1 })
        expect(walk.trail.at(-1)).toMatchObject({ kind: 'pick', to: 'other/s' })
      })
    jumps
      .given(...toChoice, tap('else'), pick)
      .when(act('stepped-back', ({ log }) => ({ toEventId: log.at(-1)?.id as never })))
      .thenAt('j-pick')
  })

  test('passing one node twice in one event is a ring, and the lead is asked', () => {
    const ring = buildChart({
      id: 'saw',
      nodes: [start(), check('n1', ['good', 'round']), jump('j1', 'saw', { at: 'j2' }), jump('j2', 'saw', { at: 'j1' }), ask()],
      edges: ['s > n1', 'n1.good > ask', 'n1.round > j1'],
    })
    storiesOn(ring)
      .given(started(), tap('round'))
      .thenPhase('escalated')
      .then((walk) => expect(walk).toMatchObject({ reason: 'ring' }))
  })

  test('a chart that calls itself without end asks the lead', () => {
    const self = buildChart({
      id: 'saw',
      nodes: [start(), check('n1', ['good', 'call']), jump('j1', 'saw', { returns: true }), back(), ask()],
      edges: ['s > n1', 'n1.good > ask', 'n1.call > j1', 'j1 > ask'],
    })
    storiesOn(self)
      .given(started(), tap('call'))
      .thenAt('n1')
      .then((walk) => expect(walk.calls).toEqual(['saw/j1']))
    storiesOn(self)
      .given(started(), tap('call'), tap('call'))
      .thenPhase('escalated')
      .then((walk) => expect(walk).toMatchObject({ reason: 'ring' }))
  })

  test('a back that nobody called counts as asking the lead', () => {
    storiesOn(sealChart)
      .given(started(), tap('tight'))
      .thenAt('back')
      .thenPage('ask', (page) => expect(page.reason).toBe('no-cause-found'))
    storiesOn(sealChart)
      .given(started(), tap('tight'), act('escalated', { reason: 'no-cause-found' }))
      .thenPhase('escalated')
  })

  test('an outcome without an edge asks the lead', () => {
    const open = buildChart({ id: 'saw', nodes: [start(), check('n1', ['good', 'bad'])], edges: ['s > n1'] })
    storiesOn(open)
      .given(started(), tap('bad'))
      .thenPhase('escalated')
      .then((walk) => expect(walk).toMatchObject({ reason: 'no-way-on', node: 'saw/n1' }))
  })
})

describe('nodes for other machines', () => {
  const trimmer = { class: 'line-trimmer', engine: 'two-stroke' } as const
  const chart = (otherwise?: string) =>
    buildChart({
      id: 'saw',
      nodes: [
        start(),
        check('n1', ['good', 'bad'], { onlyFor: { classes: ['chain-saw'], ...(otherwise ? { otherwise } : {}) } }),
        check('n2', ['good', 'bad']),
        check('n3', ['good', 'bad']),
        ask(),
      ],
      edges: ['s > n1', 'n1.good > n2', 'n1.bad > ask', 'n2.good > ask', 'n2.bad > ask', 'n3.good > ask', 'n3.bad > ask'],
    })

  test('on its own machine a node is asked, on another the walk passes along its normal edge, with no finding', () => {
    storiesOn(chart()).given(started()).thenAt('n1')
    storiesOn(chart())
      .given(started({ machine: trimmer }))
      .thenAt('n2')
      .then((walk) => expect(walk.trail).toEqual([]))
  })

  test('where the chart names another node, the walk goes there', () => {
    storiesOn(chart('n3'))
      .given(started({ machine: trimmer }))
      .thenAt('n3')
  })

  test('a machine that is identified later counts from the next node on', () => {
    const later = act('machine-identified', { machine: trimmer, limits: { fullSpeed: { min: 9000, unit: '1/min' } } as never })
    storiesOn(chart())
      .given(started(), later)
      .thenAt('n1')
      .then((walk) => expect([walk.machine, walk.limits]).toEqual([trimmer, { fullSpeed: { min: 9000, unit: '1/min' } }]))
  })
})
