import fc from 'fast-check'
import { describe, expect, test, vi } from 'vitest'

import type { ChartDocument } from '#shared/chart/document.ts'
import { guard } from '#shared/walk/guard.ts'
import { checksLeft } from '#shared/walk/checks-left.ts'
import { evolve } from '#shared/walk/evolve.ts'
import { anyVersionOf } from '#shared/walk/pinned-charts.ts'
import { replay } from '#shared/walk/replay.ts'
import { routeLegs, toReview } from '#shared/walk/review.ts'
import { backTo, knots, toPage } from '#shared/walk/select.ts'
import { isOpen, liveTrail, newWalk, type StartedWalk, type TrailEntry, type WalkState } from '#shared/walk/state.ts'
import { begin, chartsArb, choicesArb, choose, draftArb, machineArb, waysOfPage } from '#tests/support/random-walks.ts'
import { Bench, people, uuid, walkId } from '#tests/support/walk-builder.ts'
import { acknowledge, answerPage, finishStep, skipPage, toEvent } from '#tests/support/walk-drafts.ts'

/** Enough to meet every kind of node, jump and caution many times over; a failing run prints its seed. */
const runs = { numRuns: 120 }

vi.setConfig({ testTimeout: 60_000 })

/** A bench on which a random walk was walked. */
function walked(
  charts: readonly [ChartDocument, ChartDocument],
  machine: Parameters<typeof begin>[0],
  choices: readonly number[],
  each: (bench: Bench) => void = () => undefined,
): Bench {
  const bench = new Bench(charts)
  bench.send(begin(machine))
  each(bench)
  for (const choice of choices) if (choose(bench, choice)) each(bench)
  return bench
}

describe('a log', () => {
  test('comes to the state that its events came to one by one, and so does any prefix of it', () => {
    fc.assert(
      fc.property(chartsArb, machineArb, choicesArb, (charts, machine, choices) => {
        const states: WalkState[] = []
        const bench = walked(charts, machine, choices, ({ state, log }) => (states[log.length] = state))
        for (const [length, state] of states.entries()) if (state) expect(replay(bench.charts, bench.log.slice(0, length))).toEqual(state)
      }),
      runs,
    )
  })

  test('is plain data, and so is its state', () => {
    fc.assert(
      fc.property(chartsArb, machineArb, choicesArb, (charts, machine, choices) => {
        const { state } = walked(charts, machine, choices)
        expect(JSON.parse(JSON.stringify(state))).toEqual(state)
      }),
      runs,
    )
  })

  test('minutes and seconds never fall', () => {
    fc.assert(
      fc.property(chartsArb, machineArb, choicesArb, (charts, machine, choices) => {
        let before = { minutesUsed: 0, waitMinutes: 0, secondsMeasured: 0 }
        walked(charts, machine, choices, ({ walk }) => {
          expect(walk.minutesUsed).toBeGreaterThanOrEqual(before.minutesUsed)
          expect(walk.waitMinutes).toBeGreaterThanOrEqual(before.waitMinutes)
          expect(walk.secondsMeasured).toBeGreaterThanOrEqual(before.secondsMeasured)
          before = walk
        })
      }),
      runs,
    )
  })

  test('is told line by line, and the minutes of its lines are those of the walk', () => {
    fc.assert(
      fc.property(chartsArb, machineArb, choicesArb, (charts, machine, choices) => {
        const { charts: pinned, log, walk } = walked(charts, machine, choices)
        const lines = toReview(pinned, log)
        expect(lines.map(({ eventId }) => eventId)).toEqual(log.map(({ id }) => id))
        expect(lines.reduce((sum, { minutes }) => sum + minutes, 0)).toBeCloseTo(walk.minutesUsed, 4)
        expect(lines.filter(({ spent }) => spent !== null)).toHaveLength(walk.trail.length - liveTrail(walk).length)
      }),
      runs,
    )
  })
})

describe('page and guard', () => {
  test('agree: whatever a page lets a person do, the guard takes', () => {
    fc.assert(
      fc.property(chartsArb, machineArb, choicesArb, (charts, machine, choices) => {
        walked(charts, machine, choices, (bench) => {
          for (const way of waysOfPage(bench)) {
            const trial = new Bench(charts)
            trial.state = bench.state
            trial.log.push(...bench.log)
            for (const draft of way) expect(trial.send(draft), JSON.stringify([bench.page.kind, draft, trial.refusal])).toBe(true)
          }
        })
      }),
      { numRuns: 80 },
    )
  })

  test('a walk that is open always has a page to go on with', () => {
    fc.assert(
      fc.property(chartsArb, machineArb, choicesArb, (charts, machine, choices) => {
        walked(charts, machine, choices, (bench) => {
          const { page, state } = bench
          if (isOpen(state)) expect(['lost', 'not-started', 'closed', 'abandoned']).not.toContain(page.kind)
          if (isOpen(state)) expect(waysOfPage(bench).length, page.kind).toBeGreaterThan(0)
        })
      }),
      runs,
    )
  })

  test('the fewest checks left are never more than the most, and knots end where the walk stands', () => {
    fc.assert(
      fc.property(chartsArb, machineArb, choicesArb, (charts, machine, choices) => {
        walked(charts, machine, choices, ({ charts: pinned, walk }) => {
          if (!isOpen(walk)) return
          const left = checksLeft(pinned, walk)
          expect(left.shortest).toBeLessThanOrEqual(left.longest)
          expect(left.shortest).toBeGreaterThanOrEqual(0)
          expect(knots(pinned, walk).filter(({ isHere }) => isHere).length).toBeLessThanOrEqual(1)
          expect(routeLegs(pinned, walk).every(({ from, to }) => from.length > 0 && to.length > 0)).toBe(true)
        })
      }),
      { numRuns: 80 },
    )
  })
})

/** What makes two trails one route. */
const routeOf = (walk: StartedWalk) =>
  liveTrail(walk).map((line) => [line.kind, line.position, 'answer' in line ? line.answer.outcome : 'took' in line ? line.took : 'to' in line ? line.to : null])

/** Does once more what a line of a trail did, reading whatever cautions wait. */
function repeatLine(bench: Bench, line: TrailEntry): void {
  for (let { page } = bench; page.kind === 'caution'; { page } = bench) expect(bench.send(acknowledge(page))).toBe(true)
  const { page } = bench
  if (line.kind === 'pick') {
    const [chartId, startId] = line.to.split('/')
    bench.send({ type: 'jumped', payload: { chartId, startId, version: 1, pins: {} } as never })
  } else if (line.kind === 'step') {
    if (page.kind === 'step') bench.send(finishStep(page, 1))
    else bench.send({ type: 'step-done', payload: { node: line.position.node, seconds: 1 } })
  } else if (line.kind === 'skip') {
    if (page.kind === 'check' || page.kind === 'reading' || page.kind === 'proof' || page.kind === 'before') bench.send(skipPage(page, line.why))
  } else {
    const asking = page.kind === 'before' ? page.proof : page
    if (asking.kind !== 'check' && asking.kind !== 'reading' && asking.kind !== 'proof')
      throw new Error(`A ${page.kind} page where ${line.position.node} was answered.`)
    const { answer, values, before } = line
    const taken = before && {
      outcome: before.outcome,
      ...(before.value === null ? {} : { value: before.value }),
      ...(before.unit === null ? {} : { unit: before.unit }),
    }
    const measured =
      answer.unit === null
        ? {}
        : {
            values:
              values.length > 1
                ? values
                : [...(asking.kind === 'reading' && asking.judging.repeat && answer.value !== null ? [answer.value, answer.value] : values)],
            unit: answer.unit,
          }
    const drafts = answerPage({ ...asking, lines: [] }, { outcome: answer.outcome, ...measured, note: line.note ?? 'Seen', seconds: 1 }, taken ?? undefined)
    for (const draft of drafts ?? []) bench.send(draft)
  }
  expect(bench.refusal).toBeNull()
}

test('a step back, then the same answers, is the same route', () => {
  fc.assert(
    fc.property(chartsArb, machineArb, choicesArb, fc.nat(), (charts, machine, choices, to) => {
      const bench = walked(
        charts,
        machine,
        choices.filter((choice) => choice % 5 !== 0),
      )
      const { walk } = bench
      const trail = liveTrail(walk)
      const line = trail[to % Math.max(1, trail.length)]
      const canStepBack = ['at-node', 'at-cause', 'proven', 'escalated'].includes(walk.phase) && walk.ruledOut.length === 0
      fc.pre(line !== undefined && canStepBack && trail.length === walk.trail.length)
      expect(bench.send({ type: 'stepped-back', payload: { toEventId: line.eventId } })).toBe(true)
      for (const again of trail.slice(trail.indexOf(line))) repeatLine(bench, again)
      expect(routeOf(bench.walk)).toEqual(routeOf(walk))
      expect([bench.walk.node, bench.walk.calls]).toEqual([walk.node, walk.calls])
    }),
    runs,
  )
})

test('what is offered after a step back is the answer that was given, where a check was answered once', () => {
  fc.assert(
    fc.property(chartsArb, machineArb, choicesArb, (charts, machine, choices) => {
      const bench = walked(
        charts,
        machine,
        choices.filter((choice) => choice % 5 !== 0),
      )
      const to = isOpen(bench.state) ? backTo(bench.charts, bench.state) : null
      const line = bench.walk.trail.find(({ eventId }) => eventId === to)
      fc.pre(line?.kind === 'finding')
      bench.send({ type: 'stepped-back', payload: { toEventId: line.eventId } })
      for (let { page } = bench; page.kind === 'caution'; { page } = bench) bench.send(acknowledge(page))
      const { page } = bench
      // A proof that takes its `before` first shows what it was answered beside it.
      const offered = 'offered' in page ? page.offered : page.kind === 'before' ? page.proof.offered : null
      expect(offered?.answer).toEqual(line.answer)
    }),
    runs,
  )
})

describe('any stream of events, sense or nonsense', () => {
  const streamArb = fc.array(draftArb, { maxLength: 30 })
  const eventsOf = (drafts: readonly Parameters<typeof toEvent>[1][], machine: Parameters<typeof begin>[0]) =>
    [begin(machine), ...drafts].map((draft, index) =>
      toEvent(
        { id: uuid(1001 + index) as never, walkId, seq: index + 1, at: '2026-03-02T09:00:00Z', deviceId: people.junior.device, personId: people.junior.id },
        draft,
      ),
    )

  test('replays without a throw, and every state has a page', () => {
    fc.assert(
      fc.property(chartsArb, machineArb, streamArb, (documents, machine, drafts) => {
        const charts = anyVersionOf(documents)
        let state: WalkState = newWalk
        for (const event of eventsOf(drafts, machine)) {
          state = evolve(charts, state, event)
          expect(toPage(charts, state).kind).toBeTypeOf('string')
        }
        expect(state).toMatchObject({ lastSeq: drafts.length + 1 })
      }),
      { numRuns: 200 },
    )
  })

  test('is judged without a throw; what the guard takes, replay takes, and what it refuses it names', () => {
    fc.assert(
      fc.property(chartsArb, machineArb, streamArb, (documents, machine, drafts) => {
        const bench = new Bench(documents)
        for (const draft of [begin(machine), ...drafts]) bench.send(draft)
        expect(replay(bench.charts, bench.log)).toEqual(bench.state)
        if (bench.refusal) expect(bench.refusal.detail.length).toBeGreaterThan(0)
      }),
      { numRuns: 200 },
    )
  })

  test('a stream without charts asks for nothing that is not there', () => {
    fc.assert(
      fc.property(machineArb, streamArb, (machine, drafts) => {
        const charts = anyVersionOf([])
        const events = eventsOf(drafts, machine)
        const state = replay(charts, events)
        expect(toPage(charts, state).kind).toBeTypeOf('string')
        for (const event of events) expect(guard(charts, newWalk, event)).not.toBeNull()
      }),
      { numRuns: 80 },
    )
  })
})
