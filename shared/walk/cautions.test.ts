import { describe, expect, test } from 'vitest'

import { ask, buildChart, check, reading, proof, cause, start, step } from '#tests/support/chart-builder.ts'
import { access, act, answer, backTo, found, noticed, read, readCautions, started, stepDone, storiesOn, tap, type Act } from '#tests/support/walk-builder.ts'

const caution = (id: string, more: Record<string, unknown> = {}) => ({
  id,
  word: 'WARNING',
  harm: 'serious-injury',
  hazard: `Hazard ${id}`,
  avoid: `Avoid ${id}`,
  ...more,
})

/** A row of checks, each leading to the next by "good". */
function row(
  nodes: readonly Record<string, unknown>[],
  more: { cautions?: readonly Record<string, unknown>[]; access?: readonly Record<string, unknown>[] } = {},
) {
  const ids = nodes.map(({ id }) => String(id))
  const edges = nodes.flatMap(({ id, kind }, index) => {
    const next = ids[index + 1] ?? 'ask'
    return kind === 'step' ? [`${String(id)} > ${next}`] : [`${String(id)}.good > ${next}`, `${String(id)}.bad > ask`]
  })
  return storiesOn(buildChart({ id: 'saw', nodes: [start(), ...nodes, ask()], edges: [`s > ${ids[0] ?? 'ask'}`, ...edges], ...more }))
}

const waiting =
  (...ids: string[]) =>
  (page: { cautionIds: readonly string[] }) =>
    expect(page.cautionIds).toEqual(ids)
const good: Act = (bench) => tap('good')(bench)

describe('when a caution waits', () => {
  const standing = row([check('n1'), check('n2', ['good', 'bad'], { cautions: ['lead', 'hot'] })], {
    cautions: [caution('co', { standing: true, word: 'DANGER', harm: 'death' }), caution('lead'), caution('hot', { word: 'CAUTION', harm: 'minor-injury' })],
  })

  test('standing ones wait before the first node, once', () => {
    standing.given(started()).thenPage('caution', waiting('co'))
    standing.given(started()).thenPage('caution', (page) => expect([page.guards.place, page.word, page.canSkip]).toEqual(['saw/n1', 'DANGER', true]))
    standing.given(started(), good).thenPage('caution', waiting('lead', 'hot'))
  })

  test('all of a node are one page under the highest word, and one event reads them', () => {
    standing.given(started(), good).thenPage('caution', (page) => {
      expect(page.word).toBe('WARNING')
      expect(page.cautions.map(({ word, again }) => [word, again])).toEqual([
        ['WARNING', []],
        ['CAUTION', []],
      ])
    })
    standing
      .given(started(), good)
      .when(readCautions)
      .thenPage('check', (page) => expect(page.node.place).toBe('saw/n2'))
  })

  test('nothing is recorded before they are read, and exactly those that wait are read', () => {
    standing.given(started()).when(found('n1', 'good')).thenRefused('cautions-pending')
    standing.given(started(), good).when(read('n2', 'lead')).thenRefused('not-the-pending-cautions')
    standing
      .given(started(), good)
      .when(read('n2', 'lead', 'hot', 'co'))
      .thenRefused('not-the-pending-cautions')
    standing
      .given(started(), good)
      .when(read('n2', 'hot', 'lead'))
      .thenPage('check')
    standing
      .given(started(), good, readCautions)
      .when(read('n2', 'hot', 'lead'))
      .thenRefused('not-the-pending-cautions')
    standing.given(started(), good).when(read('nowhere', 'lead')).thenRefused('not-the-pending-cautions')
  })

  test('those of an access wait where it is opened, with those of what it needs', () => {
    const opening = row([check('n1', ['good', 'bad'], { needs: ['cover-off'] }), check('n2', ['good', 'bad'], { needs: ['cover-off'] })], {
      cautions: [caution('edge'), caution('lead')],
      access: [
        { id: 'lead-off', title: 'Lead off', minutes: 1, cautions: ['lead'] },
        { id: 'cover-off', title: 'Cover off', minutes: 2, needs: ['lead-off'], cautions: ['edge'] },
      ],
    })
    opening.given(started()).thenPage('caution', waiting('edge', 'lead'))
    opening.given(started(), good).thenPage('check')
  })

  test('an access that is not on the way this time brings no caution', () => {
    const twoWays = row([check('n1', ['good', 'bad'], { needsOneOf: [['screen-out'], ['cover-off']] })], {
      cautions: [caution('edge')],
      access: [
        { id: 'screen-out', title: 'Screen out', minutes: 1 },
        { id: 'cover-off', title: 'Cover off', minutes: 2, cautions: ['edge'] },
      ],
    })
    twoWays.given(started()).thenPage('check')
  })
})

describe('when a caution waits again', () => {
  test('the engine goes from stopped to running', () => {
    const running = row(
      [
        check('n1', ['good', 'bad'], { machine: 'running' }),
        check('n2', ['good', 'bad'], { machine: 'running' }),
        check('n3', ['good', 'bad'], { machine: 'stopped' }),
        check('n4'),
        check('n5', ['good', 'bad'], { machine: 'running' }),
      ],
      {
        cautions: [caution('co', { standing: true, again: ['running'] }), caution('hot', { standing: true })],
      },
    )
    running.given(started()).thenPage('caution', waiting('co', 'hot'))
    running.given(started(), good).thenPage('check')
    running.given(started(), good, good, good).thenPage('check', (page) => expect(page.node.place).toBe('saw/n4'))
    running.given(started(), good, good, good, good).thenPage('caution', (page) => {
      expect(page.cautionIds).toEqual(['co'])
      expect(page.cautions[0]?.again).toEqual(['running'])
    })
    running.given(started(), good, good, good, good).when(found('n5', 'good')).thenRefused('cautions-pending')
    running.given(started(), good, good, good, good, good).thenAt('ask')
  })

  const access1 = [
    { id: 'lead-off', title: 'Lead off', minutes: 1 },
    { id: 'warm', title: 'Warm', minutes: 3, excludes: ['lead-off'] },
  ]

  test('an access that it names was opened or closed since', () => {
    const lead = row(
      [
        check('n1', ['good', 'bad'], { cautions: ['lead'] }),
        check('n2', ['good', 'bad'], { needs: ['lead-off'] }),
        check('n3', ['good', 'bad'], { cautions: ['lead'] }),
        check('n4', ['good', 'bad'], { cautions: ['lead'] }),
      ],
      {
        cautions: [caution('lead', { again: ['lead-off'] })],
        access: access1,
      },
    )
    lead.given(started()).thenPage('caution', waiting('lead'))
    lead.given(started(), good).thenPage('check', (page) => expect(page.node.place).toBe('saw/n2'))
    lead.given(started(), good, good).thenPage('caution', (page) => expect([page.guards.place, page.cautions[0]?.again]).toEqual(['saw/n3', ['lead-off']]))
    lead.given(started(), good, good, good).thenPage('check', (page) => expect(page.node.place).toBe('saw/n4'))
  })

  test('what recording a node changes counts as made before it was read there', () => {
    const self = row(
      [
        check('n1', ['good', 'bad'], { cautions: ['lead'] }),
        check('n2', ['good', 'bad'], { needs: ['lead-off'], cautions: ['lead'] }),
        check('n3', ['good', 'bad'], { cautions: ['lead'] }),
      ],
      {
        cautions: [caution('lead', { again: ['lead-off'] })],
        access: access1,
      },
    )
    self.given(started(), good).thenPage('caution', (page) => expect(page.guards.place).toBe('saw/n2'))
    self.given(started(), good, good).thenPage('check', (page) => expect(page.node.place).toBe('saw/n3'))
  })

  test('a change that comes and goes within one recording is a change', () => {
    const shut = row(
      [
        check('n1', ['good', 'bad'], { cautions: ['lead'] }),
        check('n2', ['good', 'bad'], { needs: ['lead-off', 'warm'] }),
        check('n3', ['good', 'bad'], { cautions: ['lead'] }),
      ],
      {
        cautions: [caution('lead', { again: ['lead-off'] })],
        access: access1,
      },
    )
    shut.given(started(), good, good).thenPage('caution', waiting('lead'))
  })

  test('a safety part went out of action or came back since', () => {
    const brake = row(
      [
        check('n1', ['good', 'bad'], { cautions: ['brake'] }),
        check('n2', ['good', 'bad'], { defeats: ['chain-brake'] }),
        check('n3', ['good', 'bad'], { cautions: ['brake'] }),
        check('n4', ['good', 'bad'], { restores: ['chain-brake'] }),
        check('n5', ['good', 'bad'], { cautions: ['brake'] }),
      ],
      {
        cautions: [caution('brake', { again: ['chain-brake'] })],
      },
    )
    brake.given(started(), good, good).thenPage('caution', (page) => expect([page.guards.place, page.cautions[0]?.again]).toEqual(['saw/n3', ['chain-brake']]))
    brake.given(started(), good, good, good, good).thenPage('caution', (page) => expect(page.guards.place).toBe('saw/n5'))
  })

  test('on the way round a loop it waits as often as the change is made', () => {
    const loop = storiesOn(
      buildChart({
        id: 'saw',
        cautions: [caution('start', { again: ['running'] })],
        nodes: [
          start(),
          check('n1', ['good', 'bad'], { machine: 'running', cautions: ['start'] }),
          check('n2', ['good', 'bad'], { machine: 'stopped' }),
          ask(),
        ],
        edges: ['s > n1', 'n1.good > n2', 'n1.bad > ask', 'n2.good > n1', 'n2.bad > ask'],
      }),
    )
    loop.given(started(), good, good).thenPage('caution', waiting('start'))
    loop.given(started(), good, good, good, good).thenPage('caution', waiting('start'))
  })
})

describe('cautions and the ways of a walk', () => {
  const two = row([check('n1', ['good', 'bad'], { cautions: ['hot'] }), check('n2', ['good', 'bad'], { machine: 'running' })], {
    cautions: [caution('hot', { again: ['running'] })],
  })

  test('a step back keeps what was read, but not for what its page was about to change', () => {
    two.given(started(), good, backTo('n1')).thenPage('check')
    two.given(started(), good, good, backTo('n1')).thenPage('caution', waiting('hot'))
  })

  test('a caution that was read for a page that was left is read for that page again, if that would change something', () => {
    const left = row([check('n1'), check('n2', ['good', 'bad'], { machine: 'running', cautions: ['start'] })], {
      cautions: [caution('start', { standing: true, again: ['running'] })],
    })
    left.given(started(), good, readCautions, backTo('n1'), good).thenPage('caution', (page) => expect(page.guards.place).toBe('saw/n2'))
  })

  test('steps that stand on a page are covered by its cautions', () => {
    const lined = row([step('x1', { needs: ['lead-off'] }), check('n2', ['good', 'bad'], { machine: 'running', cautions: ['lead'] })], {
      cautions: [caution('lead', { again: ['lead-off', 'running'] }), caution('co', { standing: true })],
      access: [{ id: 'lead-off', title: 'Lead off', minutes: 1 }],
    })
    lined.given(started()).thenPage('caution', (page) => {
      expect(page.guards.place).toBe('saw/n2')
      expect(page.cautionIds).toEqual(['co', 'lead'])
    })
    lined
      .given(started())
      .when(act('step-done', { node: 'saw/x1' as never, seconds: 0 }))
      .thenRefused('cautions-pending')
    lined.given(started(), readCautions).when(good).thenAt('ask')
    lined.given(started(), readCautions, act('step-done', { node: 'saw/x1' as never, seconds: 0 })).thenPage('check')
  })

  test('a caution that two charts of one page define waits again for what either of them names', () => {
    const caller = buildChart({
      id: 'saw',
      cautions: [caution('lead', { standing: true })],
      nodes: [start(), check('n1'), step('x1'), { id: 'j1', kind: 'jump', chart: 'sub', returns: true }, ask()],
      edges: ['s > n1', 'n1.good > x1', 'n1.bad > ask', 'x1 > j1', 'j1 > ask'],
    })
    const called = buildChart({
      id: 'sub',
      cautions: [caution('lead', { standing: true, again: ['lead-off'] })],
      nodes: [start(), check('k1', ['good', 'bad'], { needs: ['lead-off'] }), { id: 'b', kind: 'back' }],
      edges: ['s > k1', 'k1.good > b', 'k1.bad > b'],
    })
    storiesOn(caller, called)
      .given(started(), good)
      .thenPage('caution', (page) => expect([page.guards.place, page.cautions[0]?.again]).toEqual(['sub/k1', ['lead-off']]))
    storiesOn(caller, called).given(started(), good, good).thenAt('ask')
  })

  test('a step with a caution has its caution on a page of its own, and cannot be skipped there', () => {
    const careful = row([step('x1', { cautions: ['hot'] }), check('n2')], { cautions: [caution('hot')] })
    careful.given(started()).thenPage('caution', (page) => expect([page.guards.place, page.canSkip]).toEqual(['saw/x1', false]))
    careful
      .given(started())
      .when(act('step-done', { node: 'saw/x1' as never, seconds: 0 }))
      .thenRefused('cautions-pending')
    careful.given(started(), readCautions).when(stepDone).thenAt('n2')
  })

  test('a proof that takes its reading first is guarded for both at once', () => {
    const chart = buildChart({
      id: 'saw',
      cautions: [caution('start', { again: ['running'] }), caution('drum')],
      nodes: [
        start(),
        check('n1', ['good', 'dark']),
        reading('n2', { machine: 'running', cautions: ['start'] }),
        proof('p1', 'band-drags', { machine: 'running', cautions: ['drum', 'start'], compares: { node: 'n2', confirmsWhen: ['in'] } }),
        cause('c1', 'band-drags'),
        ask(),
      ],
      edges: ['s > n1', 'n1.good > n2', 'n1.dark > p1', 'n2.low > ask', 'n2.in > ask', 'p1.gone > c1', 'p1.still > ask'],
    })
    const toProof = [started(), tap('dark')]
    storiesOn(chart)
      .given(...toProof)
      .thenPage('caution', waiting('start', 'drum'))
    storiesOn(chart)
      .given(...toProof, readCautions)
      .thenPage('before')
    storiesOn(chart)
      .given(...toProof, readCautions)
      .when(answer({ values: [12_000], unit: '1/min', before: { values: [9000], unit: '1/min' } }))
      .thenAt('c1')
  })
})

describe('cautions out of turn', () => {
  const bench = row([check('n1', ['good', 'bad'], { cautions: ['hot'] }), check('n2', ['good', 'bad'], { needs: ['cover-off'], cautions: ['edge'] })], {
    cautions: [caution('hot', { again: ['cover-off'] }), caution('edge', { again: ['cover-off'] }), caution('lead')],
    access: [
      { id: 'lead-off', title: 'Lead off', minutes: 1, cautions: ['lead'] },
      { id: 'cover-off', title: 'Cover off', minutes: 2, needs: ['lead-off'], cautions: ['edge'] },
    ],
  })
  const openCover = access(['lead-off', 'cover-off'])

  test('an access is opened once its cautions are read', () => {
    bench.given(started(), readCautions).when(openCover).thenRefused('cautions-pending')
    bench
      .given(started(), readCautions)
      .when(read('n1', 'edge', 'lead'), openCover)
      .thenAt('n1')
    bench
      .given(started(), readCautions)
      .when(read('n1', 'lead'), access(['lead-off']))
      .thenAt('n1')
    bench.given(started(), readCautions).when(read('n1', 'edge')).thenRefused('not-the-pending-cautions')
  })

  test('a check is noticed once its cautions are read; its opening counts as made before that', () => {
    bench
      .given(started(), readCautions)
      .when(read('n2', 'edge', 'lead'), openCover, noticed('n2', 'bad'))
      .thenAt('n1')
    const open = [started(), readCautions, read('n1', 'edge', 'lead'), openCover]
    bench
      .given(...open)
      .when(noticed('n2', 'bad'))
      .then((walk) => expect(walk.noticed).toHaveLength(1))
  })

  test('what was read for a check out of turn counts as read after the opening that it takes', () => {
    const own = row([check('n1'), check('n2', ['good', 'bad'], { needs: ['cover-off'], cautions: ['dust'] })], {
      cautions: [caution('dust', { again: ['cover-off'] })],
      access: [{ id: 'cover-off', title: 'Cover off', minutes: 2 }],
    })
    own
      .given(started())
      .when(read('n2', 'dust'), access(['cover-off']), noticed('n2', 'bad'))
      .thenAt('n1')
    own
      .given(started(), access(['cover-off']))
      .when(noticed('n2', 'bad'))
      .thenRefused('cautions-pending')
  })

  test('what was changed out of turn makes the cautions of the page wait again', () => {
    bench
      .given(started(), readCautions)
      .when(read('n1', 'edge', 'lead'), openCover, found('n1', 'good'))
      .thenRefused('cautions-pending')
    bench
      .given(started(), readCautions, read('n1', 'edge', 'lead'), openCover)
      .thenPage('caution', (page) => expect([page.guards.place, ...page.cautionIds]).toEqual(['saw/n1', 'hot']))
  })

  test('a check with an unread caution is not noticed', () => {
    const look = row([check('n1'), check('n2', ['good', 'bad'], { cautions: ['edge'] })], { cautions: [caution('edge')] })
    look.given(started()).when(noticed('n2', 'bad')).thenRefused('cautions-pending')
    look.given(started()).when(read('n2', 'edge'), noticed('n2', 'bad')).thenAt('n1')
  })
})
