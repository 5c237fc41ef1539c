import { describe, expect, test } from 'vitest'

import type { EventId } from '#shared/lib/ids.ts'
import { ask, buildChart, check, start, step } from '#tests/support/chart-builder.ts'
import { people, skipped, started, stepDone, storiesOn, tap, uuid, walkId } from '#tests/support/walk-builder.ts'
import { toEvent } from '#tests/support/walk-drafts.ts'
import { evolve } from './evolve.ts'

describe('steps', () => {
  const steps = (more: Record<string, unknown>[] = []) =>
    buildChart({
      id: 'saw',
      cautions: [{ id: 'hot', word: 'CAUTION', harm: 'minor-injury', hazard: 'Hot', avoid: 'Wait' }],
      access: [{ id: 'hot-off', title: 'Hot part off', minutes: 1, cautions: ['hot'] }],
      nodes: [start(), ...more, check('n9', ['good', 'bad']), ask()],
      edges: [
        `s > ${String(more[0]?.['id'] ?? 'n9')}`,
        ...more.map((node, index) => `${String(node['id'])} > ${String(more[index + 1]?.['id'] ?? 'n9')}`),
        'n9.good > ask',
        'n9.bad > ask',
      ],
    })

  test('up to three harmless steps stand on the page of the check that they prepare', () => {
    storiesOn(steps([step('x1'), step('x2'), step('x3')]))
      .given(started())
      .thenPage('check', (page) => {
        expect(page.lines.map(({ place }) => place)).toEqual(['saw/x1', 'saw/x2', 'saw/x3'])
      })
    storiesOn(steps([step('x1'), step('x2'), step('x3')]))
      .given(started(), tap('good'))
      .thenAt('ask')
      .then((walk) => expect(walk.minutesUsed).toBe(4))
  })

  test('of four the first has a page of its own', () => {
    const four = steps([step('x1'), step('x2'), step('x3'), step('x4')])
    storiesOn(four)
      .given(started())
      .thenPage('step', (page) => expect(page.node.place).toBe('saw/x1'))
    storiesOn(four)
      .given(started(), stepDone)
      .thenPage('check', (page) => expect(page.lines).toHaveLength(3))
  })

  test('a step with a caution, a timer, a safety part that it takes off or puts back, or access that carries a caution has a page of its own', () => {
    for (const more of [{ cautions: ['hot'] }, { timer: { seconds: 5, rule: 'at-most' } }, { defeats: ['brake'] }, { restores: ['brake'] }, { needs: ['hot-off'] }]) {
      storiesOn(steps([step('x1', more)]))
        .given(started(), (bench) =>
          bench.page.kind === 'caution' ? [{ type: 'caution-acknowledged', payload: { node: bench.place('x1'), cautionIds: [...bench.page.cautionIds] } }] : [],
        )
        .thenPage('step', (page) => {
          expect(page.node.place).toBe('saw/x1')
        })
    }
  })

  test('a safety part is back before the next check can be left unanswered', () => {
    const putBack = steps([step('x1', { restores: ['brake'] })])
    storiesOn(putBack).given(started()).when(skipped('n9')).thenRefused('wrong-node')
    storiesOn(putBack).given(started(), stepDone, skipped('n9')).thenAt('ask')
    // A log in which it once was comes to what it came to.
    storiesOn(putBack)
      .given(started())
      .then((walk, bench) => {
        const head = { id: uuid(77) as EventId, walkId, seq: 2, at: '2026-03-02T09:00:02.000Z', deviceId: people.junior.device, personId: people.junior.id }
        const [passedOver] = skipped('n9')(bench).map((draft) => toEvent(head, draft))
        expect(passedOver && evolve(bench.charts, walk, passedOver)).toMatchObject({ node: 'saw/ask', lastSeq: 2 })
      })
  })

  test('a step ahead of an end stands alone', () => {
    const chart = buildChart({ id: 'saw', nodes: [start(), step('x1'), ask()], edges: ['s > x1', 'x1 > ask'] })
    storiesOn(chart).given(started()).thenPage('step')
    storiesOn(chart)
      .given(started(), stepDone)
      .thenAt('ask')
      .then((walk) => expect(walk.secondsMeasured).toBe(10))
  })
})
