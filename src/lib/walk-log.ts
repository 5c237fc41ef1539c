import type { BatchResult } from '#shared/api/walks.ts'
import type { DeviceId, EventId, PersonId, WalkId } from '#shared/lib/ids.ts'
import type { Result } from '#shared/lib/result.ts'
import { err, ok } from '#shared/lib/result.ts'
import type { EventOf, WalkEvent, WalkEventType } from '#shared/walk/events.ts'
import { batchMaxEvents } from '#shared/walk/events.ts'

import { ProblemError } from './api-client.ts'
import { newId } from './device.ts'

/** What a page wants to record; the log puts the envelope around it. */
export type EventDraft = { [Type in WalkEventType]: { readonly type: Type; readonly payload: EventOf<Type>['payload'] } }[WalkEventType]

/** Whether what was tapped is on the server, for words that are always on the page. */
export type SavedState =
  | { readonly kind: 'saved' }
  | { readonly kind: 'sending'; readonly count: number }
  /** The server did not answer; it is asked again by itself. */
  | { readonly kind: 'waiting'; readonly count: number; readonly why: string }
  /** The server refused to read it; asking again by itself would not help. */
  | { readonly kind: 'stuck'; readonly count: number; readonly why: string }

/** A tap that did not make it into the log of the walk. The server keeps it beside the log. */
export type SetAside = { readonly event: WalkEvent; readonly status: 'fork' | 'refused' | 'conflict'; readonly code: string }

/** A refusal of the guard, or of the log itself while it reads the server's. */
export type RecordRefusal = { readonly code: string; readonly words: string }

export type WalkLogSnapshot<State, Rules> = {
  /** Everything that was recorded: what the server has, then what it has not yet. */
  readonly events: readonly WalkEvent[]
  readonly state: State
  readonly rules: Rules
  readonly saved: SavedState
  readonly setAside: readonly SetAside[]
  /** True from the moment when something was set aside until the server's log has been read again. */
  readonly isReloading: boolean
}

/** The rules of a walk over its pinned charts: what judges an event, and what it comes to. */
export type WalkRules<State> = {
  readonly replay: (events: readonly WalkEvent[]) => State
  readonly append: (state: State, event: WalkEvent) => Result<State, RecordRefusal>
}

/** What the log needs of the outside. */
export type WalkLogSource<State, Rules extends WalkRules<State>> = {
  readonly walkId: WalkId
  readonly personId: PersonId
  readonly deviceId: DeviceId
  readonly events: readonly WalkEvent[]
  readonly rules: Rules
  readonly post: (events: readonly WalkEvent[]) => Promise<BatchResult>
  /** The server's log with the rules of its charts: a jump may have brought new ones. */
  readonly fetchLog: () => Promise<{ readonly events: readonly WalkEvent[]; readonly rules: Rules }>
}

const firstDelayMs = 1000
const longestDelayMs = 30_000

/**
 * The log of one walk on this device: judges what is recorded by the same guard as the server, shows it at once, and sends it in order
 * until the server has it. Holds what was not sent in memory; a store that outlives the page takes the place of `unsent`.
 */
export class WalkLog<State, Rules extends WalkRules<State>> {
  readonly walkId: WalkId
  readonly personId: PersonId
  readonly #source: WalkLogSource<State, Rules>
  readonly #listeners = new Set<() => void>()
  #unsent: readonly WalkEvent[] = []
  #snapshot: WalkLogSnapshot<State, Rules>
  #isSending = false
  #tries = 0
  #timer: ReturnType<typeof setTimeout> | undefined
  /** The server refused to read what it was sent: nothing more goes out until a person asks for it. */
  #isStuck = false
  /** The first event that the server would not take; once set, nothing new is recorded until its log was read again. */
  #refused: WalkEvent | null = null
  #lastGap = 0

  constructor(source: WalkLogSource<State, Rules>) {
    this.walkId = source.walkId
    this.personId = source.personId
    this.#source = source
    const { events, rules } = source
    this.#snapshot = { events, rules, state: rules.replay(events), saved: { kind: 'saved' }, setAside: [], isReloading: false }
  }

  readonly getSnapshot = (): WalkLogSnapshot<State, Rules> => this.#snapshot

  readonly subscribe = (listener: () => void): (() => void) => {
    this.#listeners.add(listener)
    return () => this.#listeners.delete(listener)
  }

  get unsentCount(): number {
    return this.#unsent.length
  }

  /** Records the drafts, all or none: a draft that the guard refuses takes the others with it. */
  record(drafts: readonly EventDraft[]): Result<readonly WalkEvent[], RecordRefusal> {
    if (this.#snapshot.isReloading) return err({ code: 'reloading', words: 'The walk is being read from the server. Wait a moment, then tap again.' })
    const made: WalkEvent[] = []
    let state = this.#snapshot.state
    for (const draft of drafts) {
      const event = this.#toEvent(draft, this.#snapshot.events.length + made.length + 1)
      const next = this.#snapshot.rules.append(state, event)
      if (!next.ok) return next
      state = next.value
      made.push(event)
    }
    this.#unsent = [...this.#unsent, ...made]
    this.#set({ events: [...this.#snapshot.events, ...made], state, saved: this.#toSending() })
    void this.#send()
    return ok(made)
  }

  /** Asks the server again now, whatever was planned. */
  retry(): void {
    clearTimeout(this.#timer)
    this.#timer = undefined
    this.#isStuck = false
    void (this.#refused === null ? this.#send() : this.#setAsideRest())
  }

  /** Goes by more charts from now on: those that a picked symptom brings along. */
  learn(rules: Rules): void {
    this.#set({ rules })
  }

  /** Takes over a log that was read elsewhere, when it is ahead and nothing of ours waits. */
  adopt(events: readonly WalkEvent[], toRules: () => Rules): void {
    if (this.#unsent.length > 0 || this.#snapshot.isReloading || events.length <= this.#snapshot.events.length) return
    const rules = toRules()
    this.#set({ events, rules, state: rules.replay(events) })
  }

  /** The person has read what was set aside. */
  forgetSetAside(): void {
    this.#set({ setAside: [] })
  }

  #toEvent(draft: EventDraft, seq: number): WalkEvent {
    const envelope = {
      // Made by newId, a UUID.
      id: newId() as EventId,
      walkId: this.walkId,
      seq,
      at: new Date().toISOString(),
      deviceId: this.#source.deviceId,
      personId: this.personId,
    }
    // The draft pairs its type with its payload; TypeScript loses the pair in the spread.
    return { ...envelope, ...draft } as WalkEvent
  }

  #set(change: Partial<WalkLogSnapshot<State, Rules>>): void {
    this.#snapshot = { ...this.#snapshot, ...change }
    this.#listeners.forEach((listener) => listener())
  }

  #toSending(): SavedState {
    const { saved } = this.#snapshot
    const count = this.#unsent.length
    if (count === 0) return { kind: 'saved' }
    return saved.kind === 'waiting' || saved.kind === 'stuck' ? { ...saved, count } : { kind: 'sending', count }
  }

  async #send(): Promise<void> {
    if (this.#isSending || this.#isStuck || this.#unsent.length === 0 || this.#timer !== undefined || this.#refused !== null) return
    this.#isSending = true
    try {
      const batch = this.#unsent.slice(0, batchMaxEvents)
      this.#settle(batch, await this.#source.post(batch))
    } catch (error) {
      this.#wait(error, () => this.#send())
    } finally {
      this.#isSending = false
    }
    if (this.#refused !== null) await this.#setAsideRest()
    else await this.#send()
  }

  /** Goes through the answer to a batch in order and stops at the first event that is not in the server's log. */
  #settle(batch: readonly WalkEvent[], { results, lastSeq }: BatchResult): void {
    this.#tries = 0
    for (const [index, event] of batch.entries()) {
      const result = results[index]
      if (result?.status === 'appended' || result?.status === 'duplicate') {
        this.#unsent = this.#unsent.filter(({ id }) => id !== event.id)
        continue
      }
      if (result?.status === 'gap' && this.#fillGap(lastSeq)) break
      this.#refused = event
      break
    }
    this.#set({ saved: this.#unsent.length === 0 ? { kind: 'saved' } : { kind: 'sending', count: this.#unsent.length } })
  }

  /** The server's log is shorter than it was (it came from a backup): sends it everything from there on again, once for each length. */
  #fillGap(lastSeq: number): boolean {
    if (this.#lastGap === lastSeq + 1) return false
    this.#lastGap = lastSeq + 1
    this.#unsent = this.#snapshot.events.filter(({ seq }) => seq > lastSeq)
    return true
  }

  /**
   * The server did not take an event: that one and everything recorded after it go to its side branch, told one by one to the person, and
   * the walk goes on from the server's log.
   */
  async #setAsideRest(): Promise<void> {
    const first = this.#refused
    if (first === null || this.#isSending || this.#isStuck || this.#timer !== undefined) return
    this.#isSending = true
    this.#set({ isReloading: true })
    try {
      const rest = this.#unsent.slice(this.#unsent.findIndex(({ id }) => id === first.id))
      const aside: SetAside[] = []
      for (let from = 0; from < rest.length; from += batchMaxEvents - 1) {
        // The refused event leads every batch: what stands behind it is then set aside with it and never judged on its own.
        const batch = from === 0 ? rest.slice(0, batchMaxEvents) : [first, ...rest.slice(from + 1, from + batchMaxEvents)]
        const { results } = await this.#source.post(batch)
        aside.push(...toSetAside(from === 0 ? batch : batch.slice(1), from === 0 ? results : results.slice(1)))
      }
      const log = await this.#source.fetchLog()
      this.#unsent = []
      this.#refused = null
      this.#tries = 0
      const setAside = [...this.#snapshot.setAside, ...aside]
      this.#set({ events: log.events, rules: log.rules, state: log.rules.replay(log.events), saved: { kind: 'saved' }, setAside, isReloading: false })
    } catch (error) {
      this.#wait(error, () => this.#setAsideRest())
    } finally {
      this.#isSending = false
    }
  }

  /** No answer: asks again later, each time later. A refusal to read the batch: waits for a person. */
  #wait(error: unknown, again: () => Promise<void>): void {
    const count = this.#unsent.length
    const why = toWhy(error)
    if (!canComeRight(error)) {
      this.#isStuck = true
      this.#set({ saved: { kind: 'stuck', count, why } })
      return
    }
    this.#set({ saved: { kind: 'waiting', count, why } })
    const delay = Math.min(longestDelayMs, firstDelayMs * 2 ** this.#tries) * (0.5 + Math.random() / 2)
    this.#tries += 1
    this.#timer = setTimeout(() => {
      this.#timer = undefined
      void again()
    }, delay)
  }
}

function toSetAside(events: readonly WalkEvent[], results: BatchResult['results']): SetAside[] {
  return events.flatMap((event, index) => {
    const result = results[index]
    if (result === undefined || result.status === 'appended' || result.status === 'duplicate') return []
    return [{ event, status: result.status === 'gap' ? 'fork' : result.status, code: result.code ?? result.status }]
  })
}

function toWhy(error: unknown): string {
  if (!(error instanceof ProblemError)) return 'this page stumbled over a fault of its own.'
  if (error.status === 0) return 'the server does not answer.'
  return error.status >= 500 ? 'the server stumbled.' : error.message
}

/** Silence, a stumbling server, too many tries: these pass. A refusal does not. */
function canComeRight(error: unknown): boolean {
  return error instanceof ProblemError && (error.status === 0 || error.status >= 500 || error.status === 408 || error.status === 429)
}
