import type { BatchResult } from '#shared/api/walks.ts'
import type { EventId } from '#shared/lib/ids.ts'
import type { WalkEvent } from '#shared/walk/events.ts'
import type { Actor } from '#shared/walk/guard.ts'
import type { PinnedCharts } from '#shared/walk/pinned-charts.ts'
import type { RefusalCode } from '#shared/walk/refusals.ts'
import { appendEvent } from '#shared/walk/replay.ts'
import type { WalkState } from '#shared/walk/state.ts'

/** An event with the hash of its body, its number left out. */
export interface HashedEvent {
  readonly event: WalkEvent
  readonly bodyHash: string
}

/** Why the server itself refuses an event that the rules of the walk would take. */
export type Veto = 'no-such-person' | Extract<RefusalCode, 'no-such-version'>

/** What is known of an id: where the event stands, and what it said. */
export interface KnownEvent {
  readonly bodyHash: string
  /** Null for an event of a log. */
  readonly aside: { readonly status: 'fork' | 'refused'; readonly code: string } | null
}

export interface AsideEvent extends HashedEvent {
  readonly status: 'fork' | 'refused'
  readonly code: string
}

interface Bench {
  readonly charts: PinnedCharts
  readonly state: WalkState
  readonly lastSeq: number
  readonly actor: Actor
  readonly known: ReadonlyMap<EventId, KnownEvent>
  readonly vetoOf: (event: WalkEvent) => Veto | null
}

export interface Judged {
  readonly results: BatchResult['results']
  readonly appended: readonly HashedEvent[]
  readonly aside: readonly AsideEvent[]
  readonly state: WalkState
  readonly lastSeq: number
}

/** Refusals that say that the log went on elsewhere: the event is right on its own device and stands on a branch. */
const forkCodes: ReadonlySet<string> = new Set<RefusalCode>(['other-device', 'other-person', 'wrong-seq'])

/**
 * Judges a batch in order. Known ids answer what they answered before; a number past the next one is a gap and is kept nowhere; the
 * first event that does not go into the log, and every new one after it, goes to the side branch, so that nothing is dropped.
 */
export function judgeBatch(bench: Bench, events: readonly HashedEvent[]): Judged {
  const results: BatchResult['results'][number][] = []
  const appended: HashedEvent[] = []
  const aside: AsideEvent[] = []
  const known = new Map(bench.known)
  let { state, lastSeq } = bench
  let isBroken = false

  const setAside = (hashed: HashedEvent, status: 'fork' | 'refused', code: string): void => {
    results.push({ id: hashed.event.id, status, code })
    isBroken = true
    // An event that somebody else's sign-in brought along is judged when its own person sends it.
    if (code === 'not-you') return
    aside.push({ ...hashed, status, code })
    known.set(hashed.event.id, { bodyHash: hashed.bodyHash, aside: { status, code } })
  }

  for (const hashed of events) {
    const { event, bodyHash } = hashed
    const before = known.get(event.id)
    if (before !== undefined) {
      results.push(toKnownResult(event.id, before, bodyHash))
      if (before.aside !== null || before.bodyHash !== bodyHash) isBroken = true
    } else if (event.personId !== bench.actor.id) {
      setAside(hashed, 'refused', 'not-you')
    } else if (isBroken) {
      setAside(hashed, 'fork', 'wrong-seq')
    } else if (event.seq > lastSeq + 1) {
      results.push({ id: event.id, status: 'gap' })
    } else if (event.seq <= lastSeq) {
      setAside(hashed, 'fork', 'wrong-seq')
    } else {
      const next = appendEvent(bench.charts, state, event, bench.actor)
      const veto = next.ok ? bench.vetoOf(event) : null
      if (!next.ok) setAside(hashed, forkCodes.has(next.error.code) ? 'fork' : 'refused', next.error.code)
      else if (veto !== null) setAside(hashed, 'refused', veto)
      else {
        state = next.value
        lastSeq = event.seq
        appended.push(hashed)
        known.set(event.id, { bodyHash, aside: null })
        results.push({ id: event.id, status: 'appended' })
      }
    }
  }
  return { results, appended, aside, state, lastSeq }
}

function toKnownResult(id: EventId, known: KnownEvent, bodyHash: string): BatchResult['results'][number] {
  if (known.bodyHash !== bodyHash) return { id, status: 'conflict' }
  return known.aside === null ? { id, status: 'duplicate' } : { id, ...known.aside }
}
