import { toPlace, type CauseId, type Place } from '#shared/lib/ids.ts'
import type { EventOf, WalkEvent, WalkEventType } from './events.ts'
import { locateDecision, type LocatedDecision } from './findings.ts'
import { judgeTries, judgingOf, takenOnce } from './judging.ts'
import { changeAccess, untouched } from './metal.ts'
import { doStep, goWhereTold, nameSuspect, pickSymptom, recordFinding, ruleOut, skipCheck, stepBack, toAnswer } from './moves.ts'
import { pageNodes } from './page-nodes.ts'
import { accessOnStack, locate, type PinnedCharts } from './pinned-charts.ts'
import { afterWork, inPhase, phaseOf, rereadCautions, serviceListOf, standingAt } from './record.ts'
import { arrive } from './route.ts'
import { isOpen, type Answer, type OpenWalk, type ProofTaken, type StartedWalk, type WalkRecord, type WalkState } from './state.ts'

type Evolver<Type extends WalkEventType> = (charts: PinnedCharts, walk: OpenWalk, event: EventOf<Type>) => StartedWalk

/**
 * The state after one more event. Total and pure: a stored event is a fact, so nothing is refused here, and what makes no sense where
 * the walk stands changes nothing but the count of events.
 */
export function evolve(charts: PinnedCharts, state: WalkState, event: WalkEvent): WalkState {
  if (state.phase === 'new') return event.type === 'started' ? begin(charts, event) : state
  const seconds = 'seconds' in event.payload ? event.payload.seconds : 0
  const walk = { ...state, lastSeq: event.seq, secondsMeasured: state.secondsMeasured + seconds }
  if (!isOpen(walk) || event.type === 'started') return walk
  // The table has an evolver for the type of every event; that key and event belong together is more than the compiler can see.
  const evolver = evolvers[event.type] as Evolver<WalkEventType>
  return evolver(charts, walk, event)
}

function begin(charts: PinnedCharts, event: EventOf<'started'>): OpenWalk {
  const { kind, chartId, startId, pins, machine, limits } = event.payload
  const start = toPlace(chartId, startId)
  const walk: OpenWalk = {
    phase: 'at-node',
    walkId: event.walkId,
    kind,
    lastSeq: event.seq,
    startedAt: event.at,
    startedBy: event.personId,
    start,
    machine,
    limits,
    pins,
    holder: { personId: event.personId, deviceId: event.deviceId },
    handedTo: null,
    isPaused: false,
    node: start,
    calls: [],
    arrival: { seq: event.seq, missing: [] },
    trail: [],
    noticed: [],
    ruledOut: [],
    named: [],
    metal: untouched,
    cautionsRead: {},
    changedAt: {},
    minutesUsed: 0,
    waitMinutes: 0,
    secondsMeasured: 0,
    serviceList: [],
    serviceByHand: { added: [], dropped: [] },
    contributing: [],
    ticks: { fix: [], service: [], run: [] },
    questions: [],
    notes: [],
    notedChecks: [],
  }
  // A free walk has no route: it stays at the start, the symptom that it is about.
  return kind === 'free' ? walk : standingAt(charts, walk, arrive(charts, walk, { node: start, calls: [] }), event.seq)
}

const evolvers: { readonly [Type in Exclude<WalkEventType, 'started'>]: Evolver<Type> } = {
  'machine-identified': (_charts, walk, { payload }) => ({ ...walk, machine: payload.machine, limits: payload.limits }),
  'caution-acknowledged': (_charts, walk, { seq, payload }) => {
    const read = Object.fromEntries(payload.cautionIds.map((id) => [id, { seq, openFor: payload.node }]))
    return { ...walk, cautionsRead: { ...walk.cautionsRead, ...read } }
  },
  'step-done': doStep,
  'finding-recorded': recordFinding,
  'check-skipped': skipCheck,
  noticed: notice,
  'access-changed': changeAccessOutOfTurn,
  'stepped-back': stepBack,
  jumped: pickSymptom,
  'suspect-named': nameSuspect,
  'cause-proven': proveCause,
  'cause-not-proven': (charts, walk, event) => (walk.phase === 'at-cause' ? ruleOut(charts, walk, event, walk.causeId) : walk),
  'contributing-set': (_charts, walk, { payload }) => ({ ...walk, contributing: payload.causeIds }),
  'service-changed': changeService,
  asked: (_charts, walk, { id, at, personId, payload }) => ({
    ...walk,
    questions: [...walk.questions, { ...payload, eventId: id, at, askedBy: personId, node: walk.node, answer: null }],
  }),
  answered: answerQuestion,
  escalated: (_charts, walk, { payload }) =>
    walk.phase === 'at-node' || walk.phase === 'at-cause' ? inPhase(walk, { phase: 'escalated', reason: payload.reason }) : walk,
  held: (charts, walk, { payload }) => inPhase(walk, { phase: 'held', causeId: causeInHand(charts, walk), ...payload }),
  paused: (_charts, walk) => ({ ...walk, isPaused: true }),
  resumed: takeInHand,
  'handed-over': (_charts, walk, { payload }) => ({ ...walk, isPaused: true, handedTo: payload.to }),
  'taken-over': takeInHand,
  'repair-done': (_charts, walk, { payload }) =>
    walk.phase === 'proven'
      ? inPhase(walk, { phase: 'repaired', cause: walk.cause, repair: payload }, { ticks: { ...walk.ticks, service: [...payload.serviceDone] } })
      : walk,
  ticked: (_charts, walk, { payload: { list, id, on } }) => {
    const others = walk.ticks[list].filter((ticked) => ticked !== id)
    return { ...walk, ticks: { ...walk.ticks, [list]: on ? [...others, id] : others } }
  },
  'run-passed': (_charts, walk, { payload }) =>
    walk.phase === 'repaired'
      ? inPhase(
          walk,
          { phase: 'run-passed', cause: walk.cause, repair: walk.repair, run: payload.items },
          // The run looks at guards and screens: passed means that they are back.
          { metal: { ...walk.metal, defeated: [] } },
        )
      : walk,
  'run-failed': (charts, walk, event) => (walk.phase === 'repaired' ? ruleOut(charts, walk, event, walk.cause.causeId) : walk),
  'note-added': (_charts, walk, event) => addNote(walk, event, walk.node, false),
  flagged: (_charts, walk, event) => addNote(walk, event, event.payload.node, true),
  'check-noted': (_charts, walk, { id, at, payload }) => ({ ...walk, notedChecks: [...walk.notedChecks, { ...payload, eventId: id, at }] }),
  'cause-noted': (_charts, walk, { id, payload }) =>
    walk.kind === 'free' && walk.phase === 'at-node'
      ? inPhase(walk, {
          phase: 'proven',
          cause: {
            causeId: payload.causeId ?? null,
            title: payload.title ?? null,
            proof: { by: 'word', note: payload.note ?? null },
            eventId: id,
          },
        })
      : walk,
  closed: (charts, walk, { payload }) =>
    inPhase(walk, {
      phase: 'closed',
      causeId: causeInHand(charts, walk),
      result: payload.result,
      why: payload.why ?? null,
      last: phaseOf(walk),
    }),
  abandoned: (_charts, walk, { payload }) => inPhase(walk, { phase: 'abandoned', why: payload.why, last: phaseOf(walk) }),
}

/** The cause that a walk has come to, or that its hold speaks of. */
function causeInHand(charts: PinnedCharts, walk: OpenWalk): CauseId | null {
  if ('cause' in walk) return walk.cause.causeId
  if ('causeId' in walk) return walk.causeId
  const node = walk.phase === 'at-node' ? locate(charts, walk.pins, walk.node)?.node : undefined
  return node?.kind === 'hold' ? (node.causeId ?? null) : null
}

function notice(charts: PinnedCharts, walk: OpenWalk, event: EventOf<'noticed'>): StartedWalk {
  const { payload, seq } = event
  const check = locateDecision(charts, walk, payload.node)
  const answer = check && noticedAnswer(walk, check, payload)
  if (!check || !answer) return walk
  const minutes = check.node.minutes ?? 0
  const seen = { eventId: event.id, seq, at: event.at, node: payload.node, answer, note: payload.note ?? null, photoIds: payload.photoIds, minutes }
  const cautionsRead = rereadCautions(walk, (read) => ({ ...read, openFor: read.openFor === payload.node ? null : read.openFor }))
  const noticed = { ...walk, noticed: [...walk.noticed, seen], minutesUsed: walk.minutesUsed + minutes, cautionsRead }
  return { ...noticed, serviceList: serviceListOf(charts, noticed) }
}

/** What was noticed, as an answer: the outcome that was named, else the one whose band holds the value; `null` when neither tells. */
function noticedAnswer(walk: WalkRecord, check: LocatedDecision, { outcome, value, unit }: EventOf<'noticed'>['payload']): Answer | null {
  if (outcome !== undefined) return toAnswer({ outcome, value, unit })
  const judging = takenOnce(judgingOf(walk, check))
  const verdict = judging && value !== undefined && unit !== undefined ? judgeTries(judging, [value], unit) : null
  return verdict?.kind === 'outcome' ? toAnswer({ outcome: verdict.outcome, value, unit }) : null
}

function changeAccessOutOfTurn(charts: PinnedCharts, walk: OpenWalk, { seq, payload }: EventOf<'access-changed'>): StartedWalk {
  const page = pageNodes(charts, walk)?.target.position.node
  const done = changeAccess(walk.metal, (id) => accessOnStack(charts, walk, id), payload.opened, payload.closed)
  const own = new Set(done.opened.flatMap((id) => accessOnStack(charts, walk, id)?.cautions ?? []))
  const cautionsRead = rereadCautions(walk, (read, id) => {
    if (read.openFor === null) return read
    if (own.has(id)) return { seq, openFor: read.openFor === page ? null : read.openFor }
    return read.openFor === page ? read : { ...read, seq }
  })
  return { ...walk, ...afterWork(walk, done, seq), cautionsRead }
}

function proveCause(_charts: PinnedCharts, walk: OpenWalk, { id, payload }: EventOf<'cause-proven'>): StartedWalk {
  if (walk.phase !== 'at-cause' || walk.causeId !== payload.causeId) return walk
  const proof: ProofTaken | null = payload.proofEventId
    ? { by: 'finding', eventId: payload.proofEventId }
    : payload.sight
      ? { by: 'sight', ...payload.sight }
      : null
  if (proof === null) return walk
  return inPhase(walk, { phase: 'proven', cause: { causeId: walk.causeId, title: null, proof, eventId: id } }, { ticks: { ...walk.ticks, fix: [], run: [] } })
}

function changeService(charts: PinnedCharts, walk: OpenWalk, { payload }: EventOf<'service-changed'>): StartedWalk {
  const { added, dropped } = walk.serviceByHand
  const serviceByHand = {
    added: [...new Set([...added, ...payload.added])].filter((id) => !payload.dropped.includes(id)),
    dropped: [...new Set([...dropped, ...payload.dropped])].filter((id) => !payload.added.includes(id)),
  }
  return { ...walk, serviceByHand, serviceList: serviceListOf(charts, { ...walk, serviceByHand }) }
}

function answerQuestion(charts: PinnedCharts, walk: OpenWalk, { id, at, seq, personId, payload }: EventOf<'answered'>): StartedWalk {
  const { questionId, text, photoIds, goTo } = payload
  const answer = { eventId: id, at, answeredBy: personId, text, photoIds, goTo: goTo ?? null }
  const questions = walk.questions.map((question) => (question.questionId === questionId ? { ...question, answer } : question))
  return goTo === undefined ? { ...walk, questions } : goWhereTold(charts, { ...walk, questions }, goTo, seq)
}

function takeInHand(_charts: PinnedCharts, walk: OpenWalk, { personId, deviceId }: EventOf<'resumed' | 'taken-over'>): StartedWalk {
  return { ...walk, isPaused: false, handedTo: null, holder: { personId, deviceId } }
}

function addNote(walk: OpenWalk, { id, at, personId, payload }: EventOf<'note-added' | 'flagged'>, node: Place, flagged: boolean): StartedWalk {
  const { text, photoIds } = payload
  return { ...walk, notes: [...walk.notes, { eventId: id, at, by: personId, node, flagged, text, photoIds }] }
}
