import { err, ok, type Result } from '#shared/lib/result.ts'
import { evolve } from './evolve.ts'
import type { WalkEvent } from './events.ts'
import { guard, type Actor } from './guard.ts'
import type { PinnedCharts } from './pinned-charts.ts'
import type { Refusal } from './refusals.ts'
import { newWalk, type WalkState } from './state.ts'

/** What a log comes to. Pure and total: the events were judged when they were written, and are facts. */
export function replay(charts: PinnedCharts, events: Iterable<WalkEvent>): WalkState {
  let state: WalkState = newWalk
  for (const event of events) state = evolve(charts, state, event)
  return state
}

/** Judges a new event and, when nothing speaks against it, gives the state that it leads to. */
export function appendEvent(charts: PinnedCharts, state: WalkState, event: WalkEvent, person?: Actor): Result<WalkState, Refusal> {
  const refusal = guard(charts, state, event, person)
  return refusal ? err(refusal) : ok(evolve(charts, state, event))
}
