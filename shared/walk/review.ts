import { isDecision } from '#shared/chart/graph.ts'
import type { DecisionNode, Outcome } from '#shared/chart/document.ts'
import type { EventId, OutcomeId, PersonId, PhotoId, Place, ServiceItemId } from '#shared/lib/ids.ts'
import { convertValue } from '#shared/units/convert.ts'
import type { Unit } from '#shared/units/quantities.ts'
import { evolve } from './evolve.ts'
import type { EventOf, WalkEvent, WalkEventType } from './events.ts'
import { comparedWith, findingOf, locateDecision } from './findings.ts'
import type { CauseWords, NodeName } from './page.ts'
import { accessOnStack, chartsOf, locate, type PinnedCharts } from './pinned-charts.ts'
import { arrive, goOn } from './route.ts'
import { newWalk, type SkipLine, type SpentWhy, type StartedWalk, type TrailEntry, type WalkRecord, type WalkResult, type WalkState } from './state.ts'
import { causeWords, nameAt, serviceItemOf } from './words.ts'

/** What a finding says of the machine. `off` points on to a suspect; an outcome that says nothing of the kind has none. */
export type Judgement = 'good' | 'serviceable' | 'off' | 'reproduced' | 'proven' | 'not-proven' | 'no-answer'

/** One line of a walk's story: an event, with all that a reader wants to know of it. */
export interface ReviewLine {
  readonly eventId: EventId
  readonly seq: number
  readonly type: WalkEventType
  readonly at: string
  readonly personId: PersonId
  /** The node that it is about, or where the walk stood. */
  readonly node: NodeName
  readonly outcome: { readonly title: string; readonly balloon: number | null } | null
  readonly reading: { readonly before: number | null; readonly values: readonly number[]; readonly unit: Unit } | null
  readonly judgement: Judgement | null
  /** Why a check got no answer. */
  readonly noAnswer: SkipLine['why'] | null
  readonly cause: CauseWords | null
  /** How the walk ended, at the line that closes it. */
  readonly result: WalkResult | null
  /** What was written: a note, a question, a reason, the titles of what was opened. */
  readonly text: string | null
  readonly photoIds: readonly PhotoId[]
  /** Bench minutes that it charged, access included. */
  readonly minutes: number
  readonly seconds: number
  /** Why it no longer counts. */
  readonly spent: SpentWhy | null
}

/** What an outcome says, at its node. */
export function judgementOf(node: DecisionNode, outcome: Outcome): Judgement | null {
  if (node.kind === 'proof') return outcome.confirms ? 'proven' : 'not-proven'
  if (outcome.reproduced) return 'reproduced'
  if ('reproduces' in node && node.reproduces) return null
  if (outcome.normal) return 'good'
  return outcome.serviceable ? 'serviceable' : 'off'
}

/** Minutes without the noise of adding tenths. */
function minutesBetween(before: WalkState, after: StartedWalk): number {
  const used = before.phase === 'new' ? 0 : before.minutesUsed
  return Math.round((after.minutesUsed - used) * 1e6) / 1e6
}

/** The story of a walk, event by event, told from its log. What was spent later is marked, and nothing is left out. */
export function toReview(charts: PinnedCharts, events: readonly WalkEvent[]): readonly ReviewLine[] {
  const steps: { event: WalkEvent; before: WalkState; after: StartedWalk }[] = []
  let state: WalkState = newWalk
  for (const event of events) {
    const before = state
    state = evolve(charts, state, event)
    if (state.phase !== 'new') steps.push({ event, before, after: state })
  }
  const end = state
  const spentOf = new Map(end.phase === 'new' ? [] : end.trail.map(({ eventId, spent }) => [eventId, spent]))
  return steps.map(({ event, before, after }) => ({
    eventId: event.id,
    seq: event.seq,
    type: event.type,
    at: event.at,
    personId: event.personId,
    ...toldBy(charts, before.phase === 'new' ? after : before, event),
    minutes: minutesBetween(before, after),
    seconds: 'seconds' in event.payload ? event.payload.seconds : 0,
    spent: spentOf.get(event.id) ?? null,
  }))
}

type Told = Pick<ReviewLine, 'node' | 'outcome' | 'reading' | 'judgement' | 'noAnswer' | 'cause' | 'result' | 'text' | 'photoIds'>

/** What an event tells by itself, at the walk as it stood before. */
function toldBy(charts: PinnedCharts, walk: StartedWalk, event: WalkEvent): Told {
  const { payload } = event
  const place = 'node' in payload ? payload.node : event.type === 'started' ? walk.start : walk.node
  const outcome = 'outcome' in payload ? payload.outcome : undefined
  return {
    node: nameAt(charts, walk, place),
    ...outcomeTold(charts, walk, place, outcome),
    reading: readingTold(charts, walk, event),
    ...(event.type === 'check-skipped' ? { judgement: 'no-answer' as const, noAnswer: event.payload.why } : { noAnswer: null }),
    cause: 'causeId' in payload && payload.causeId !== undefined ? causeWords(charts, walk, payload.causeId) : null,
    result: event.type === 'closed' ? event.payload.result : null,
    text: textOf(charts, walk, event),
    photoIds: photosOf(event),
  }
}

function outcomeTold(charts: PinnedCharts, walk: WalkRecord, place: Place, id: OutcomeId | undefined): Pick<Told, 'outcome' | 'judgement'> {
  const node = locate(charts, walk.pins, place)?.node
  const order = node && isDecision(node) ? node.outcomes.findIndex((outcome) => outcome.id === id) : -1
  const outcome = node && isDecision(node) ? node.outcomes[order] : undefined
  if (!outcome || !node || !isDecision(node)) return { outcome: null, judgement: null }
  return { outcome: { title: outcome.title, balloon: order < 9 ? order + 1 : null }, judgement: judgementOf(node, outcome) }
}

function readingTold(charts: PinnedCharts, walk: WalkRecord, event: WalkEvent): ReviewLine['reading'] {
  const { payload } = event
  if (!('unit' in payload) || payload.unit === undefined || payload.value === undefined) return null
  const values = 'values' in payload && payload.values !== undefined ? payload.values : [payload.value]
  return { before: event.type === 'finding-recorded' ? valueBefore(charts, walk, event.payload, payload.unit) : null, values, unit: payload.unit }
}

/** What a proof's value is held against, in its unit: taken on the proof's own page, or found earlier on the walk. */
function valueBefore(charts: PinnedCharts, walk: WalkRecord, { node, before }: EventOf<'finding-recorded'>['payload'], unit: Unit): number | null {
  const proof = locateDecision(charts, walk, node)
  const compared = proof && comparedWith(proof)
  if (!compared) return null
  const { value, unit: taken } = before ?? findingOf(charts, walk, compared)?.answer ?? {}
  return value == null || taken == null ? null : convertValue(value, taken, unit)
}

function textOf(charts: PinnedCharts, walk: WalkRecord, event: WalkEvent): string | null {
  switch (event.type) {
    case 'access-changed': {
      const title = (id: (typeof event.payload.opened)[number]) => accessOnStack(charts, walk, id)?.title ?? id
      return [...event.payload.opened.map((id) => `${title(id)}`), ...event.payload.closed.map((id) => `${title(id)}: closed`)].join(', ')
    }
    case 'caution-acknowledged':
      return event.payload.cautionIds.map((id) => chartsOf(charts, walk.pins).flatMap((index) => index.cautions.get(id)?.hazard ?? [])[0] ?? id).join(' · ')
    case 'cause-proven':
    case 'cause-not-proven':
      return event.payload.sight?.note ?? null
    case 'check-noted':
      return `${event.payload.title}: ${event.payload.found}`
    case 'contributing-set':
      return titlesOf(event.payload.causeIds, (id) => causeWords(charts, walk, id).title)
    case 'service-changed': {
      const title = (id: ServiceItemId) => serviceItemOf(charts, walk, id)?.title ?? id
      return [titlesOf(event.payload.added, title), titlesOf(event.payload.dropped, (id) => `${title(id)}: left out`)].filter(Boolean).join(', ')
    }
    case 'cause-noted':
      return event.payload.title ?? event.payload.note ?? null
    case 'escalated':
      return event.payload.reason
    case 'check-skipped':
      return event.payload.note ?? null
    default:
      return writtenIn(event.payload)
  }
}

/** Titles in one line; `null` when there are none. */
function titlesOf<Id>(ids: readonly Id[], title: (id: Id) => string): string | null {
  return ids.length === 0 ? null : ids.map(title).join(', ')
}

/** The words that a person wrote, under whichever name their event keeps them. */
function writtenIn(payload: WalkEvent['payload']): string | null {
  if ('text' in payload) return payload.text
  if ('note' in payload && payload.note !== undefined) return payload.note
  return 'why' in payload && payload.why !== undefined ? payload.why : null
}

function photosOf({ payload }: WalkEvent): readonly PhotoId[] {
  if ('photoIds' in payload) return payload.photoIds
  return 'sight' in payload ? (payload.sight?.photoIds ?? []) : []
}

/** One piece of the route between two nodes that follow each other, for the picture of the chart. */
export interface RouteLeg {
  readonly from: Place
  readonly to: Place
  /** The outcome that led on; `null` for a node without outcomes, and for one that was passed. */
  readonly outcome: OutcomeId | null
  /** On a part of the trail that no longer counts. */
  readonly isSpent: boolean
}

/** The route of a walk over its charts, from its start, through everything that it passed; parts that were spent are marked. */
export function routeLegs(charts: PinnedCharts, walk: WalkRecord): readonly RouteLeg[] {
  const first = arrive(charts, walk, { node: walk.start, calls: [] })
  return [...legsThrough(null, first.passed, first.position.node, null, false), ...walk.trail.flatMap((line) => legsOfLine(charts, walk, line))]
}

function legsOfLine(charts: PinnedCharts, walk: WalkRecord, line: TrailEntry): readonly RouteLeg[] {
  const isSpent = line.spent !== null
  const { node } = line.position
  if (line.kind === 'pick') {
    const to = arrive(charts, walk, { node: line.to, calls: [] })
    return legsThrough(node, to.passed.length > 0 ? to.passed : [line.to], to.position.node, null, isSpent)
  }
  const outcome = line.kind === 'finding' ? line.answer.outcome : line.kind === 'skip' ? line.took : null
  if (line.kind === 'skip' && outcome === null) return []
  const way = goOn(charts, walk, line.position, outcome ?? undefined)
  return way.deadEnd === 'no-way-on' && way.passed.length === 0 ? [] : legsThrough(node, way.passed, way.position.node, outcome, isSpent)
}

function legsThrough(from: Place | null, passed: readonly Place[], to: Place, outcome: OutcomeId | null, isSpent: boolean): readonly RouteLeg[] {
  const places = [...(from === null ? [] : [from]), ...passed, ...(passed.at(-1) === to ? [] : [to])]
  return places.slice(1).flatMap((place, index) => {
    const before = places[index]
    return before === undefined ? [] : [{ from: before, to: place, outcome: index === 0 && from !== null ? outcome : null, isSpent }]
  })
}
