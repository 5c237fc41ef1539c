import { describe, expect, test } from 'vitest'

import type { EventId, PersonId, WalkId } from '#shared/lib/ids.ts'
import { act, asked, Bench, by, closedAs, found, people, questionId, runPassed, started, storiesOn, tap, uuid, raw } from '#tests/support/walk-builder.ts'
import { toProven, toRepaired } from '#tests/support/saw-stories.ts'
import { jumpingChart, otherChart, sawChart, sealChart } from '#tests/support/walk-charts.ts'
import type { WalkEvent } from './events.ts'
import { guard } from './guard.ts'
import { toPinnedCharts } from './pinned-charts.ts'
import { refusalWords } from './refusals.ts'
import { newWalk } from './state.ts'

const { given } = storiesOn(sawChart)
const jumps = storiesOn(jumpingChart, sealChart, otherChart)

describe('the event itself', () => {
  const charts = toPinnedCharts([{ version: 3, document: sawChart }])
  const startedEvent = (more: object = {}, payload: object = {}): WalkEvent =>
    ({
      id: uuid(1001),
      walkId: uuid(1),
      seq: 1,
      type: 'started',
      at: '2026-03-02T09:00:00Z',
      deviceId: people.junior.device,
      personId: people.junior.id,
      payload: { kind: 'bench', chartId: 'saw', startId: 's', pins: { saw: 3 }, machine: { class: 'chain-saw', engine: 'two-stroke' }, limits: {}, ...payload },
      ...more,
    }) as unknown as WalkEvent
  const judge = (event: WalkEvent) => guard(charts, newWalk, event)?.code ?? null

  test('a walk begins with its start, at number 1, by a chart, a version and a start that are there', () => {
    expect(judge(startedEvent())).toBeNull()
    expect(judge(startedEvent({ seq: 2 }))).toBe('wrong-seq')
    expect(judge(startedEvent({ type: 'paused', payload: {} }))).toBe('not-started')
    expect(judge(startedEvent({}, { pins: { saw: 2 } }))).toBe('no-such-version')
    expect(judge(startedEvent({}, { pins: {} }))).toBe('no-such-version')
    expect(judge(startedEvent({}, { pins: { saw: 3, 'nobody-wrote-it': 1 } }))).toBe('no-such-version')
    expect(judge(startedEvent({}, { chartId: 'other' }))).toBe('no-such-version')
    expect(judge(startedEvent({}, { startId: 'n1' }))).toBe('no-such-start')
  })

  test.each([
    ['a type that nobody knows', { type: 'exploded' }, '/type'],
    ['an id that is none', { id: '17' }, '/id'],
    ['a time that is none', { at: 'noon' }, '/at'],
    ['a payload that is none', { payload: null }, '/payload'],
    ['a field that nobody asked for', { surprise: true }, null],
    ['a number below one', { seq: 0 }, '/seq'],
  ])('%s is refused by name', (_name, more, field) => {
    expect(guard(charts, newWalk, startedEvent(more))).toMatchObject({ code: 'malformed', field })
  })

  test('nonsense instead of an event is refused', () => {
    for (const nonsense of [null, undefined, 17, 'started', [], {}]) expect(judge(nonsense as never)).toBe('malformed')
  })

  test('a note of 100 kB is refused in words that say what fits', () => {
    given(started())
      .when(raw('note-added', { text: 'x'.repeat(100_000), photoIds: [] }))
      .thenRefused('note-too-long', '/payload/text')
    given(started())
      .when(raw('note-added', { text: 'é'.repeat(5000), photoIds: [] }))
      .thenAt('n1')
    given(started())
      .when(raw('note-added', { text: 'é'.repeat(5001), photoIds: [] }))
      .thenRefused('note-too-long')
    given(started())
      .when(raw('note-added', { text: '  ', photoIds: [] }))
      .thenRefused('malformed', '/payload/text')
  })

  test('an event of another walk, or with a number that does not follow, is refused', () => {
    const bench = new Bench([sawChart])
    bench.do([started()], true)
    const next = { ...startedEvent(), id: uuid(1002) as EventId, type: 'paused', payload: {} }
    expect(guard(bench.charts, bench.state, { ...next, seq: 2, walkId: uuid(2) as WalkId } as WalkEvent)?.code).toBe('wrong-walk')
    expect(guard(bench.charts, bench.state, { ...next, seq: 1 } as WalkEvent)?.code).toBe('wrong-seq')
    expect(guard(bench.charts, bench.state, { ...next, seq: 3 } as WalkEvent)?.code).toBe('wrong-seq')
    expect(guard(bench.charts, bench.state, { ...next, seq: 2 } as WalkEvent)).toBeNull()
  })

  test('a walk is started once', () => given(started()).when(started()).thenRefused('already-started'))
})

describe('who may', () => {
  test('an event speaks for the person who sends it', () => {
    const bench = new Bench([sawChart])
    bench.do([started()], true)
    const event = { ...bench.log[0], id: uuid(1002), seq: 2, type: 'paused', payload: {} } as unknown as WalkEvent
    expect(guard(bench.charts, bench.state, event, { id: people.mate.id, role: 'owner' })?.code).toBe('not-you')
  })

  test('one device holds a walk: an event of another is a fork', () => {
    given(started())
      .when(by('junior', tap('yes'), 'mate'))
      .thenRefused('other-device', '/deviceId')
  })

  test("an event for somebody else's walk is refused, even at the same device and from a lead", () => {
    given(started())
      .when(by('mate', tap('yes'), 'junior'))
      .thenRefused('other-person')
    given(started())
      .when(by('lead', act('paused', {}), 'junior'))
      .thenRefused('other-person')
  })

  test('its own person takes a walk in hand on another device by resuming it, paused or not', () => {
    given(started(), by('junior', act('resumed', {}), 'mate'))
      .when(tap('yes'))
      .thenRefused('other-device')
    given(started())
      .when(by('mate', act('resumed', {})))
      .thenRefused('other-person')
  })

  test('a walk is taken over by the person to whom it was handed, or by a lead', () => {
    const take = (from: PersonId) => act('taken-over', { from, why: 'It has to go out today' })
    given(started(), act('handed-over', { to: people.mate.id }), by('mate', take(people.junior.id))).then((walk) =>
      expect(walk.holder.personId).toBe(people.mate.id),
    )
    given(started())
      .when(by('mate', take(people.junior.id)))
      .thenRefused('not-handed-to-you')
    given(started())
      .when(by('lead', take(people.junior.id)))
      .thenAt('n1')
    given(started())
      .when(by('lead', take(people.mate.id)))
      .thenRefused('not-the-holder')
    given(started())
      .when(by('junior', take(people.junior.id)))
      .thenRefused('to-yourself')
    given(started())
      .when(act('handed-over', { to: people.junior.id }))
      .thenRefused('to-yourself')
  })

  test('only a lead answers, and only a lead starts a free walk', () => {
    const answered = act('answered', { questionId, text: 'Yes', photoIds: [] })
    given(started(), asked).when(by('mate', answered)).thenRefused('lead-only')
    given(started(), asked).when(by('lead', answered)).thenAt('n1')
    given(by('lead', started({ kind: 'free' }))).thenAt('s')
    expect(() => given(started({ kind: 'free' }))).toThrow('lead-only')
  })
})

describe('a paused walk', () => {
  const paused = [started(), asked, act('paused', {})]
  test('takes notes, answers, and whoever takes it in hand or gives it up', () => {
    for (const taken of [
      raw('note-added', { text: 'Part is on order', photoIds: [] }),
      by('lead', act('answered', { questionId, text: 'Yes', photoIds: [] })),
      act('resumed', {}),
      by('lead', act('taken-over', { from: people.junior.id, why: 'Urgent' })),
      act('abandoned', { why: 'Scrapped' }),
    ]) {
      given(...paused)
        .when(taken)
        .then(() => undefined)
    }
  })
  test('takes nothing else', () => {
    for (const refused of [
      found('n1', 'yes'),
      act('paused', {}),
      raw('flagged', { node: 'saw/n1', text: 'Odd', photoIds: [] }),
      raw('stepped-back', { toEventId: uuid(1) }),
      raw('machine-identified', { machine: { class: 'mower', engine: 'four-stroke' }, limits: {} }),
    ]) {
      given(...paused)
        .when(refused)
        .thenRefused('paused')
    }
  })
})

describe('a walk that has ended', () => {
  test('takes nothing any more', () => {
    given(started(), act('abandoned', { why: 'Scrapped' }))
      .when(raw('note-added', { text: 'x', photoIds: [] }))
      .thenRefused('walk-ended')
    given(...toRepaired, runPassed, closedAs('repaired'))
      .when(act('paused', {}))
      .thenRefused('walk-ended')
  })
})

describe('picking a symptom', () => {
  const toPick = [started({ pins: { saw: 1, seal: 1 } as never }), tap('yes'), tap('else')]
  const pick = (more: object = {}) => raw('jumped', { chartId: 'other', version: 1, startId: 's', pins: { other: 1 }, ...more })

  test('only where a symptom is asked for, and into a start that is there', () => {
    jumps
      .given(...toPick)
      .when(pick())
      .thenAt('other/n6')
    jumps.given(started()).when(pick()).thenRefused('not-a-pick')
    jumps
      .given(...toPick)
      .when(pick({ startId: 'n6' }))
      .thenRefused('no-such-start')
    jumps
      .given(...toPick)
      .when(pick({ chartId: 'nobody-wrote-it', pins: {} }))
      .thenRefused('no-such-version')
  })

  test('charts that are pinned stay at their version', () => {
    jumps
      .given(...toPick)
      .when(pick({ pins: { other: 2 } }))
      .thenRefused('pins-moved')
    jumps
      .given(...toPick)
      .when(pick({ pins: { other: 1, seal: 2 } }))
      .thenRefused('pins-moved')
    jumps
      .given(...toPick)
      .when(pick({ chartId: 'saw', version: 2, pins: {} }))
      .thenRefused('pins-moved')
    jumps
      .given(...toPick)
      .when(pick({ chartId: 'saw', pins: {} }))
      .thenAt('n1')
  })
})

describe('questions, flags, free walks', () => {
  test('a question is asked once and answered once, and an answer sends the walk to a node that is there', () => {
    const answered = (more: object = {}) => by('lead', raw('answered', { questionId, text: 'Yes', photoIds: [], ...more }))
    given(started(), asked).when(asked).thenRefused('question-exists')
    given(started()).when(answered()).thenRefused('no-such-question')
    given(started(), asked, answered()).when(answered()).thenRefused('no-such-question')
    given(started(), asked)
      .when(answered({ goTo: 'saw/n99' }))
      .thenRefused('no-such-node', '/payload/goTo')
    given(...toProven, asked)
      .when(answered({ goTo: 'saw/n3' }))
      .thenRefused('wrong-phase')
    given(...toProven, asked)
      .when(answered())
      .thenPhase('proven')
  })

  test('a flag is put on a node that is there', () => {
    given(started())
      .when(raw('flagged', { node: 'saw/n5', text: 'Odd wording', photoIds: [] }))
      .thenAt('n1')
    given(started())
      .when(raw('flagged', { node: 'saw/n99', text: 'Odd wording', photoIds: [] }))
      .thenRefused('no-such-node')
  })

  test('what is noted in a free walk is for free walks alone', () => {
    const free = [by('lead', started({ kind: 'free' }))]
    given(started())
      .when(act('check-noted', { title: 'Line', found: 'Cracked', photoIds: [] }))
      .thenRefused('free-only')
    given(started())
      .when(act('cause-noted', { title: 'Line cracked' }))
      .thenRefused('free-only')
    given(...free)
      .when(by('lead', act('cause-noted', { title: 'Line cracked' })))
      .thenPhase('proven')
    given(...free)
      .when(by('lead', act('cause-noted', {})))
      .thenRefused('malformed')
    given(...free)
      .when(by('lead', found('s', 'good')))
      .thenRefused('not-a-check')
  })
})

test('every refusal has a kebab-case code and says in whole sentences what happened and what to do', () => {
  for (const [code, words] of Object.entries(refusalWords)) {
    expect(code).toMatch(/^[a-z]+(-[a-z]+)*$/)
    expect(words, code).toMatch(/^[A-Z].*\.$/)
  }
})
