import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { describe, expect, test } from 'vitest'

import { parseChartText } from '#shared/chart/parse.ts'
import { walkEventSchema } from '#shared/walk/events.ts'
import { toPinnedCharts } from '#shared/walk/pinned-charts.ts'
import { replay } from '#shared/walk/replay.ts'
import { toReview } from '#shared/walk/review.ts'

const textOf = (name: string) => readFileSync(join(import.meta.dirname, name), 'utf8')

function frozenChart(name: string, version: number) {
  const parsed = parseChartText(textOf(name))
  if (!parsed.ok) throw new Error(parsed.error.detail)
  return { version, document: parsed.value }
}

/**
 * A log kept as it was stored once: two charts, access and a check out of turn, a pause, a failed run, a question, a skipped check, a step
 * back, a repair. Stored events are facts: whatever the guard refuses one day, they come to the same walk.
 */
describe('a frozen walk log', () => {
  const charts = toPinnedCharts([frozenChart('b-bench.json', 3), frozenChart('b-seal.json', 2)])
  const stored: unknown[] = JSON.parse(textOf('walk-log.json')) as unknown[]
  const events = stored.map((event) => walkEventSchema.parse(event))

  test('is read as it was written', () => expect(events).toEqual(stored))

  test('comes to the walk that it came to', () => {
    const walk = replay(charts, events)
    expect(walk).toMatchObject({
      phase: 'closed',
      result: 'repaired',
      causeId: 'seal',
      node: 'b-seal/c1',
      lastSeq: 27,
      // n1 with warm 5, n2 with the top 3, lead and cover 5, n4 seen 1, n3 2, p3 twice 4, k1 with the seal kit 27 and once more 2, p1 1
      minutesUsed: 50,
      serviceList: ['svc'],
      ruledOut: [{ causeId: 'screen', how: 'run-failed' }],
      metal: { engine: 'stopped', open: ['warm', 'top-off', 'lead-off', 'cover-off', 'seal-kit'], defeated: [] },
    })
    const trail = walk.phase === 'new' ? [] : walk.trail
    expect(trail.map((line) => [line.position.node, line.kind === 'finding' ? line.answer.outcome : line.kind, line.spent])).toEqual([
      ['b-bench/n1', 'low', null],
      ['b-bench/n2', 'dusty', null],
      ['b-bench/n3', 'furred', null],
      ['b-bench/p3', 'gone', 'run-failed'],
      ['b-bench/p3', 'still', null],
      ['b-bench/n4', 'stripe', null],
      ['b-bench/p4', 'skip', null],
      ['b-seal/k1', 'tight', 'stepped-back'],
      ['b-seal/k1', 'drop', null],
      ['b-seal/p1', 'seen', null],
    ])
  })

  test('is told to its end', () => expect(toReview(charts, events)).toHaveLength(events.length))
})
