import type { CauseId, PersonId } from '#shared/lib/ids.ts'
import { handBackRun } from '#shared/trade/hand-back-run.ts'
import { hasRole, type Role } from '#shared/trade/roles.ts'
import { fixItems, isLeftUnsafe, possibleResults } from './endings.ts'
import { walkEventSchema, type EventOf, type RunItem, type WalkEvent, type WalkEventType } from './events.ts'
import { faultOfFinding, faultOfNoticed, faultOfSkip, faultOfStep } from './guard-findings.ts'
import { faultOfAccess, faultOfAcknowledgement } from './guard-machine.ts'
import { isWithin } from './judging.ts'
import { chartOf, chartsOf, locate, type PinnedCharts, type Pins } from './pinned-charts.ts'
import { proofInReach } from './reach.ts'
import { refusalWords, refuse, type Refusal } from './refusals.ts'
import { isOpen, liveTrail, type OpenPhase, type OpenWalk, type ProvenCause, type WalkState } from './state.ts'

/** The person who sends an event; without one (a file on the command line) what only a person's role allows is taken at its word. */
export interface Actor {
  readonly id: PersonId
  readonly role: Role
}

type PhaseName = OpenPhase['phase']

/** Under what conditions an event of one type is taken. */
interface Rule<Type extends WalkEventType> {
  /** The phases in which it makes sense. */
  readonly during: readonly PhaseName[]
  /** Taken while the walk is paused, too. */
  readonly whilePaused?: true
  /** Taken from any device and person: it is about who holds the walk, or comes from the lead. */
  readonly fromAnyone?: true
  readonly role?: Role
  /** For free walks alone. */
  readonly free?: true
  /** What else speaks against it. */
  readonly fault?: (charts: PinnedCharts, walk: OpenWalk, event: EventOf<Type>, person?: Actor) => Refusal | null
}

const anyOpen: readonly PhaseName[] = ['at-node', 'at-cause', 'proven', 'repaired', 'run-passed', 'escalated', 'held']
const onTheRoute: readonly PhaseName[] = ['at-node', 'at-cause']
const onTheBench: readonly PhaseName[] = ['at-node', 'at-cause', 'proven', 'repaired']

/** The rules of the walk, one for every type of event but the first. */
const rules: { readonly [Type in Exclude<WalkEventType, 'started'>]: Rule<Type> } = {
  'machine-identified': { during: anyOpen },
  'caution-acknowledged': { during: onTheBench, fault: faultOfAcknowledgement },
  'step-done': { during: ['at-node'], fault: faultOfStep },
  'finding-recorded': { during: ['at-node'], fault: faultOfFinding },
  'check-skipped': { during: ['at-node'], fault: faultOfSkip },
  noticed: { during: onTheBench, fault: faultOfNoticed },
  'access-changed': { during: anyOpen, fault: faultOfAccess },
  'stepped-back': {
    during: ['at-node', 'at-cause', 'proven', 'escalated'],
    fault: (_charts, walk, { payload }) =>
      liveTrail(walk).some(({ eventId }) => eventId === payload.toEventId) ? null : refuse('not-on-trail', '/payload/toEventId'),
  },
  jumped: { during: ['at-node'], fault: faultOfPick },
  'suspect-named': { during: ['at-node'], fault: faultOfSuspect },
  'cause-proven': { during: ['at-cause'], fault: faultOfProof },
  'cause-not-proven': { during: ['at-cause'], fault: faultOfProof },
  'contributing-set': {
    during: anyOpen,
    fault: (charts, walk, { payload }) =>
      payload.causeIds.every((id) => isKnownCause(charts, walk.pins, id)) ? null : refuse('no-such-cause', '/payload/causeIds'),
  },
  'service-changed': { during: anyOpen, fault: faultOfService },
  asked: {
    during: anyOpen,
    fault: (_charts, walk, { payload }) =>
      walk.questions.some(({ questionId }) => questionId === payload.questionId) ? refuse('question-exists', '/payload/questionId') : null,
  },
  answered: { during: anyOpen, whilePaused: true, fromAnyone: true, role: 'lead', fault: faultOfLeadsAnswer },
  escalated: { during: onTheRoute },
  held: { during: ['at-node', 'at-cause', 'proven', 'repaired', 'run-passed', 'escalated'] },
  paused: { during: anyOpen },
  resumed: {
    during: anyOpen,
    whilePaused: true,
    fromAnyone: true,
    fault: (_charts, walk, { personId }) => (personId === walk.holder.personId ? null : refuse('other-person')),
  },
  'handed-over': {
    during: anyOpen,
    fault: (_charts, walk, { payload }) => (payload.to === walk.holder.personId ? refuse('to-yourself', '/payload/to') : null),
  },
  'taken-over': { during: anyOpen, whilePaused: true, fromAnyone: true, fault: faultOfTakeOver },
  'repair-done': {
    during: ['proven'],
    fault: (_charts, walk, { payload }) =>
      payload.serviceDone.every((id) => walk.serviceList.includes(id)) ? null : refuse('no-such-service-item', '/payload/serviceDone'),
  },
  ticked: { during: anyOpen, fault: faultOfTick },
  'run-passed': {
    during: ['repaired'],
    fault: (_charts, walk, { payload }) =>
      faultOfRunItems(walk, payload.items) ??
      faultOfIncompleteRun(walk, payload.items) ??
      (payload.items.some(({ result }) => result === 'failed') ? refuse('run-not-ok', '/payload/items') : null),
  },
  'run-failed': {
    during: ['repaired'],
    fault: (_charts, walk, { payload }) =>
      faultOfRunItems(walk, payload.items) ?? (payload.items.some(({ result }) => result === 'failed') ? null : refuse('nothing-failed', '/payload/items')),
  },
  'note-added': { during: anyOpen, whilePaused: true },
  flagged: {
    during: anyOpen,
    fault: (charts, walk, { payload }) => (locate(charts, walk.pins, payload.node) ? null : refuse('no-such-node', '/payload/node')),
  },
  'check-noted': { during: ['at-node'], free: true },
  'cause-noted': {
    during: ['at-node'],
    free: true,
    fault: (_charts, _walk, { payload }) =>
      (payload.causeId === undefined) === (payload.title === undefined) ? refuse('malformed', '/payload/causeId') : null,
  },
  closed: {
    during: anyOpen,
    fault: (charts, walk, { payload }) => {
      if (isLeftUnsafe(charts, walk)) return refuse('unsafe-hold-only', '/payload/result')
      const results = possibleResults(charts, walk)
      if (results.length === 0) return refuse('wrong-phase')
      return results.includes(payload.result) ? null : refuse('wrong-result', '/payload/result')
    },
  },
  abandoned: {
    during: anyOpen,
    whilePaused: true,
    fault: (charts, walk) => (isLeftUnsafe(charts, walk) ? refuse('unsafe-hold-only') : null),
  },
}

/**
 * Judges a new event, once: on the device that makes it, on the server that stores it, on the command line for a file. `null` when nothing speaks
 * against it. An event of another device is refused as `other-device`; the server keeps it as a fork.
 */
export function guard(charts: PinnedCharts, state: WalkState, event: WalkEvent, person?: Actor): Refusal | null {
  const fault = faultOfShape(event) ?? (person && person.id !== event.personId ? refuse('not-you', '/personId') : null)
  if (fault) return fault
  if (state.phase === 'new') return event.type === 'started' ? faultOfStart(charts, event, person) : refuse('not-started', '/type')
  if (event.walkId !== state.walkId) return refuse('wrong-walk', '/walkId')
  if (event.type === 'started') return refuse('already-started', '/type')
  if (!isOpen(state)) return refuse('walk-ended')
  // The table has a rule for the type of every event; that rule and event belong together is more than the compiler can see.
  const rule = rules[event.type] as Rule<WalkEventType>
  return (
    faultOfHands(state, event, rule) ??
    (event.seq === state.lastSeq + 1 ? null : refuse('wrong-seq', '/seq')) ??
    (state.isPaused && !rule.whilePaused ? refuse('paused') : null) ??
    (rule.free && state.kind !== 'free' ? refuse('free-only', '/type') : null) ??
    (person && rule.role && !hasRole(person.role, rule.role) ? refuse('lead-only') : null) ??
    (rule.during.includes(state.phase) ? null : refuse('wrong-phase')) ??
    rule.fault?.(charts, state, event, person) ??
    null
  )
}

/** What is wrong with the form of an event: the first field that its schema refuses. */
function faultOfShape(event: WalkEvent): Refusal | null {
  const issue = walkEventSchema.safeParse(event).error?.issues[0]
  if (issue === undefined) return null
  const field = issue.path.length === 0 ? null : `/${issue.path.map(String).join('/')}`
  return issue.message === refusalWords['note-too-long']
    ? refuse('note-too-long', field)
    : refuse('malformed', field, `${refusalWords.malformed} (${issue.message})`)
}

/** One device and one person hold a walk. */
function faultOfHands({ holder }: OpenWalk, { deviceId, personId }: WalkEvent, rule: Rule<WalkEventType>): Refusal | null {
  if (rule.fromAnyone) return null
  if (deviceId !== holder.deviceId) return refuse('other-device', '/deviceId')
  return personId === holder.personId ? null : refuse('other-person', '/personId')
}

function faultOfStart(charts: PinnedCharts, { seq, payload }: EventOf<'started'>, person?: Actor): Refusal | null {
  const { kind, chartId, startId, pins } = payload
  if (seq !== 1) return refuse('wrong-seq', '/seq')
  if (kind === 'free' && person && !hasRole(person.role, 'lead')) return refuse('lead-only', '/payload/kind')
  const index = chartOf(charts, pins, chartId)
  if (index === null) return refuse('no-such-version', '/payload/pins')
  if (index.nodes.get(startId)?.kind !== 'start') return refuse('no-such-start', '/payload/startId')
  return faultOfPins(charts, pins)
}

/** Every version that is pinned must be there, wherever all versions can be looked up. */
function faultOfPins(charts: PinnedCharts, pins: Pins): Refusal | null {
  if (!charts.holdsAll) return null
  const ids = Object.keys(pins) as (keyof Pins)[]
  return chartsOf(charts, pins).length === ids.length ? null : refuse('no-such-version', '/payload/pins')
}

function faultOfPick(charts: PinnedCharts, walk: OpenWalk, { payload }: EventOf<'jumped'>): Refusal | null {
  const jump = locate(charts, walk.pins, walk.node)?.node
  if (jump?.kind !== 'jump' || jump.pick === undefined) return refuse('not-a-pick')
  const { chartId, version, startId } = payload
  const pins: Pins = { ...payload.pins, [chartId]: version }
  const isMoved = (id: keyof Pins) => [walk.pins, payload.pins].some((fixed) => Object.hasOwn(fixed, id) && fixed[id] !== pins[id])
  if ((Object.keys(pins) as (keyof Pins)[]).some(isMoved)) return refuse('pins-moved', '/payload/pins')
  const index = charts.find(chartId, version)
  if (index === null) return refuse('no-such-version', '/payload/version')
  if (index.nodes.get(startId)?.kind !== 'start') return refuse('no-such-start', '/payload/startId')
  return faultOfPins(charts, pins)
}

function faultOfSuspect(charts: PinnedCharts, walk: OpenWalk, { payload }: EventOf<'suspect-named'>): Refusal | null {
  if (walk.ruledOut.some(({ causeId }) => causeId === payload.causeId)) return refuse('already-ruled-out', '/payload/causeId')
  return proofInReach(charts, walk, payload.causeId) ? null : refuse('no-proof-in-reach', '/payload/causeId')
}

/** At a cause it takes its proof or a second look, one of the two; to prove it the proof must confirm this suspect. */
function faultOfProof(charts: PinnedCharts, walk: OpenWalk, { type, payload }: EventOf<'cause-proven' | 'cause-not-proven'>): Refusal | null {
  if (walk.phase !== 'at-cause' || walk.causeId !== payload.causeId) return refuse('not-that-cause', '/payload/causeId')
  const { proofEventId, sight } = payload
  if ((proofEventId === undefined) === (sight === undefined)) return refuse('proof-or-sight', '/payload/proofEventId')
  if (proofEventId === undefined) return null
  const line = liveTrail(walk).find(({ eventId }) => eventId === proofEventId)
  const node = line && locate(charts, walk.pins, line.position.node)?.node
  if (line?.kind !== 'finding' || node?.kind !== 'proof' || node.suspect !== payload.causeId) return refuse('not-a-proof', '/payload/proofEventId')
  const confirms = node.outcomes.some(({ id, confirms }) => id === line.answer.outcome && confirms)
  return confirms || type === 'cause-not-proven' ? null : refuse('not-a-proof', '/payload/proofEventId')
}

function isKnownCause(charts: PinnedCharts, pins: Pins, causeId: CauseId): boolean {
  return chartsOf(charts, pins).some((index) => index.causes.has(causeId))
}

function faultOfService(charts: PinnedCharts, walk: OpenWalk, { payload }: EventOf<'service-changed'>): Refusal | null {
  const isKnown = (id: (typeof payload.added)[number]) => chartsOf(charts, walk.pins).some((index) => index.serviceItems.has(id))
  if (!payload.added.every(isKnown)) return refuse('no-such-service-item', '/payload/added')
  return payload.dropped.every((id) => walk.serviceList.includes(id)) ? null : refuse('no-such-service-item', '/payload/dropped')
}

function faultOfLeadsAnswer(charts: PinnedCharts, walk: OpenWalk, { payload }: EventOf<'answered'>): Refusal | null {
  const question = walk.questions.find(({ questionId }) => questionId === payload.questionId)
  if (question === undefined || question.answer !== null) return refuse('no-such-question', '/payload/questionId')
  if (payload.goTo === undefined) return null
  if (walk.phase !== 'at-node' && walk.phase !== 'at-cause' && walk.phase !== 'escalated') return refuse('wrong-phase', '/payload/goTo')
  return locate(charts, walk.pins, payload.goTo) ? null : refuse('no-such-node', '/payload/goTo')
}

/** A walk is taken over by the person to whom it was handed, or by a lead; its own holder resumes it. */
function faultOfTakeOver(_charts: PinnedCharts, walk: OpenWalk, { personId, payload }: EventOf<'taken-over'>, person?: Actor): Refusal | null {
  if (payload.from !== walk.holder.personId) return refuse('not-the-holder', '/payload/from')
  if (personId === walk.holder.personId) return refuse('to-yourself', '/payload/from')
  const may = person === undefined || walk.handedTo === person.id || hasRole(person.role, 'lead')
  return may ? null : refuse('not-handed-to-you')
}

/** The ids that can be ticked on a list now; `null` when the list is not open. */
function tickable(
  charts: PinnedCharts,
  walk: OpenWalk & { readonly cause: ProvenCause },
  list: EventOf<'ticked'>['payload']['list'],
): readonly string[] | null {
  switch (list) {
    case 'fix':
      return walk.phase === 'proven' ? fixItems(charts, walk, walk.cause).map(({ id }) => id) : null
    case 'service':
      return walk.serviceList
    case 'run':
      return walk.phase === 'repaired' ? handBackRun(walk.machine.class).map(({ id }) => id) : null
  }
}

function faultOfTick(charts: PinnedCharts, walk: OpenWalk, { payload }: EventOf<'ticked'>): Refusal | null {
  const ids = walk.phase === 'proven' || walk.phase === 'repaired' ? tickable(charts, walk, payload.list) : null
  if (ids === null) return refuse('list-closed', '/payload/list')
  return ids.includes(payload.id) ? null : refuse('no-such-item', '/payload/id')
}

/** Items of the run are those of the machine's class, each once; a value that is out of limits is not in order. */
function faultOfRunItems(walk: OpenWalk, items: readonly RunItem[]): Refusal | null {
  const list = new Map(handBackRun(walk.machine.class).map((item) => [item.id, item]))
  for (const [index, { id, result, value, unit }] of items.entries()) {
    const at = `/payload/items/${index}`
    const item = list.get(id)
    if (item === undefined) return refuse('no-such-item', `${at}/id`)
    list.delete(id)
    if (value === undefined) continue
    if (unit === undefined) return refuse('unit-missing', `${at}/unit`)
    const key = item.reading?.specKey
    const limits = key !== undefined && Object.hasOwn(walk.limits, key) ? walk.limits[key] : undefined
    if (result === 'ok' && limits && isWithin(limits, value, unit) === false) return refuse('run-out-of-limits', `${at}/value`)
  }
  return null
}

function faultOfIncompleteRun(walk: OpenWalk, items: readonly RunItem[]): Refusal | null {
  const done = new Set(items.map(({ id }) => id))
  return handBackRun(walk.machine.class).every(({ id }) => done.has(id)) ? null : refuse('run-incomplete', '/payload/items')
}
