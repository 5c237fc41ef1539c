import { describe, expect, test } from 'vitest'

import { act, asked, by, closedAs, people, proven, questionId, repaired, revs, runFailed, saw, started, storiesOn, tap } from '#tests/support/walk-builder.ts'
import { toCause } from '#tests/support/saw-stories.ts'
import { jumpingChart, otherChart, sawChart, sealChart } from '#tests/support/walk-charts.ts'
import { evolve } from './evolve.ts'
import { anyVersionOf } from './pinned-charts.ts'
import { newWalk } from './state.ts'

const { given } = storiesOn(sawChart)
const jumps = storiesOn(jumpingChart, sealChart, otherChart)

describe('the beginning', () => {
  test('a walk stands at the first node behind its start, the engine stopped and everything shut', () => {
    given(started())
      .thenAt('n1')
      .thenPhase('at-node')
      .then((walk) => {
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

describe('holding and asking', () => {
  test('a hold speaks of the cause that its node names', () => {
    given(started(), tap('yes'), revs(12_000), tap('good'), tap('loose')).thenPage('hold', (page) =>
      expect(page.cause).toMatchObject({ title: 'Drum worn', isUnsafe: true }),
    )
    given(started(), tap('yes'), revs(12_000), tap('good'), tap('loose'), act('held', { tagNo: '17', why: 'Drum is cracked' }))
      .thenPhase('held')
      .then((walk) => {
        expect(walk).toMatchObject({ causeId: 'drum-worn', tagNo: '17' })
      })
  })

  test('anything can be held, at any node, and speaks of a proven cause where there is one', () => {
    given(started(), act('held', { tagNo: '17', why: 'Tank leaks' }), closedAs('held'))
      .thenPhase('closed')
      .then((walk) => expect(walk).toMatchObject({ causeId: null, result: 'held' }))
    given(...toCause, proven, act('held', { tagNo: '17', why: 'Owner said no' })).then((walk) => expect(walk).toMatchObject({ causeId: 'filter-packed' }))
  })

  test('the answer of the lead is kept with the question and may send the walk to a node', () => {
    const goTo = (node: string) => by('lead', act('answered', { questionId, text: 'Look at the drum first', photoIds: [], goTo: node } as never))
    given(started(), tap('yes'), asked, by('lead', act('answered', { questionId, text: 'Yes', photoIds: [] })))
      .thenAt('n2')
      .then((walk) => {
        expect(walk.questions).toMatchObject([
          { text: 'Is this a rub stripe?', node: 'saw/n2', answer: { text: 'Yes', answeredBy: people.lead.id, goTo: null } },
        ])
      })
    given(started(), tap('yes'), asked, goTo('saw/n4'))
      .thenAt('n4')
      .then((walk) => expect(walk.trail).toHaveLength(1))
    given(started(), act('escalated', { reason: 'Never seen this' }), asked, goTo('saw/n4'))
      .thenAt('n4')
      .thenPhase('at-node')
    jumps
      .given(started(), tap('yes'), tap('seal'), asked, goTo('seal/q1'))
      .thenAt('seal/q1')
      .then((walk) => expect(walk.calls).toEqual(['saw/j-seal']))
    jumps
      .given(started(), tap('yes'), tap('seal'), asked, goTo('saw/n3'))
      .thenAt('n3')
      .then((walk) => expect(walk.calls).toEqual([]))
    jumps
      .given(started(), tap('yes'), tap('seal'), asked, goTo('other/s'))
      .thenAt('other/n6')
      .then((walk) => expect(walk.calls).toEqual([]))
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
    given(started(), act('handed-over', { to: people.mate.id }), act('resumed', {})).then((walk) =>
      expect([walk.handedTo, walk.isPaused]).toEqual([null, false]),
    )
  })
})

describe('notes, flags, free walks', () => {
  test('notes and flags are kept with the node that they are about', () => {
    given(
      started(),
      tap('yes'),
      act('note-added', { text: 'Smells sour', photoIds: [] }),
      act('flagged', { node: 'saw/n1', text: 'Wording is odd', photoIds: [] } as never),
    ).then((walk) => {
      expect(walk.notes.map(({ node, flagged, text }) => [node, flagged, text])).toEqual([
        ['saw/n2', false, 'Smells sour'],
        ['saw/n1', true, 'Wording is odd'],
      ])
    })
  })

  test('a free walk notes checks and a cause while it is fixed', () => {
    const free = [by('lead', started({ kind: 'free' })), by('lead', act('check-noted', { title: 'Fuel line', found: 'Cracked at the clip', photoIds: [] }))]
    given(...free)
      .thenAt('s')
      .thenPage('free', (page) => expect(page.checks).toMatchObject([{ title: 'Fuel line', found: 'Cracked at the clip' }]))
    given(...free, by('lead', act('cause-noted', { title: 'Line cracked' })))
      .thenPhase('proven')
      .thenPage('proven', (page) => {
        expect(page.cause).toEqual({ causeId: null, title: 'Line cracked', system: null, isUnsafe: false })
      })
    given(...free, by('lead', act('cause-noted', { causeId: 'filter-packed' } as never)), by('lead', repaired), by('lead', runFailed))
      .thenPhase('at-node')
      .thenAt('s')
  })

  test('a walk can be given up, and remembers where', () => {
    given(started(), tap('yes'), act('abandoned', { why: 'Wrong machine' }))
      .thenPhase('abandoned')
      .then((walk) => expect(walk).toMatchObject({ last: { phase: 'at-node' }, node: 'saw/n2' }))
  })
})

test('the machine of a walk is the one that it was started for', () => {
  given(started({ machine: { ...saw, serial: '4471' } })).then((walk) => expect(walk.machine).toEqual({ ...saw, serial: '4471' }))
})
