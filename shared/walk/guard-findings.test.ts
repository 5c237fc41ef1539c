import { describe, test } from 'vitest'

import { ask, buildChart, cause, check, proof, reading, start, step } from '#tests/support/chart-builder.ts'
import { act, again, backTo, found, revs, skipped, started, storiesOn, tap, uuid, type Act, raw } from '#tests/support/walk-builder.ts'
import { toReading, toFilter, toProof, toCause, toRepaired } from '#tests/support/saw-stories.ts'
import { sawChart } from '#tests/support/walk-charts.ts'

const { given } = storiesOn(sawChart)

describe('findings', () => {
  test('a finding for a check that the walk has left, or has not reached, is refused', () => {
    given(...toReading)
      .when(found('n1', 'yes'))
      .thenRefused('wrong-node', '/payload/node')
    given(...toReading)
      .when(found('n3', 'good'))
      .thenRefused('wrong-node')
    given(...toReading)
      .when(found('nowhere/n1', 'good'))
      .thenRefused('wrong-node')
    given(...toCause)
      .when(found('p3', 'gone'))
      .thenRefused('wrong-phase')
  })

  test('an outcome that the check lacks is refused', () => given(started()).when(found('n1', 'maybe')).thenRefused('no-such-outcome', '/payload/outcome'))

  test('a check takes no value', () => {
    given(...toFilter)
      .when(found('n3', 'good', { value: 3 }))
      .thenRefused('value-not-asked')
    given(...toFilter)
      .when(found('n3', 'good', { judgedBy: 'limits' }))
      .thenRefused('nothing-to-judge')
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
      at({ fullSpeed: { min: 8000, unit: '1/min' } })
        .when(record('in', 'limits'))
        .thenAt('ask')
      at({ fullSpeed: { min: 10_000, unit: '1/min' } })
        .when(record('in', 'limits'))
        .thenRefused('not-the-band')
      at({}).when(record('in', 'limits')).thenRefused('limits-unknown')
      at({}).when(record('in', 'hand')).thenAt('ask')
      at({}).when(found('n1', 'in')).thenRefused('value-missing')
    })

    test('a machine that is identified later brings its limits to later readings', () => {
      const identified = raw('machine-identified', {
        machine: { class: 'chain-saw', engine: 'two-stroke' },
        limits: { fullSpeed: { min: 8000, unit: '1/min' } },
      })
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
          outcomes: [
            { id: 'low', title: 'Low' },
            { id: 'in', title: 'In', normal: true },
            { id: 'uneven', title: 'Never equal' },
          ],
        }),
        ask(),
      ],
      edges: ['s > n1', 'n1.low > ask', 'n1.in > ask', 'n1.uneven > ask'],
    })
    const pulls = (values: number[], outcome: string, unit: 'psi' | 'kPa' = 'psi', judgedBy: 'hand' | 'limits' = 'limits') =>
      storiesOn(chart)
        .given(started())
        .when(found('n1', outcome, { values, value: values.at(-1) as number, unit, judgedBy }))

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
        nodes: [
          start(),
          check('n1', ['good', 'dark']),
          reading('n2'),
          proof('p1', 'filter-packed', { by, ...(compares ? { compares } : {}) }),
          cause('c1', 'filter-packed'),
          ask(),
        ],
        edges: ['s > n1', 'n1.good > n2', 'n1.dark > p1', 'n2.low > ask', 'n2.in > ask', 'p1.gone > c1', 'p1.still > n2'],
      })

    test('what it compares with is on the trail, or comes with it, judged alike', () => {
      const chart = bare('isolation', { node: 'n2', confirmsWhen: ['in'] })
      const gone = { value: 12_000, unit: '1/min', judgedBy: 'limits' }
      const proveWith = (before: unknown) =>
        storiesOn(chart)
          .given(started(), tap('dark'))
          .when(found('p1', 'gone', { ...gone, ...(before ? { before } : {}) } as never))
      proveWith(null).thenRefused('before-missing', '/payload/before')
      proveWith({ outcome: 'low', value: 9000, unit: '1/min' }).thenAt('c1')
      proveWith({ outcome: 'in', value: 9000, unit: '1/min' }).thenRefused('not-the-band', '/payload/before/outcome')
      proveWith({ outcome: 'low' }).thenRefused('value-missing', '/payload/before/value')
      proveWith({ outcome: 'dark' }).thenRefused('no-such-outcome', '/payload/before/outcome')
    })

    describe('whose reading was within what confirms before the change already', () => {
      const chart = bare('isolation', { node: 'n2', confirmsWhen: ['in'] })
      const measured = { value: 12_000, unit: '1/min' }
      const before = { outcome: 'in', value: 11_900, unit: '1/min' }
      const proveBy = (outcome: string, more: object) =>
        storiesOn(chart)
          .given(started(), tap('dark'))
          .when(found('p1', outcome, { before, ...more } as never))

      test('is judged by hand, whatever the value after it', () => {
        proveBy('gone', { ...measured, judgedBy: 'hand' }).thenAt('c1')
        proveBy('still', { ...measured, judgedBy: 'hand' }).thenAt('n2')
        proveBy('still', { value: 9000, unit: '1/min', judgedBy: 'hand' }).thenAt('n2')
        for (const outcome of ['gone', 'still']) proveBy(outcome, { ...measured, judgedBy: 'limits' }).thenRefused('was-so-before', '/payload/judgedBy')
      })

      test('still takes the value that confirms', () => proveBy('gone', { judgedBy: 'hand' }).thenRefused('value-missing'))

      test('by the finding on the trail, when it took none of its own', () => {
        const onTrail = buildChart({
          id: 'saw',
          nodes: [start(), reading('n2'), proof('p1', 'filter-packed', { compares: { node: 'n2', confirmsWhen: ['in'] } }), cause('c1', 'filter-packed'), ask()],
          edges: ['s > n2', 'n2.low > p1', 'n2.in > p1', 'p1.gone > c1', 'p1.still > ask'],
        })
        const proveAfter = (value: number, judgedBy: string) =>
          storiesOn(onTrail)
            .given(started(), revs(value))
            .when(found('p1', 'gone', { ...measured, judgedBy } as never))
        proveAfter(9000, 'limits').thenAt('c1')
        proveAfter(12_000, 'limits').thenRefused('was-so-before', '/payload/judgedBy')
        proveAfter(12_000, 'hand').thenAt('c1')
      })

      test('kept after a step back it is judged by what it was held against then', () => {
        const keep = (outcome: string, value: number, own: object, judgedBy: string) =>
          storiesOn(chart)
            .given(
              started(),
              tap('dark'),
              found('p1', outcome, { value, unit: '1/min', before: own, judgedBy: own === before ? 'hand' : 'limits' } as never),
              backTo('p1'),
            )
            .when((bench) => found('p1', outcome, { value, unit: '1/min', judgedBy, reuses: bench.eventAt('p1') } as never)(bench))
        keep('still', 12_000, before, 'hand').thenAt('n2')
        keep('still', 12_000, before, 'limits').thenRefused('was-so-before')
        keep('gone', 12_000, { outcome: 'low', value: 9000, unit: '1/min' }, 'limits').thenAt('c1')
      })
    })

    test('one that compares with nothing takes nothing before', () => {
      storiesOn(bare('isolation'))
        .given(started(), tap('dark'))
        .when(found('p1', 'gone', { before: { outcome: 'low' } } as never))
        .thenRefused('before-not-asked')
      storiesOn(bare('isolation')).given(started(), tap('dark')).when(found('p1', 'gone')).thenAt('c1')
    })

    test('one by sight is confirmed by a second look with a note', () => {
      const look = (note?: string) =>
        storiesOn(bare('sight'))
          .given(started(), tap('dark'))
          .when(found('p1', 'gone', note === undefined ? {} : { note }))
      look().thenRefused('note-missing', '/payload/note')
      look('  ').thenRefused('note-missing')
      look('Grey felt in the folds').thenAt('c1')
      storiesOn(bare('sight')).given(started(), tap('dark')).when(found('p1', 'still')).thenAt('n2')
    })
  })

  test('an answer is recorded again only as it stands on offer', () => {
    const back = [...toFilter, tap('dusty'), backTo('n3')]
    const reuse =
      (outcome: string, node: string): Act =>
      (bench) =>
        found('n3', outcome, { reuses: bench.eventAt(node) })(bench)
    given(...back)
      .when(again)
      .thenAt('n4')
    given(...back)
      .when(reuse('good', 'n3'))
      .thenRefused('not-offered', '/payload/reuses')
    given(...back)
      .when(reuse('dusty', 'n2'))
      .thenRefused('not-offered')
    given(...toFilter)
      .when(reuse('dusty', 'n2'))
      .thenRefused('not-offered')
  })
})

describe('steps and skips', () => {
  test('a step is done where the walk stands, and a step is no check', () => {
    const chart = buildChart({ id: 'saw', nodes: [start(), step('x1'), ask()], edges: ['s > x1', 'x1 > ask'] })
    storiesOn(chart)
      .given(started())
      .when(raw('step-done', { node: 'saw/x1', seconds: 3 }))
      .thenAt('ask')
    storiesOn(chart)
      .given(started())
      .when(raw('step-done', { node: 'saw/ask', seconds: 3 }))
      .thenRefused('wrong-node')
    storiesOn(chart).given(started()).when(found('x1', 'good')).thenRefused('not-a-check')
    storiesOn(chart).given(started()).when(skipped('x1')).thenRefused('not-a-check')
    given(started())
      .when(raw('step-done', { node: 'saw/n1', seconds: 3 }))
      .thenRefused('not-a-step')
    given(...toFilter)
      .when(skipped('n2'))
      .thenRefused('wrong-node')
  })

  test('a check can be left without an answer before its cautions are read', () => {
    const chart = buildChart({
      id: 'saw',
      nodes: [start(), check('n1', ['good', 'bad'], { cautions: ['hot'] }), ask()],
      edges: ['s > n1', 'n1.good > ask', 'n1.bad > ask'],
    })
    storiesOn(chart).given(started()).when(skipped('n1', 'cannot')).thenAt('ask')
    storiesOn(chart).given(started()).when(found('n1', 'good')).thenRefused('cautions-pending')
  })

  test('a step back goes to what is on the trail', () => {
    given(...toFilter)
      .when(raw('stepped-back', { toEventId: uuid(77) }))
      .thenRefused('not-on-trail')
    given(...toFilter, tap('good'), backTo('n3'))
      .when(raw('stepped-back', { toEventId: uuid(1004) }))
      .thenRefused('not-on-trail')
    given(...toRepaired)
      .when(backTo('n3'))
      .thenRefused('wrong-phase')
    given(started(), act('held', { tagNo: '1', why: 'Leaks' }))
      .when(raw('stepped-back', { toEventId: uuid(1001) }))
      .thenRefused('wrong-phase')
  })
})
