import { describe, expect, test } from 'vitest'

import type { EventId, PersonId, WalkId } from '#shared/lib/ids.ts'
import { ask, buildChart, cause, check, proof, reading, start, step } from '#tests/support/chart-builder.ts'
import {
  access,
  act,
  again,
  answer,
  asked,
  backTo,
  Bench,
  by,
  closedAs,
  found,
  noticed,
  people,
  proven,
  questionId,
  repaired,
  revs,
  runFailed,
  runItems,
  runPassed,
  skipped,
  started,
  storiesOn,
  tap,
  uuid,
  type Act,
} from '#tests/support/walk-builder.ts'
import { jumpingChart, otherChart, sawChart, sealChart } from '#tests/support/walk-charts.ts'
import type { WalkEvent } from './events.ts'
import { guard } from './guard.ts'
import { toPinnedCharts } from './pinned-charts.ts'
import { newWalk } from './state.ts'

const { given } = storiesOn(sawChart)
const jumps = storiesOn(jumpingChart, sealChart, otherChart)
/** Lets a story name ids as plain words; the guard is what is under test. */
const raw = (type: Parameters<typeof act>[0], payload: unknown): Act => act(type, payload as never)
const toReading = [started(), tap('yes')]
const toFilter = [...toReading, revs(9850)]
const toProof = [...toFilter, tap('dark')]
const toCause = [...toProof, revs(12_400)]
const toProven = [...toCause, proven]
const toRepaired = [...toProven, repaired]
const toUnsafe = [...toReading, revs(12_000), tap('stripe'), answer({ outcome: 'gone' as never, note: 'Worn thin' }), proven]

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
    given(started()).when(raw('note-added', { text: 'x'.repeat(100_000), photoIds: [] })).thenRefused('note-too-long', '/payload/text')
    given(started()).when(raw('note-added', { text: 'é'.repeat(5000), photoIds: [] })).thenAt('n1')
    given(started()).when(raw('note-added', { text: 'é'.repeat(5001), photoIds: [] })).thenRefused('note-too-long')
    given(started()).when(raw('note-added', { text: '  ', photoIds: [] })).thenRefused('malformed', '/payload/text')
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
    given(started()).when(by('junior', tap('yes'), 'mate')).thenRefused('other-device', '/deviceId')
  })

  test("an event for somebody else's walk is refused, even at the same device and from a lead", () => {
    given(started()).when(by('mate', tap('yes'), 'junior')).thenRefused('other-person')
    given(started()).when(by('lead', act('paused', {}), 'junior')).thenRefused('other-person')
  })

  test('its own person takes a walk in hand on another device by resuming it, paused or not', () => {
    given(started(), by('junior', act('resumed', {}), 'mate')).when(tap('yes')).thenRefused('other-device')
    given(started()).when(by('mate', act('resumed', {}))).thenRefused('other-person')
  })

  test('a walk is taken over by the person to whom it was handed, or by a lead', () => {
    const take = (from: PersonId) => act('taken-over', { from, why: 'It has to go out today' })
    given(started(), act('handed-over', { to: people.mate.id }), by('mate', take(people.junior.id))).then((walk) => expect(walk.holder.personId).toBe(people.mate.id))
    given(started()).when(by('mate', take(people.junior.id))).thenRefused('not-handed-to-you')
    given(started()).when(by('lead', take(people.junior.id))).thenAt('n1')
    given(started()).when(by('lead', take(people.mate.id))).thenRefused('not-the-holder')
    given(started()).when(by('junior', take(people.junior.id))).thenRefused('to-yourself')
    given(started()).when(act('handed-over', { to: people.junior.id })).thenRefused('to-yourself')
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
    for (const taken of [raw('note-added', { text: 'Part is on order', photoIds: [] }), by('lead', act('answered', { questionId, text: 'Yes', photoIds: [] })), act('resumed', {}), by('lead', act('taken-over', { from: people.junior.id, why: 'Urgent' })), act('abandoned', { why: 'Scrapped' })]) {
      given(...paused).when(taken).then(() => undefined)
    }
  })
  test('takes nothing else', () => {
    for (const refused of [found('n1', 'yes'), act('paused', {}), raw('flagged', { node: 'saw/n1', text: 'Odd', photoIds: [] }), raw('stepped-back', { toEventId: uuid(1) }), raw('machine-identified', { machine: { class: 'mower', engine: 'four-stroke' }, limits: {} })]) {
      given(...paused).when(refused).thenRefused('paused')
    }
  })
})

describe('a walk that has ended', () => {
  test('takes nothing any more', () => {
    given(started(), act('abandoned', { why: 'Scrapped' })).when(raw('note-added', { text: 'x', photoIds: [] })).thenRefused('walk-ended')
    given(...toRepaired, runPassed, closedAs('repaired')).when(act('paused', {})).thenRefused('walk-ended')
  })
})

describe('findings', () => {
  test('a finding for a check that the walk has left, or has not reached, is refused', () => {
    given(...toReading).when(found('n1', 'yes')).thenRefused('wrong-node', '/payload/node')
    given(...toReading).when(found('n3', 'good')).thenRefused('wrong-node')
    given(...toReading).when(found('nowhere/n1', 'good')).thenRefused('wrong-node')
    given(...toCause).when(found('p3', 'gone')).thenRefused('wrong-phase')
  })

  test('an outcome that the check lacks is refused', () => given(started()).when(found('n1', 'maybe')).thenRefused('no-such-outcome', '/payload/outcome'))

  test('a check takes no value', () => {
    given(...toFilter).when(found('n3', 'good', { value: 3 })).thenRefused('value-not-asked')
    given(...toFilter).when(found('n3', 'good', { judgedBy: 'limits' })).thenRefused('nothing-to-judge')
  })

  describe('on a reading', () => {
    const record = (outcome: string, more: object) => given(...toReading).when(found('n2', outcome, more as never))

    test('the outcome is the one whose band holds the value', () => {
      record('low', { value: 9850, unit: '1/min', judgedBy: 'limits' }).thenAt('n3')
      record('in', { value: 9850, unit: '1/min', judgedBy: 'limits' }).thenRefused('not-the-band', '/payload/outcome')
      record('in', { value: 9850, unit: '1/min', judgedBy: 'hand' }).thenRefused('not-the-band')
      record('in', { value: 11_000, unit: '1/min', judgedBy: 'limits' }).thenAt('n4')
    })

    test('an empty value is never a pass', () => {
      record('in', {}).thenRefused('value-missing', '/payload/value')
      record('in', { judgedBy: 'limits' }).thenRefused('value-missing')
      record('in', { unit: '1/min', judgedBy: 'limits' }).thenRefused('value-missing')
      record('in', { value: Number.NaN, unit: '1/min' }).thenRefused('malformed', '/payload/value')
    })

    test('a value has its unit, and one that fits', () => {
      record('in', { value: 12_000 }).thenRefused('unit-missing')
      record('in', { value: 12_000, unit: 'mm' }).thenRefused('wrong-unit')
      record('in', { value: 12_000, unit: 'rpm' }).thenRefused('malformed')
    })

    test('an outcome without a band is a button: no value, by hand', () => {
      record('hunts', {}).thenAt('n4')
      record('hunts', { value: 9000, unit: '1/min' }).thenAt('n4')
      record('hunts', { judgedBy: 'limits' }).thenRefused('nothing-to-judge')
    })

    test('a single reading takes one value, the one that counts', () => {
      record('low', { value: 9000, values: [9000], unit: '1/min', judgedBy: 'limits' }).thenAt('n3')
      record('low', { value: 9000, values: [9100, 9000], unit: '1/min', judgedBy: 'limits' }).thenRefused('too-many-values')
      record('low', { value: 9000, values: [9100], unit: '1/min', judgedBy: 'limits' }).thenRefused('value-not-last')
      record('low', { values: [9100], unit: '1/min', judgedBy: 'limits' }).thenRefused('value-missing')
    })

    test('the limits that a finding carries are those in force', () => {
      record('low', { value: 9000, unit: '1/min', judgedBy: 'limits', limits: { min: 11_000, unit: '1/min' } }).thenAt('n3')
      record('in', { value: 9000, unit: '1/min', judgedBy: 'limits', limits: { min: 8000, unit: '1/min' } }).thenRefused('not-the-band')
      record('low', { value: 9000, unit: '1/min', judgedBy: 'limits', limits: { min: 10_000, unit: '1/min' } }).thenRefused('other-limits')
    })
  })

  describe('on a reading by a spec key', () => {
    const chart = buildChart({
      id: 'saw',
      specKeys: [{ id: 'fullSpeed', title: 'Full speed', quantity: 'rotational-speed', unit: '1/min' }],
      nodes: [start(), reading('n1', { limits: { spec: 'fullSpeed' } }), ask()],
      edges: ['s > n1', 'n1.low > ask', 'n1.in > ask'],
    })
    const at = (limits: object) => storiesOn(chart).given(started({ limits: limits as never }))
    const record = (outcome: string, judgedBy: 'hand' | 'limits') => found('n1', outcome, { value: 9000, unit: '1/min', judgedBy })

    test('known limits judge; unknown ones leave it to the person, and nothing passes by itself', () => {
      at({ fullSpeed: { min: 8000, unit: '1/min' } }).when(record('in', 'limits')).thenAt('ask')
      at({ fullSpeed: { min: 10_000, unit: '1/min' } }).when(record('in', 'limits')).thenRefused('not-the-band')
      at({}).when(record('in', 'limits')).thenRefused('limits-unknown')
      at({}).when(record('in', 'hand')).thenAt('ask')
      at({}).when(found('n1', 'in')).thenRefused('value-missing')
    })

    test('a machine that is identified later brings its limits to later readings', () => {
      const identified = raw('machine-identified', { machine: { class: 'chain-saw', engine: 'two-stroke' }, limits: { fullSpeed: { min: 8000, unit: '1/min' } } })
      storiesOn(chart).given(started(), identified).when(record('low', 'hand')).thenRefused('not-the-band')
    })
  })

  describe('on a reading that repeats until equal', () => {
    const chart = buildChart({
      id: 'saw',
      nodes: [
        start(),
        reading('n1', {
          quantity: 'pressure',
          unit: 'psi',
          limits: { min: 100 },
          repeat: { equal: 2, within: 5, atMost: 4 },
          outcomes: [{ id: 'low', title: 'Low' }, { id: 'in', title: 'In', normal: true }, { id: 'uneven', title: 'Never equal' }],
        }),
        ask(),
      ],
      edges: ['s > n1', 'n1.low > ask', 'n1.in > ask', 'n1.uneven > ask'],
    })
    const pulls = (values: number[], outcome: string, unit: 'psi' | 'kPa' = 'psi', judgedBy: 'hand' | 'limits' = 'limits') =>
      storiesOn(chart).given(started()).when(found('n1', outcome, { values, value: values.at(-1) as number, unit, judgedBy }))

    test('the last values have to be equal, and the last one counts', () => {
      pulls([90, 120, 118], 'in').thenAt('ask')
      pulls([120, 125], 'in').thenAt('ask')
      pulls([120, 90, 92], 'low').thenAt('ask')
      pulls([120], 'in').thenRefused('not-equal-yet', '/payload/values')
      pulls([120, 118, 90], 'low').thenRefused('not-equal-yet')
    })

    test('the tolerance is in the unit of the chart, whatever unit was typed', () => {
      pulls([800, 834], 'in', 'kPa').thenAt('ask') // 34 kPa are 4.93 psi
      pulls([800, 835], 'in', 'kPa').thenRefused('not-equal-yet') // 35 kPa are 5.08 psi
    })

    test('values that never settle are an outcome without a band, by hand', () => {
      pulls([80, 100, 120, 140], 'uneven', 'psi', 'hand').thenAt('ask')
      pulls([80, 100, 120, 140], 'in').thenRefused('not-equal-yet')
      pulls([80, 100, 120, 140, 141], 'in').thenRefused('too-many-values')
    })
  })

  describe('on a proof', () => {
    const prove = (outcome: string, more: object) => given(...toProof).when(found('p3', outcome, more as never))

    test('the compared reading judges: to confirm takes a value within its limits', () => {
      prove('gone', { value: 12_400, unit: '1/min', judgedBy: 'limits' }).thenAt('c3')
      prove('gone', { value: 9900, unit: '1/min', judgedBy: 'limits' }).thenRefused('not-the-band')
      prove('still', { value: 12_400, unit: '1/min', judgedBy: 'limits' }).thenRefused('not-the-band')
      prove('gone', {}).thenRefused('value-missing')
      prove('gone', { value: 12_400, unit: 'psi' }).thenRefused('wrong-unit')
    })

    test('that nothing changed may be said without a value', () => prove('still', {}).thenAt('n4'))

    const bare = (by: string, compares?: object) =>
      buildChart({
        id: 'saw',
        nodes: [start(), check('n1', ['good', 'dark']), reading('n2'), proof('p1', 'filter-packed', { by, ...(compares ? { compares } : {}) }), cause('c1', 'filter-packed'), ask()],
        edges: ['s > n1', 'n1.good > n2', 'n1.dark > p1', 'n2.low > ask', 'n2.in > ask', 'p1.gone > c1', 'p1.still > n2'],
      })

    test('what it compares with is on the trail, or comes with it, judged alike', () => {
      const chart = bare('isolation', { node: 'n2', confirmsWhen: ['in'] })
      const gone = { value: 12_000, unit: '1/min', judgedBy: 'limits' }
      const proveWith = (before: unknown) => storiesOn(chart).given(started(), tap('dark')).when(found('p1', 'gone', { ...gone, ...(before ? { before } : {}) } as never))
      proveWith(null).thenRefused('before-missing', '/payload/before')
      proveWith({ outcome: 'low', value: 9000, unit: '1/min' }).thenAt('c1')
      proveWith({ outcome: 'in', value: 9000, unit: '1/min' }).thenRefused('not-the-band', '/payload/before/outcome')
      proveWith({ outcome: 'low' }).thenRefused('value-missing', '/payload/before/value')
      proveWith({ outcome: 'dark' }).thenRefused('no-such-outcome', '/payload/before/outcome')
    })

    test('one that compares with nothing takes nothing before', () => {
      storiesOn(bare('isolation')).given(started(), tap('dark')).when(found('p1', 'gone', { before: { outcome: 'low' } } as never)).thenRefused('before-not-asked')
      storiesOn(bare('isolation')).given(started(), tap('dark')).when(found('p1', 'gone')).thenAt('c1')
    })

    test('one by sight is confirmed by a second look with a note', () => {
      const look = (note?: string) => storiesOn(bare('sight')).given(started(), tap('dark')).when(found('p1', 'gone', note === undefined ? {} : { note }))
      look().thenRefused('note-missing', '/payload/note')
      look('  ').thenRefused('note-missing')
      look('Grey felt in the folds').thenAt('c1')
      storiesOn(bare('sight')).given(started(), tap('dark')).when(found('p1', 'still')).thenAt('n2')
    })
  })

  test('an answer is recorded again only as it stands on offer', () => {
    const back = [...toFilter, tap('dusty'), backTo('n3')]
    const reuse = (outcome: string, node: string): Act => (bench) => found('n3', outcome, { reuses: bench.eventAt(node) })(bench)
    given(...back).when(again).thenAt('n4')
    given(...back).when(reuse('good', 'n3')).thenRefused('not-offered', '/payload/reuses')
    given(...back).when(reuse('dusty', 'n2')).thenRefused('not-offered')
    given(...toFilter).when(reuse('dusty', 'n2')).thenRefused('not-offered')
  })
})

describe('steps and skips', () => {
  test('a step is done where the walk stands, and a step is no check', () => {
    const chart = buildChart({ id: 'saw', nodes: [start(), step('x1'), ask()], edges: ['s > x1', 'x1 > ask'] })
    storiesOn(chart).given(started()).when(raw('step-done', { node: 'saw/x1', seconds: 3 })).thenAt('ask')
    storiesOn(chart).given(started()).when(raw('step-done', { node: 'saw/ask', seconds: 3 })).thenRefused('wrong-node')
    storiesOn(chart).given(started()).when(found('x1', 'good')).thenRefused('not-a-check')
    storiesOn(chart).given(started()).when(skipped('x1')).thenRefused('not-a-check')
    given(started()).when(raw('step-done', { node: 'saw/n1', seconds: 3 })).thenRefused('not-a-step')
    given(...toFilter).when(skipped('n2')).thenRefused('wrong-node')
  })

  test('a check can be left without an answer before its cautions are read', () => {
    const chart = buildChart({ id: 'saw', nodes: [start(), check('n1', ['good', 'bad'], { cautions: ['hot'] }), ask()], edges: ['s > n1', 'n1.good > ask', 'n1.bad > ask'] })
    storiesOn(chart).given(started()).when(skipped('n1', 'cannot')).thenAt('ask')
    storiesOn(chart).given(started()).when(found('n1', 'good')).thenRefused('cautions-pending')
  })

  test('a step back goes to what is on the trail', () => {
    given(...toFilter).when(raw('stepped-back', { toEventId: uuid(77) })).thenRefused('not-on-trail')
    given(...toFilter, tap('good'), backTo('n3')).when(raw('stepped-back', { toEventId: uuid(1004) })).thenRefused('not-on-trail')
    given(...toRepaired).when(backTo('n3')).thenRefused('wrong-phase')
    given(started(), act('held', { tagNo: '1', why: 'Leaks' })).when(raw('stepped-back', { toEventId: uuid(1001) })).thenRefused('wrong-phase')
  })
})

describe('noticed out of turn', () => {
  const chart = buildChart({
    id: 'saw',
    access: [{ id: 'top-off', title: 'Top off', minutes: 1 }, { id: 'warm', title: 'Warm', minutes: 3, excludes: ['top-off'] }],
    nodes: [
      start(),
      check('n1', ['good', 'bad']),
      check('n2', ['good', 'bad'], { needs: ['top-off'] }),
      check('n3', ['good', 'bad'], { machine: 'running' }),
      check('n4', ['good', 'bad'], { closed: ['top-off'] }),
      check('n5', ['good', 'bad'], { onlyFor: { classes: ['mower'], otherwise: 'n6' } }),
      check('n6', ['good', 'bad'], { defeats: ['brake'], restores: ['brake'] }),
      check('n7', ['good', 'bad'], { needsOneOf: [['top-off'], ['warm']] }),
      reading('n8', { repeat: { equal: 2, within: 50, atMost: 5 } }),
      proof('p9', 'filter-packed'),
      cause('c9', 'filter-packed'),
      ask(),
    ],
    edges: ['s > n1', 'n1.good > n2', 'n1.bad > ask', 'n2.good > n3', 'n2.bad > ask', 'n3.good > n4', 'n3.bad > ask', 'n4.good > n5', 'n4.bad > ask', 'n5.good > n6', 'n5.bad > ask', 'n6.good > n7', 'n6.bad > ask', 'n7.good > n8', 'n7.bad > p9', 'n8.low > ask', 'n8.in > ask', 'p9.gone > c9', 'p9.still > ask'],
  })
  const saw = storiesOn(chart)
  const opened = [started(), access(['top-off'])]

  test('what its check needs has to be open, in one way or another, and nothing in the way', () => {
    saw.given(started()).when(noticed('n2', 'bad')).thenRefused('access-not-open')
    saw.given(...opened).when(noticed('n2', 'bad')).thenAt('n1')
    saw.given(started()).when(noticed('n7', 'bad')).thenRefused('access-not-open')
    saw.given(...opened).when(noticed('n7', 'bad')).thenAt('n1')
    saw.given(started()).when(noticed('n4', 'bad')).thenAt('n1')
    saw.given(...opened).when(noticed('n4', 'bad')).thenRefused('access-in-the-way')
  })

  test('the engine has to be as the check wants it', () => saw.given(started()).when(noticed('n3', 'bad')).thenRefused('wrong-machine-state'))

  test('the node where the walk stands is recorded as its finding, and proofs only in turn', () => {
    saw.given(started()).when(noticed('n1', 'bad')).thenRefused('stands-here')
    saw.given(started()).when(noticed('p9', 'gone')).thenRefused('only-in-turn')
    saw.given(started()).when(noticed('n6', 'bad')).thenRefused('only-in-turn')
    saw.given(started()).when(noticed('ask', 'bad')).thenRefused('not-a-check')
    saw.given(started()).when(noticed('n99', 'bad')).thenRefused('no-such-node')
    saw.given(started()).when(noticed('n5', 'bad')).thenRefused('not-for-this-machine')
  })

  test('what has its finding is not noticed, until a step back has spent it', () => {
    saw.given(...opened, tap('good')).when(noticed('n1', 'bad')).thenRefused('already-found')
    saw.given(...opened, tap('good'), tap('good'), backTo('n1')).when(noticed('n2', 'bad')).thenAt('n1')
  })

  test('it has an outcome of the check, or a value that tells one', () => {
    saw.given(...opened).when(noticed('n2', 'odd')).thenRefused('no-such-outcome')
    saw.given(...opened).when(raw('noticed', { node: 'saw/n2', photoIds: [] })).thenRefused('no-such-outcome')
    saw.given(...opened).when(raw('noticed', { node: 'saw/n8', photoIds: [] })).thenRefused('value-missing')
    saw.given(...opened).when(raw('noticed', { node: 'saw/n8', value: 9000, unit: '1/min', photoIds: [] })).thenRefused('only-in-turn')
    given(...toFilter).when(raw('noticed', { node: 'saw/n2', value: 9000, photoIds: [] })).thenRefused('already-found')
  })

  test('only checks of the charts that the walk is in', () => {
    jumps.given(started(), tap('yes')).when(noticed('seal/k1', 'tight')).thenRefused('not-on-stack')
    jumps.given(started(), tap('yes'), tap('seal')).when(noticed('n3', 'good')).thenAt('seal/k1')
    jumps.given(started(), tap('yes'), tap('away')).when(noticed('n3', 'good')).thenRefused('not-on-stack')
  })
})

describe('access out of turn', () => {
  test('each opening has its needs open, and nothing open that it excludes', () => {
    given(started()).when(access(['lead-off', 'cover-off'])).thenAt('n1').then((walk) => expect(walk.minutesUsed).toBe(5))
    given(started()).when(access(['cover-off'])).thenRefused('needs-not-open', '/payload/opened/0')
    given(started()).when(access(['cover-off', 'lead-off'])).thenRefused('needs-not-open')
    given(started(), access(['lead-off'])).when(access(['warm'])).thenRefused('excluded-open')
    given(started(), access(['lead-off'])).when(access(['warm'], ['lead-off'])).thenAt('n1')
  })

  test('what is open is not opened, what is shut is not closed, what nobody knows is neither', () => {
    given(started(), access(['lead-off'])).when(access(['lead-off'])).thenRefused('already-open')
    given(started()).when(access(['lead-off', 'lead-off'])).thenRefused('already-open', '/payload/opened/1')
    given(started()).when(access([], ['lead-off'])).thenRefused('not-open', '/payload/closed/0')
    given(started()).when(access(['nobody-knows-it'])).thenRefused('no-such-access')
    given(started()).when(access([])).thenRefused('nothing-to-change')
  })
})

describe('picking a symptom', () => {
  const toPick = [started({ pins: { saw: 1, seal: 1 } as never }), tap('yes'), tap('else')]
  const pick = (more: object = {}) => raw('jumped', { chartId: 'other', version: 1, startId: 's', pins: { other: 1 }, ...more })

  test('only where a symptom is asked for, and into a start that is there', () => {
    jumps.given(...toPick).when(pick()).thenAt('other/n6')
    jumps.given(started()).when(pick()).thenRefused('not-a-pick')
    jumps.given(...toPick).when(pick({ startId: 'n6' })).thenRefused('no-such-start')
    jumps.given(...toPick).when(pick({ chartId: 'nobody-wrote-it', pins: {} })).thenRefused('no-such-version')
  })

  test('charts that are pinned stay at their version', () => {
    jumps.given(...toPick).when(pick({ pins: { other: 2 } })).thenRefused('pins-moved')
    jumps.given(...toPick).when(pick({ pins: { other: 1, seal: 2 } })).thenRefused('pins-moved')
    jumps.given(...toPick).when(pick({ chartId: 'saw', version: 2, pins: {} })).thenRefused('pins-moved')
    jumps.given(...toPick).when(pick({ chartId: 'saw', pins: {} })).thenAt('n1')
  })
})

describe('suspects, causes and proofs', () => {
  const sight = { note: 'Seen once more', photoIds: [] }

  test('a suspect is named where a proof of it is in reach', () => {
    given(...toReading).when(raw('suspect-named', { causeId: 'drum-worn' })).thenAt('p4')
    given(...toReading).when(raw('suspect-named', { causeId: 'never-cleaned' })).thenRefused('no-proof-in-reach')
    given(...toFilter, tap('good')).when(raw('suspect-named', { causeId: 'filter-packed' })).thenRefused('no-proof-in-reach')
    given(...toRepaired, runFailed).when(raw('suspect-named', { causeId: 'filter-packed' })).thenRefused('already-ruled-out')
    given(...toCause).when(raw('suspect-named', { causeId: 'drum-worn' })).thenRefused('wrong-phase')
  })

  test('a cause is proven where the walk stands, by its proof or by a second look: one of the two', () => {
    const prove = (more: object) => given(...toCause).when((bench) => raw('cause-proven', { causeId: 'filter-packed', ...more, ...('proof' in more ? { proof: undefined, proofEventId: bench.eventAt(String(more.proof)) } : {}) })(bench))
    given(...toCause).when(proven).thenPhase('proven')
    given(...toCause).when(raw('cause-proven', { causeId: 'filter-packed', sight })).thenPhase('proven')
    given(...toCause).when(raw('cause-proven', { causeId: 'drum-worn', sight })).thenRefused('not-that-cause')
    given(...toCause).when(raw('cause-proven', { causeId: 'filter-packed' })).thenRefused('proof-or-sight')
    given(...toCause).when(raw('cause-proven', { causeId: 'filter-packed', sight, proofEventId: uuid(1005) })).thenRefused('proof-or-sight')
    given(...toCause).when(raw('cause-proven', { causeId: 'filter-packed', sight: { note: ' ', photoIds: [] } })).thenRefused('malformed', '/payload/sight/note')
    prove({ proofEventId: uuid(77) }).thenRefused('not-a-proof')
    prove({ proofEventId: uuid(1002) }).thenRefused('not-a-proof')
    given(...toReading).when(raw('cause-proven', { causeId: 'filter-packed', sight })).thenRefused('wrong-phase')
  })

  test('a cause may turn out not to be it, where the walk stands', () => {
    given(...toCause).when(raw('cause-not-proven', { causeId: 'filter-packed', sight })).thenAt('p3')
    given(...toCause).when(raw('cause-not-proven', { causeId: 'drum-worn', sight })).thenRefused('not-that-cause')
    given(...toCause).when(raw('cause-not-proven', { causeId: 'filter-packed' })).thenRefused('proof-or-sight')
  })

  test('what led to it, and work for the way out, are things that the charts know', () => {
    given(...toProven).when(raw('contributing-set', { causeIds: ['never-cleaned'] })).thenPhase('proven')
    given(...toProven).when(raw('contributing-set', { causeIds: ['moon-phase'] })).thenRefused('no-such-cause')
    given(...toProven).when(raw('service-changed', { added: ['grease'], dropped: [] })).thenPhase('proven')
    given(...toProven).when(raw('service-changed', { added: ['polish'], dropped: [] })).thenRefused('no-such-service-item', '/payload/added')
    given(...toProven).when(raw('service-changed', { added: [], dropped: ['grease'] })).thenRefused('no-such-service-item', '/payload/dropped')
  })
})

describe('repair, ticks and run', () => {
  test('repaired is what was proven, and of the service list what was on it', () => {
    given(...toCause).when(repaired).thenRefused('wrong-phase')
    given(...toProven).when(raw('repair-done', { serviceDone: ['grease'], partsUsed: [], minutes: 5 })).thenRefused('no-such-service-item')
    given(...toProven).when(repaired).thenPhase('repaired')
  })

  test('an item is ticked on a list that is open', () => {
    const tick = (list: string, id: string) => raw('ticked', { list, id, on: true })
    given(...toProven).when(tick('fix', 'remedy')).thenPhase('proven')
    given(...toProven).when(tick('fix', 'part-9')).thenRefused('no-such-item')
    given(...toProven).when(tick('service', 'grease')).thenRefused('no-such-item')
    given(...toProven).when(tick('run', 'full-speed')).thenRefused('list-closed')
    given(...toRepaired).when(tick('run', 'full-speed')).thenPhase('repaired')
    given(...toRepaired).when(tick('run', 'seal-dry')).thenRefused('no-such-item')
    given(...toRepaired).when(tick('fix', 'remedy')).thenRefused('list-closed')
    given(started()).when(tick('service', 'grease')).thenRefused('list-closed')
  })

  const passed = (items: object) => raw('run-passed', { items })
  test('a run is passed when every item of the machine is done, in order or not for this machine', () => {
    given(...toRepaired).when(runPassed).thenPhase('run-passed')
    given(...toRepaired).when(passed(runItems('not-applicable'))).thenPhase('run-passed')
    given(...toRepaired).when(passed(runItems('ok').slice(1))).thenRefused('run-incomplete')
    given(...toRepaired).when(passed([...runItems('ok'), ...runItems('ok').slice(0, 1)])).thenRefused('no-such-item')
    given(...toRepaired).when(passed([...runItems('ok').slice(1), ...runItems('failed').slice(0, 1)])).thenRefused('run-not-ok')
    given(...toProven).when(runPassed).thenRefused('wrong-phase')
  })

  test('a value of the run has its unit, and out of limits it is not in order', () => {
    const limits = { fullSpeed: { min: 11_000, max: 13_500, unit: '1/min' } }
    const toRun = [started({ limits: limits as never }), ...toRepaired.slice(1)]
    const withSpeed = (more: object) => passed(runItems('ok').map((item) => (item.id === 'full-speed' ? { ...item, ...more } : item)))
    given(...toRun).when(withSpeed({ value: 12_400, unit: '1/min' })).thenPhase('run-passed')
    given(...toRun).when(withSpeed({ value: 9850, unit: '1/min' })).thenRefused('run-out-of-limits')
    given(...toRun).when(withSpeed({ value: 12_400 })).thenRefused('unit-missing')
  })

  test('a run is failed by an item that failed', () => {
    given(...toRepaired).when(runFailed).thenAt('p3')
    given(...toRepaired).when(raw('run-failed', { items: runItems('ok') })).thenRefused('nothing-failed')
    given(...toRepaired).when(raw('run-failed', { items: [{ id: 'seal-dry', result: 'failed' }] })).thenRefused('no-such-item')
  })
})

describe('how a walk ends', () => {
  test('a result fits where the walk stands', () => {
    given(...toRepaired, runPassed).when(closedAs('repaired')).thenPhase('closed')
    given(...toRepaired, runPassed).when(closedAs('not-repaired')).thenRefused('wrong-result')
    given(...toRepaired).when(closedAs('repaired')).thenRefused('wrong-phase')
    given(...toProven).when(closedAs('not-repaired')).thenPhase('closed')
    given(...toProven).when(closedAs('referred')).thenPhase('closed')
    given(...toProven).when(closedAs('repaired')).thenRefused('wrong-result')
    given(...toCause).when(closedAs('not-repaired')).thenRefused('wrong-phase')
    given(started()).when(closedAs('no-cause-found')).thenRefused('wrong-phase')
    given(started(), act('escalated', { reason: 'Odd' })).when(closedAs('no-cause-found')).thenPhase('closed')
    given(started(), skipped('n1', 'not-reproduced')).when(closedAs('not-reproduced')).thenPhase('closed')
    given(started(), act('held', { tagNo: '1', why: 'Leaks' })).when(closedAs('held')).thenPhase('closed')
    given(started(), act('held', { tagNo: '1', why: 'Leaks' })).when(closedAs('referred')).thenRefused('wrong-result')
  })

  test('an unsafe cause that is not repaired can only be held', () => {
    given(...toUnsafe).thenPage('proven', (page) => expect([page.cause.isUnsafe, page.canCloseUnrepaired]).toEqual([true, false]))
    given(...toUnsafe).when(closedAs('not-repaired')).thenRefused('unsafe-hold-only')
    given(...toUnsafe).when(act('abandoned', { why: 'Owner in a hurry' })).thenRefused('unsafe-hold-only')
    given(...toUnsafe, repaired).when(act('abandoned', { why: 'Owner in a hurry' })).thenRefused('unsafe-hold-only')
    given(...toUnsafe).when(act('held', { tagNo: '17', why: 'Owner said no' })).thenPhase('held')
    given(...toUnsafe, repaired, runPassed).when(closedAs('repaired')).thenPhase('closed')
  })

  test('a walk can be given up or held wherever it is open', () => {
    for (const story of [[started()], toCause, toProven, toRepaired]) {
      given(...story).when(act('abandoned', { why: 'Scrapped' })).thenPhase('abandoned')
      given(...story).when(act('held', { tagNo: '1', why: 'Leaks' })).thenPhase('held')
    }
    given(started(), act('held', { tagNo: '1', why: 'Leaks' })).when(act('held', { tagNo: '2', why: 'Again' })).thenRefused('wrong-phase')
    given(started()).when(act('held', { tagNo: ' ', why: 'Leaks' })).thenRefused('malformed', '/payload/tagNo')
  })

  test('the lead is asked from the route alone', () => {
    given(started()).when(act('escalated', { reason: 'Never seen this' })).thenPhase('escalated')
    given(...toCause).when(act('escalated', { reason: 'Never seen this' })).thenPhase('escalated')
    given(...toProven).when(act('escalated', { reason: 'Never seen this' })).thenRefused('wrong-phase')
  })
})

describe('questions, flags, free walks', () => {
  test('a question is asked once and answered once, and an answer sends the walk to a node that is there', () => {
    const answered = (more: object = {}) => by('lead', raw('answered', { questionId, text: 'Yes', photoIds: [], ...more }))
    given(started(), asked).when(asked).thenRefused('question-exists')
    given(started()).when(answered()).thenRefused('no-such-question')
    given(started(), asked, answered()).when(answered()).thenRefused('no-such-question')
    given(started(), asked).when(answered({ goTo: 'saw/n99' })).thenRefused('no-such-node', '/payload/goTo')
    given(...toProven, asked).when(answered({ goTo: 'saw/n3' })).thenRefused('wrong-phase')
    given(...toProven, asked).when(answered()).thenPhase('proven')
  })

  test('a flag is put on a node that is there', () => {
    given(started()).when(raw('flagged', { node: 'saw/n5', text: 'Odd wording', photoIds: [] })).thenAt('n1')
    given(started()).when(raw('flagged', { node: 'saw/n99', text: 'Odd wording', photoIds: [] })).thenRefused('no-such-node')
  })

  test('what is noted in a free walk is for free walks alone', () => {
    const free = [by('lead', started({ kind: 'free' }))]
    given(started()).when(act('check-noted', { title: 'Line', found: 'Cracked', photoIds: [] })).thenRefused('free-only')
    given(started()).when(act('cause-noted', { title: 'Line cracked' })).thenRefused('free-only')
    given(...free).when(by('lead', act('cause-noted', { title: 'Line cracked' }))).thenPhase('proven')
    given(...free).when(by('lead', act('cause-noted', {}))).thenRefused('malformed')
    given(...free).when(by('lead', found('s', 'good'))).thenRefused('not-a-check')
  })
})
