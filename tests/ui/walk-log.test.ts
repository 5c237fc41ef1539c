import { afterEach, beforeEach, expect, test, vi } from 'vitest'

import type { DeviceId, EventId, OutcomeId, Place } from '#shared/lib/ids.ts'
import type { WalkEvent } from '#shared/walk/events.ts'
import { refusalWords } from '#shared/walk/refusals.ts'
import { isOpen, type WalkState } from '#shared/walk/state.ts'
import { toRules, type PlayerRules } from '#src/api/walk-logs.ts'
import { ProblemError } from '#src/lib/api-client.ts'
import { getDeviceId } from '#src/lib/device.ts'
import { WalkLog, type EventDraft } from '#src/lib/walk-log.ts'
import { FakeBench } from '#tests/support/fake-walks.ts'
import { buildSession } from '#tests/support/session-builder.ts'
import { uuid } from '#tests/support/walk-builder.ts'
import { sawChart } from '#tests/support/walk-charts.ts'

const junior = signedIn()

function signedIn() {
  const { person } = buildSession('junior')
  if (person === null) throw new Error('The junior is signed in.')
  return person
}

beforeEach(() => void vi.useFakeTimers())
afterEach(() => void vi.useRealTimers())

/** A log on this device over a server in memory; silence of the server is what `fetch` makes of it. */
function openLog(bench = new FakeBench(sawChart).begin()): { bench: FakeBench; log: WalkLog<WalkState, PlayerRules>; posts: () => number } {
  let posts = 0
  const log = new WalkLog<WalkState, PlayerRules>({
    walkId: bench.walkId,
    personId: junior.id,
    deviceId: getDeviceId(),
    events: bench.log,
    rules: toRules(bench.versions, junior),
    post: async (events) => {
      posts += 1
      if (bench.refusesToRead) throw new ProblemError(413, 'too-large', 'This is too large to be read.')
      return bench.post(events).catch(() => Promise.reject(new ProblemError(0, 'no-answer', 'The server does not answer.')))
    },
    fetchLog: async () => {
      if (bench.isDown) throw new ProblemError(0, 'no-answer', 'The server does not answer.')
      return { events: bench.log, rules: toRules(bench.versions, junior) }
    },
  })
  return { bench, log, posts: () => posts }
}

const found = (node: string, outcome: string): EventDraft => ({
  type: 'finding-recorded',
  payload: { node: `saw/${node}` as Place, outcome: outcome as OutcomeId, judgedBy: 'hand', photoIds: [], seconds: 1 },
})
const note = (text: string): EventDraft => ({ type: 'note-added', payload: { text, photoIds: [] } })

/** Lets what is under way on the wire come to its end, without the clock moving on. */
const settle = () => vi.advanceTimersByTimeAsync(0)

test('what is recorded stands in the walk at once, and is saved as soon as the server has it', async () => {
  const { bench, log } = openLog()
  const made = log.record([found('n1', 'yes')])
  expect(made.ok).toBe(true)
  expect(log.getSnapshot().state).toMatchObject({ phase: 'at-node', node: 'saw/n2' })
  expect(log.getSnapshot().saved).toEqual({ kind: 'sending', count: 1 })
  await settle()
  expect(log.getSnapshot().saved).toEqual({ kind: 'saved' })
  expect(bench.log.map(({ type }) => type)).toEqual(['started', 'finding-recorded'])
})

test('drafts are recorded all or none: one that the guard refuses takes the others with it', async () => {
  const { log, posts } = openLog()
  const made = log.record([found('n1', 'yes'), found('n5', 'good')])
  expect(made).toEqual({ ok: false, error: { code: 'wrong-node', words: refusalWords['wrong-node'] } })
  await settle()
  expect(log.getSnapshot().events).toHaveLength(1)
  expect(posts()).toBe(0)
})

test('a server that does not answer is asked again, each time later, and gets everything once, in order', async () => {
  const { bench, log, posts } = openLog()
  bench.isDown = true
  log.record([found('n1', 'yes')])
  await settle()
  expect(log.getSnapshot().saved).toEqual({ kind: 'waiting', count: 1, why: 'the server does not answer.' })
  log.record([note('still listening')])
  expect(log.getSnapshot().saved).toMatchObject({ kind: 'waiting', count: 2 })
  await vi.advanceTimersByTimeAsync(1000)
  const early = posts()
  await vi.advanceTimersByTimeAsync(60_000)
  // Each wait is longer than the last: a minute of silence is a handful of questions, not sixty.
  expect(posts() - early).toBeLessThan(8)
  bench.isDown = false
  await vi.advanceTimersByTimeAsync(31_000)
  expect(log.getSnapshot().saved).toEqual({ kind: 'saved' })
  expect(bench.log.map(({ seq, type }) => `${seq} ${type}`)).toEqual(['1 started', '2 finding-recorded', '3 note-added'])
})

test('an event whose answer was lost is sent again and counts once', async () => {
  const { bench, log } = openLog()
  bench.losesAnswers = true
  log.record([found('n1', 'yes')])
  await settle()
  expect(log.getSnapshot().saved.kind).toBe('waiting')
  bench.losesAnswers = false
  log.retry()
  await settle()
  expect(log.getSnapshot().saved).toEqual({ kind: 'saved' })
  expect(bench.log).toHaveLength(2)
})

test('what the server refuses to read waits for a person instead of being sent for ever', async () => {
  const { bench, log, posts } = openLog()
  bench.refusesToRead = true
  log.record([found('n1', 'yes')])
  await vi.advanceTimersByTimeAsync(120_000)
  expect(posts()).toBe(1)
  expect(log.getSnapshot().saved).toEqual({ kind: 'stuck', count: 1, why: 'This is too large to be read.' })
  bench.refusesToRead = false
  log.retry()
  await settle()
  expect(log.getSnapshot().saved).toEqual({ kind: 'saved' })
})

test('once another device has the walk, every tap made here is set aside by name and the walk goes on from the server’s log', async () => {
  const { bench, log } = openLog()
  bench.append([
    {
      id: uuid(500) as EventId,
      walkId: bench.walkId,
      seq: 2,
      at: '2026-03-02T09:01:00.000Z',
      deviceId: uuid(77) as DeviceId,
      personId: junior.id,
      type: 'resumed',
      payload: {},
    },
  ])
  bench.isDown = true
  log.record([found('n1', 'yes')])
  log.record([note('typed while the server was away')])
  await settle()
  bench.isDown = false
  log.retry()
  await settle()
  const { setAside, events, saved, state } = log.getSnapshot()
  expect(setAside.map(({ event, status, code }) => [event.type, status, code])).toEqual([
    ['finding-recorded', 'fork', 'other-device'],
    ['note-added', 'fork', 'after-refused'],
  ])
  expect(bench.side).toHaveLength(2)
  expect(events).toEqual(bench.log)
  expect(isOpen(state) && state.holder.deviceId).toBe(uuid(77))
  expect(saved).toEqual({ kind: 'saved' })
})

test('while the server’s log is being read again nothing new is recorded, and the server is asked until it answers', async () => {
  const { bench, log } = openLog()
  bench.append([
    {
      id: uuid(500) as EventId,
      walkId: bench.walkId,
      seq: 2,
      at: '2026-03-02T09:01:00.000Z',
      deviceId: uuid(77) as DeviceId,
      personId: junior.id,
      type: 'resumed',
      payload: {},
    },
  ])
  const append = bench.append.bind(bench)
  // The refusal comes through, then the server falls silent.
  bench.append = (batch) => {
    const answer = append(batch)
    bench.isDown = true
    return answer
  }
  log.record([found('n1', 'yes')])
  await settle()
  expect(log.getSnapshot().isReloading).toBe(true)
  expect(log.record([note('too early')])).toMatchObject({ ok: false, error: { code: 'reloading' } })
  bench.append = append
  bench.isDown = false
  await vi.advanceTimersByTimeAsync(2000)
  expect(log.getSnapshot().isReloading).toBe(false)
  expect(log.getSnapshot().setAside).toHaveLength(1)
})

test('a server that came back from an older backup gets what it lost', async () => {
  const { bench, log } = openLog()
  log.record([found('n1', 'yes')])
  log.record([note('kept here')])
  await settle()
  expect(bench.log).toHaveLength(3)
  bench.log = bench.log.slice(0, 1)
  log.record([note('after the fire')])
  await settle()
  expect(bench.log.map(({ type }) => type)).toEqual(['started', 'finding-recorded', 'note-added', 'note-added'])
  expect(log.getSnapshot().saved).toEqual({ kind: 'saved' })
})

test('a log that was read elsewhere is taken over only when it is ahead and nothing waits here', async () => {
  const { bench, log } = openLog()
  bench.isDown = true
  log.record([found('n1', 'yes')])
  await settle()
  log.adopt([...bench.log, ...log.getSnapshot().events.slice(1), ...log.getSnapshot().events.slice(1)], () => toRules(bench.versions, junior))
  expect(log.getSnapshot().events).toHaveLength(2)
  bench.isDown = false
  log.retry()
  await settle()
  const fromTheOtherTab: WalkEvent = {
    id: uuid(600) as EventId,
    walkId: bench.walkId,
    seq: 3,
    at: '2026-03-02T09:05:00.000Z',
    deviceId: getDeviceId(),
    personId: junior.id,
    type: 'note-added',
    payload: { text: 'from the other tab', photoIds: [] },
  }
  bench.append([fromTheOtherTab])
  log.adopt(bench.log, () => toRules(bench.versions, junior))
  expect(log.getSnapshot().events).toHaveLength(3)
})
