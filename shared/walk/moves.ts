import { isDecision } from '#shared/chart/graph.ts'
import { splitPlace, toPlace, type CauseId, type Place } from '#shared/lib/ids.ts'
import type { EventOf } from './events.ts'
import { comparedWith, foundBefore, locateDecision, type LocatedDecision } from './findings.ts'
import { enter, enterAll, nothingDone } from './metal.ts'
import { checkToSkip, pageNodes } from './page-nodes.ts'
import { locate, type PinnedCharts } from './pinned-charts.ts'
import { otherWay, proofInReach } from './reach.ts'
import { afterWork, cautionsAfterPage, inPhase, positionOf, rereadCautions, serviceListOf, standingAt } from './record.ts'
import { arrive, goOn, outcomeIfSkipped, type Arrived } from './route.ts'
import type { Answer, FindingLine, OpenWalk, Position, RuledOut, SpentWhy, StartedWalk, TrailEntry, WalkRecord } from './state.ts'

/** What a line of the trail takes from its event and from where the walk stood. */
function lineOf(walk: WalkRecord, event: EventOf<'step-done' | 'finding-recorded' | 'check-skipped' | 'jumped'>, minutes: number) {
  const seconds = 'seconds' in event.payload ? event.payload.seconds : 0
  return { eventId: event.id, seq: event.seq, at: event.at, position: positionOf(walk), minutes, seconds, spent: null }
}

/** The walk with one more line on its trail, moved to where the way leads. */
function withLine(charts: PinnedCharts, walk: OpenWalk, line: TrailEntry, arrived: Arrived): OpenWalk {
  const onTrail = { ...walk, trail: [...walk.trail, line] }
  return standingAt(charts, { ...onTrail, serviceList: serviceListOf(charts, onTrail) }, arrived, line.seq)
}

/** A step was done: its access is opened and the walk goes on. */
export function doStep(charts: PinnedCharts, walk: OpenWalk, event: EventOf<'step-done'>): StartedWalk {
  const located = locate(charts, walk.pins, walk.node)
  if (walk.phase !== 'at-node' || event.payload.node !== walk.node || located?.node.kind !== 'step') return walk
  const { seq } = event
  const done = enter(walk.metal, located)
  const minutes = located.node.minutes ?? 0
  const page = pageNodes(charts, walk)?.target.position.node
  const cautionsRead = rereadCautions(walk, (read) => ({
    seq: read.openFor === walk.node || read.openFor === page ? seq : read.seq,
    openFor: read.openFor === page && page !== walk.node ? page : null,
  }))
  const worked = { ...walk, ...afterWork(walk, done, seq, minutes), cautionsRead }
  return withLine(charts, worked, { ...lineOf(walk, event, minutes + done.minutes), kind: 'step' }, goOn(charts, walk, positionOf(walk)))
}

/** An answer as an event tells it. */
export function toAnswer({ outcome, value, unit }: { outcome: Answer['outcome']; value?: number | undefined; unit?: Answer['unit'] | undefined }): Answer {
  return { outcome, value: value ?? null, unit: unit ?? null }
}

/** A finding: what it takes is done to the machine, and the walk follows the edge of its outcome. */
export function recordFinding(charts: PinnedCharts, walk: OpenWalk, event: EventOf<'finding-recorded'>): StartedWalk {
  const check = locateDecision(charts, walk, walk.node)
  const { seq, payload } = event
  if (walk.phase !== 'at-node' || payload.node !== walk.node || check === null) return walk
  const source = payload.reuses === undefined ? undefined : walk.trail.find(({ eventId }) => eventId === payload.reuses)
  const reused = source?.kind === 'finding' ? source : null
  const before = payload.before ? toAnswer(payload.before) : (reused?.before ?? null)
  // An answer that is recorded again was paid for when it was found: nobody touches the machine.
  const nodes = payload.reuses === undefined ? madeNow(check, before) : []
  const done = nodes.length > 0 ? enterAll(walk.metal, nodes) : nothingDone(walk.metal)
  const minutes = nodes.reduce((sum, { node }) => sum + (node.minutes ?? 0), 0)
  const line: FindingLine = {
    ...lineOf(walk, event, minutes + done.minutes),
    kind: 'finding',
    answer: toAnswer(payload),
    values: payload.values ?? (payload.value === undefined ? [] : [payload.value]),
    judgedBy: payload.judgedBy,
    before,
    // What was kept was measured after its own change: what was found since says nothing about it.
    heldAgainst: before ?? (reused ? reused.heldAgainst : foundBefore(charts, walk, check)),
    reuses: payload.reuses ?? null,
    note: payload.note ?? null,
    photoIds: payload.photoIds,
  }
  const worked = { ...walk, ...afterWork(walk, done, seq, minutes), cautionsRead: cautionsAfterPage(walk, walk.node, seq) }
  return withLine(charts, worked, line, goOn(charts, walk, positionOf(walk), payload.outcome))
}

/** What recording a finding makes: the node, and ahead of it what a proof took before its change. */
function madeNow(check: LocatedDecision, before: Answer | null): readonly LocatedDecision[] {
  const compared = before === null ? null : comparedWith(check)
  return compared ? [compared, check] : [check]
}

/** A check without an answer: nothing was done, and the walk follows the edge of `ifSkipped`, or ends where nothing could be reproduced. */
export function skipCheck(charts: PinnedCharts, walk: OpenWalk, event: EventOf<'check-skipped'>): StartedWalk {
  const page = walk.phase === 'at-node' ? checkToSkip(charts, walk) : null
  const { payload, seq } = event
  if (page === null || !isDecision(page.node) || page.position.node !== payload.node) return walk
  // The steps that stand on the page were for this check alone: with it they fall away.
  const there = { ...walk, ...page.position, cautionsRead: cautionsAfterPage(walk, payload.node, seq) }
  const endsWalk = payload.why === 'not-reproduced' && 'reproduces' in page.node && page.node.reproduces === true
  const took = endsWalk ? null : outcomeIfSkipped(page.node)
  const line: TrailEntry = { ...lineOf(there, event, 0), kind: 'skip', why: payload.why, took, note: payload.note ?? null }
  if (took !== null) return withLine(charts, there, line, goOn(charts, walk, page.position, took))
  const reason = endsWalk ? 'could-not-reproduce' : 'no-way-on'
  return inPhase(there, { phase: 'escalated', reason }, { trail: [...walk.trail, line], arrival: { seq, missing: [] } })
}

/** A symptom was picked: its charts are pinned beside those that were, and the walk starts there, out of every call. */
export function pickSymptom(charts: PinnedCharts, walk: OpenWalk, event: EventOf<'jumped'>): StartedWalk {
  const { chartId, startId, version, pins } = event.payload
  const jump = locate(charts, walk.pins, walk.node)?.node
  if (walk.phase !== 'at-node' || jump?.kind !== 'jump' || jump.pick === undefined) return walk
  const to = toPlace(chartId, startId)
  const line: TrailEntry = { ...lineOf(walk, event, 0), kind: 'pick', to }
  const pinned = { ...walk, pins: { ...pins, [chartId]: version, ...walk.pins } }
  return withLine(charts, pinned, line, arrive(charts, pinned, { node: to, calls: [] }))
}

/** The trail with some lines spent; a line that was spent before keeps its reason. */
function spend(trail: readonly TrailEntry[], why: SpentWhy, isSpent: (line: TrailEntry, index: number) => boolean): readonly TrailEntry[] {
  return trail.map((line, index) => (line.spent === null && isSpent(line, index) ? { ...line, spent: why } : line))
}

/**
 * Back to a line of the trail: the walk stands where it stood when this was recorded, in the same calls. This finding and all later ones
 * are spent, with their service items and proofs; access, acknowledged cautions and what was noticed stay, for the metal has not moved.
 */
export function stepBack(charts: PinnedCharts, walk: OpenWalk, { seq, payload }: EventOf<'stepped-back'>): StartedWalk {
  const back = walk.trail.findIndex(({ eventId, spent }) => eventId === payload.toEventId && spent === null)
  const line = walk.trail[back]
  if (line === undefined) return walk
  const spent = { ...walk, trail: spend(walk.trail, 'stepped-back', (_line, index) => index >= back), cautionsRead: closedBooks(walk) }
  return standOn(inPhase(spent, { phase: 'at-node' }, { serviceList: serviceListOf(charts, spent) }), line.position, seq)
}

/** Cautions read for a page that the walk leaves count as they were read, and no longer for what that page would change. */
function closedBooks(walk: WalkRecord): WalkRecord['cautionsRead'] {
  return rereadCautions(walk, (read) => ({ ...read, openFor: null }))
}

/** The walk put down at a position where it stood before. */
function standOn(walk: OpenWalk, position: Position, seq: number): OpenWalk {
  return { ...walk, ...position, arrival: { seq, missing: [] } }
}

/** A suspect was named out of turn: the walk stands at the nearest of its proofs. */
export function nameSuspect(charts: PinnedCharts, walk: OpenWalk, { seq, payload }: EventOf<'suspect-named'>): StartedWalk {
  const proof = walk.phase === 'at-node' ? proofInReach(charts, walk, payload.causeId) : null
  if (proof === null) return walk
  const named = { ...walk, named: [...walk.named.filter((causeId) => causeId !== payload.causeId), payload.causeId], cautionsRead: closedBooks(walk) }
  return standOn(named, proof.position, seq)
}

/** The lead sent the walk to a node: in the chart where it is, or in one that called it, the calls around that chart stay. */
export function goWhereTold(charts: PinnedCharts, walk: OpenWalk, goTo: Place, seq: number): OpenWalk {
  if (walk.phase !== 'at-node' && walk.phase !== 'at-cause' && walk.phase !== 'escalated') return walk
  const { chartId } = splitPlace(goTo)
  const inCalls = [...walk.calls, walk.node].findLastIndex((place) => splitPlace(place).chartId === chartId)
  const calls = inCalls === -1 ? [] : walk.calls.slice(0, inCalls)
  return standingAt(charts, { ...walk, cautionsRead: closedBooks(walk) }, arrive(charts, walk, { node: goTo, calls }), seq)
}

/**
 * A cause turned out not to be it. The walk goes back to the latest finding that could have led elsewhere and that finding is spent; the
 * others stay. Where none could, the lead is asked.
 */
export function ruleOut(charts: PinnedCharts, walk: OpenWalk, event: EventOf<'run-failed' | 'cause-not-proven'>, causeId: CauseId | null): StartedWalk {
  const how = event.type === 'run-failed' ? event.type : 'cause-not-proven'
  const out: RuledOut | null = causeId && { causeId, eventId: event.id, how }
  const walkWithout = { ...walk, ruledOut: out ? [...walk.ruledOut, out] : walk.ruledOut, contributing: [], ticks: { ...walk.ticks, fix: [], run: [] } }
  if (walk.kind === 'free') return inPhase(walkWithout, { phase: 'at-node' })
  const line = otherWay(charts, walk, new Set(walkWithout.ruledOut.map((ruled) => ruled.causeId)))
  if (line === null) return inPhase(walkWithout, { phase: 'escalated', reason: 'no-cause-found' }, { arrival: { seq: event.seq, missing: [] } })
  const spent = { ...walkWithout, trail: spend(walk.trail, how, ({ eventId }) => eventId === line.eventId), cautionsRead: closedBooks(walk) }
  return standOn(inPhase(spent, { phase: 'at-node' }, { serviceList: serviceListOf(charts, spent) }), line.position, event.seq)
}
