import { expect } from 'vitest'

import type { ChartDocument } from '#shared/chart/document.ts'
import type { ChartId, DeviceId, EventId, PersonId, Place, QuestionId, WalkId } from '#shared/lib/ids.ts'
import type { Role } from '#shared/trade/roles.ts'
import { handBackRun } from '#shared/trade/hand-back-run.ts'
import type { SpecLimits } from '#shared/units/limits.ts'
import type { EventOf, Machine, RunItem, WalkEvent, WalkEventType } from '#shared/walk/events.ts'
import type { Actor } from '#shared/walk/guard.ts'
import type { WalkPage } from '#shared/walk/page.ts'
import { anyVersionOf, type PinnedCharts } from '#shared/walk/pinned-charts.ts'
import { appendEvent, replay } from '#shared/walk/replay.ts'
import type { Refusal, RefusalCode } from '#shared/walk/refusals.ts'
import { toPage } from '#shared/walk/select.ts'
import { newWalk, type StartedWalk, type WalkState } from '#shared/walk/state.ts'
import { acknowledge, answerAgain, answerBefore, answerPage, finishStep, proveCause, toEvent, type EventDraft, type PageAnswer } from './walk-drafts.ts'

/** A UUIDv7 that tells which number it was made from. */
export function uuid(number: number): string {
  return `01900000-0000-7000-8000-${number.toString(16).padStart(12, '0')}`
}

export const walkId = uuid(1) as WalkId
/** The people of the stories, each at a device of their own. */
export const people = {
  junior: { id: uuid(11) as PersonId, role: 'junior' as Role, device: uuid(21) as DeviceId },
  mate: { id: uuid(12) as PersonId, role: 'junior' as Role, device: uuid(22) as DeviceId },
  lead: { id: uuid(13) as PersonId, role: 'lead' as Role, device: uuid(23) as DeviceId },
}
export type Someone = keyof typeof people

export const saw: Machine = { class: 'chain-saw', engine: 'two-stroke' }

/** Something that a person does: the events it makes of where the walk stands. */
export type Act = (bench: Bench) => readonly EventDraft[]

/** A bench with one walk on it; every event goes through the guard. */
export class Bench {
  readonly charts: PinnedCharts
  readonly first: ChartDocument
  readonly documents: readonly ChartDocument[]
  state: WalkState = newWalk
  readonly log: WalkEvent[] = []
  refusal: Refusal | null = null
  someone: Someone = 'junior'
  device: Someone = 'junior'

  constructor(documents: readonly [ChartDocument, ...ChartDocument[]]) {
    this.documents = documents
    this.first = documents[0]
    this.charts = anyVersionOf(documents)
  }

  get walk(): StartedWalk {
    if (this.state.phase === 'new') throw new Error('The walk of this story has not begun.')
    return this.state
  }

  get page(): WalkPage {
    return toPage(this.charts, this.state)
  }

  /** "n5" is a node of the first chart, "other/n5" one of another. */
  place(name: string): Place {
    return (name.includes('/') ? name : `${this.first.id}/${name}`) as Place
  }

  /** The event that recorded something at a node, the latest one. */
  eventAt(name: string): EventId {
    const place = this.place(name)
    const event = this.log.findLast(({ payload }) => 'node' in payload && payload.node === place && !('cautionIds' in payload))
    if (event === undefined) throw new Error(`Nothing was recorded at ${place}.`)
    return event.id
  }

  /** Sends one event; a refusal is kept, and ends the batch. */
  send(draft: EventDraft): boolean {
    const seq = this.log.length + 1
    const { id: personId, role } = people[this.someone]
    const at = new Date(Date.UTC(2026, 2, 2, 9, 0, seq)).toISOString()
    const event = toEvent({ id: uuid(1000 + seq) as EventId, walkId, seq, at, deviceId: people[this.device].device, personId }, draft)
    return this.post(event, { id: personId, role })
  }

  /** Posts an event as it is. */
  post(event: WalkEvent, person?: Actor): boolean {
    const next = appendEvent(this.charts, this.state, event, person)
    if (!next.ok) {
      this.refusal = next.error
      return false
    }
    this.state = next.value
    this.log.push(event)
    return true
  }

  /** Does some acts; a careful person reads whatever cautions wait before each. */
  do(acts: readonly Act[], careful: boolean): void {
    for (const act of acts) {
      if (careful && act !== readCautions) readPending(this)
      for (const draft of act(this)) if (!this.send(draft)) return
    }
  }
}

function readPending(bench: Bench): void {
  const { page } = bench
  if (page.kind === 'caution') bench.send(acknowledge(page))
}

/** What follows from a story. */
export interface Outcome {
  thenRefused(code: RefusalCode, field?: string): void
  /** The walk stands at a node. */
  thenAt(node: string): Outcome
  thenPhase(phase: WalkState['phase']): Outcome
  then(look: (walk: StartedWalk, bench: Bench) => void): Outcome
  /** The page that the player shows. */
  thenPage<Kind extends WalkPage['kind']>(kind: Kind, look?: (page: Extract<WalkPage, { kind: Kind }>) => void): Outcome
}

/** Stories over some charts; the walk begins in the first. */
export function storiesOn(...documents: [ChartDocument, ...ChartDocument[]]) {
  return {
    /** What happened before, every caution read in time; each of it is taken, or the story itself is wrong. */
    given(...acts: readonly Act[]) {
      const bench = new Bench(documents)
      bench.do(acts, true)
      if (bench.refusal) throw new Error(`The story itself is refused: ${JSON.stringify(bench.refusal)} after ${bench.log.map(({ type }) => type).join(', ')}`)
      return { ...outcomeOf(bench), when: (...more: readonly Act[]) => (bench.do(more, false), outcomeOf(bench)) }
    },
  }
}

function outcomeOf(bench: Bench): Outcome {
  const outcome: Outcome = {
    thenRefused(code, field) {
      expect(bench.refusal?.code).toBe(code)
      if (field !== undefined) expect(bench.refusal?.field).toBe(field)
    },
    thenAt(node) {
      expect(bench.refusal).toBeNull()
      expect(bench.walk.node).toBe(bench.place(node))
      return outcome
    },
    thenPhase(phase) {
      expect(bench.refusal).toBeNull()
      expect(bench.state.phase).toBe(phase)
      return outcome
    },
    then(look) {
      expect(bench.refusal).toBeNull()
      // Whatever a story comes to, its log comes to the same.
      expect(replay(bench.charts, bench.log)).toEqual(bench.state)
      look(bench.walk, bench)
      return outcome
    },
    thenPage(kind, look) {
      expect(bench.refusal).toBeNull()
      const { page } = bench
      expect(page.kind).toBe(kind)
      // The kind was just compared.
      look?.(page as Extract<WalkPage, { kind: typeof kind }>)
      return outcome
    },
  }
  return outcome
}

/** Any event, as it is. */
export function act<Type extends WalkEventType>(type: Type, payload: EventOf<Type>['payload'] | ((bench: Bench) => EventOf<Type>['payload'])): Act {
  return (bench) => [{ type, payload: typeof payload === 'function' ? payload(bench) : payload } as EventDraft]
}

/** An act of somebody else, at their own device or at the junior's. */
export function by(someone: Someone, done: Act, device: Someone = someone): Act {
  return (bench) => {
    bench.someone = someone
    bench.device = device
    const drafts = done(bench)
    for (const draft of drafts) if (!bench.send(draft)) break
    bench.someone = 'junior'
    bench.device = 'junior'
    return []
  }
}

/** The walk begins: at the start `s` of the first chart, for a saw, unless the story says otherwise. */
export function started(more: Partial<EventOf<'started'>['payload']> & { readonly limits?: SpecLimits } = {}): Act {
  return act('started', ({ first, documents }) => ({
    kind: 'bench',
    chartId: first.id,
    startId: 's' as EventOf<'started'>['payload']['startId'],
    pins: Object.fromEntries(documents.map(({ id }) => [id, 1])) as Record<ChartId, number>,
    machine: saw,
    limits: {},
    ...more,
  }))
}

/** A finding by hand, as one tap on an outcome sends it: with the steps of the page. */
export function found(node: string, outcome: string, more: Partial<EventOf<'finding-recorded'>['payload']> = {}): Act {
  return (bench) => [
    ...linesOf(bench, node),
    {
      type: 'finding-recorded',
      payload: {
        node: bench.place(node),
        outcome: outcome as EventOf<'finding-recorded'>['payload']['outcome'],
        judgedBy: 'hand',
        photoIds: [],
        seconds: 5,
        ...more,
      },
    },
  ]
}

function linesOf(bench: Bench, node: string): readonly EventDraft[] {
  const { page } = bench
  const isHere = 'lines' in page && page.node.place === bench.place(node)
  return isHere ? page.lines.map((line) => ({ type: 'step-done', payload: { node: line.place, seconds: 0 } })) : []
}

/** The page is answered as the player does it: values judged by limits where they are known; a proof takes its `before` first. */
export function answer(given: Omit<PageAnswer, 'seconds'> & { readonly before?: Omit<PageAnswer, 'seconds'> }): Act {
  return ({ page }) => {
    const { before, ...found } = given
    const taken = page.kind === 'before' && before ? answerBefore(page, { ...before, seconds: 0 }) : undefined
    const asked = page.kind === 'before' ? page.proof : page
    if (asked.kind !== 'check' && asked.kind !== 'reading' && asked.kind !== 'proof') throw new Error(`There is nothing to answer on a ${page.kind} page.`)
    const drafts = answerPage(asked, { ...found, seconds: 5 }, taken ?? undefined)
    if (drafts === null) throw new Error('The answer tells no outcome.')
    return drafts
  }
}

/** The outcome of a page by its id, as one tap. */
export function tap(outcome: string): Act {
  return answer({ outcome: outcome as NonNullable<PageAnswer['outcome']> })
}

/** Full-speed readings in 1/min. */
export function revs(...values: number[]): Act {
  return answer({ values, unit: '1/min' })
}

/** The answer that the page offers, recorded again. */
export const again: Act = ({ page }) => {
  if (!('offered' in page) || page.offered === null) throw new Error(`Nothing is offered on a ${page.kind} page.`)
  return answerAgain(page, page.offered, 1)
}

/** The cautions of the page, read. */
export const readCautions: Act = ({ page }) => {
  if (page.kind !== 'caution') throw new Error(`No caution waits: the page is a ${page.kind} page.`)
  return [acknowledge(page)]
}

/** Some cautions, read for a node. */
export function read(node: string, ...cautionIds: string[]): Act {
  return act('caution-acknowledged', (bench) => ({
    node: bench.place(node),
    cautionIds: cautionIds as EventOf<'caution-acknowledged'>['payload']['cautionIds'],
  }))
}

/** The step of the page, done. */
export const stepDone: Act = ({ page }) => {
  if (page.kind !== 'step') throw new Error(`No step stands alone here: the page is a ${page.kind} page.`)
  return [finishStep(page, 10)]
}

/** No answer. */
export function skipped(node: string, why: EventOf<'check-skipped'>['payload']['why'] = 'not-sure'): Act {
  return act('check-skipped', (bench) => ({ node: bench.place(node), why }))
}

/** Back to the latest record of a node. */
export function backTo(node: string): Act {
  return act('stepped-back', (bench) => ({ toEventId: bench.eventAt(node) }))
}

/** Something seen out of turn. */
export function noticed(node: string, outcome: string): Act {
  return act('noticed', (bench) => ({ node: bench.place(node), outcome: outcome as NonNullable<EventOf<'noticed'>['payload']['outcome']>, photoIds: [] }))
}

/** Access opened and closed out of turn. */
export function access(opened: readonly string[], closed: readonly string[] = []): Act {
  return act('access-changed', { opened, closed } as EventOf<'access-changed'>['payload'])
}

/** The cause of the page is proven, by its proof or by a second look. */
export const proven: Act = ({ page }) => {
  const draft = page.kind === 'cause' ? proveCause(page, { note: 'Seen once more.', photoIds: [] }) : null
  if (draft === null) throw new Error(`There is no cause to prove on a ${page.kind} page.`)
  return [draft]
}

/** The cause of the page is not it, after a second look. */
export const notProven: Act = ({ page }) => {
  if (page.kind !== 'cause' || page.cause.causeId === null) throw new Error(`There is no cause on a ${page.kind} page.`)
  return [{ type: 'cause-not-proven', payload: { causeId: page.cause.causeId, sight: { note: 'Looks sound.', photoIds: [] } } }]
}

/** The repair is done, with all of the service list. */
export const repaired: Act = ({ walk }) => [{ type: 'repair-done', payload: { serviceDone: [...walk.serviceList], partsUsed: [], minutes: 10 } }]

/** All items of the run with one result. */
export function runItems(result: RunItem['result'], machine: Machine = saw): RunItem[] {
  return handBackRun(machine.class).map(({ id }) => ({ id, result }))
}

export const runPassed: Act = act('run-passed', { items: runItems('ok') })
/** The run failed at its first item. */
export const runFailed: Act = act('run-failed', { items: runItems('failed').slice(0, 1) })
export const closedAs = (result: EventOf<'closed'>['payload']['result']): Act => act('closed', { result })

export const questionId = uuid(31) as QuestionId
/** The lead is asked. */
export const asked: Act = act('asked', { questionId, text: 'Is this a rub stripe?', photoIds: [] })

/** Any event with ids as plain words, sensible or not: for stories in which the guard is what is under test. */
export function raw(type: WalkEventType, payload: unknown): Act {
  return act(type, payload as never)
}
