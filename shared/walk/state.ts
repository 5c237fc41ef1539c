import type {
  AccessId,
  CauseId,
  CautionId,
  ChartId,
  DeviceId,
  EventId,
  PersonId,
  PhotoId,
  OutcomeId,
  Place,
  QuestionId,
  SafetyPartId,
  ServiceItemId,
  WalkId,
} from '#shared/lib/ids.ts'
import type { SpecLimits } from '#shared/units/limits.ts'
import type { Unit } from '#shared/units/quantities.ts'
import type { EventOf, Machine, RunItem } from './events.ts'

/**
 * Where a walk stands: a node, and the returning jumps that it is inside, outermost first. The same node reached through another
 * call is another position.
 */
export interface Position {
  readonly node: Place
  readonly calls: readonly Place[]
}

/** An answer to a check, reading or proof; `value` and `unit` are `null` where nothing was measured. */
export interface Answer {
  readonly outcome: OutcomeId
  readonly value: number | null
  readonly unit: Unit | null
}

/** Why a line of the trail no longer counts. It stays in the log, and its answer is offered again. */
export type SpentWhy = 'stepped-back' | 'run-failed' | 'cause-not-proven'

/** What every line of the trail holds. */
interface TrailLine {
  readonly eventId: EventId
  readonly seq: number
  /** Device time of the event; a name for the moment, never an order. */
  readonly at: string
  /** Where the walk stood when this was recorded; a step back to this line stands there again. */
  readonly position: Position
  /** Bench minutes that recording it charged: the node's own and those of the access it opened. */
  readonly minutes: number
  /** Seconds that the device measured on the page. */
  readonly seconds: number
  readonly spent: SpentWhy | null
}

/** A step that was done. */
export interface StepLine extends TrailLine {
  readonly kind: 'step'
}
/**
 * A finding. `before` is the answer that a proof took on its own page ahead of the change; `heldAgainst` is that answer, or the finding of the trail
 * that the proof was compared with when it was first recorded.
 */
export interface FindingLine extends TrailLine {
  readonly kind: 'finding'
  readonly answer: Answer
  readonly values: readonly number[]
  readonly judgedBy: 'limits' | 'hand'
  readonly before: Answer | null
  readonly heldAgainst: Answer | null
  readonly reuses: EventId | null
  readonly note: string | null
  readonly photoIds: readonly PhotoId[]
}
/** A check that got no answer; it followed the edge of `took`, or ended the walk's way when there was none. */
export interface SkipLine extends TrailLine {
  readonly kind: 'skip'
  readonly why: 'not-sure' | 'cannot' | 'not-reproduced'
  readonly took: OutcomeId | null
  readonly note: string | null
}
/** A symptom that the person picked at a jump that asks for one. */
export interface PickLine extends TrailLine {
  readonly kind: 'pick'
  readonly to: Place
}
/** One line of the trail: an event that moved the walk on. */
export type TrailEntry = StepLine | FindingLine | SkipLine | PickLine

/** Something seen out of turn, kept until its check comes up. */
export interface Noticed {
  readonly eventId: EventId
  readonly seq: number
  readonly at: string
  readonly node: Place
  readonly answer: Answer
  readonly note: string | null
  readonly photoIds: readonly PhotoId[]
  readonly minutes: number
}

/** The machine as the walk left it. It starts whole and stopped. */
export interface Metal {
  readonly engine: 'running' | 'stopped'
  /** Access states open now, in the order in which they were opened. */
  readonly open: readonly AccessId[]
  /** Safety parts out of action now. */
  readonly defeated: readonly SafetyPartId[]
}

/** When a caution was last read, and for which page that reading still holds ahead of the recording. */
export interface CautionRead {
  /** Everything that changed up to this event was known when it was read. */
  readonly seq: number
  /** The node whose page it was read for, until that node is recorded or the walk goes elsewhere. */
  readonly openFor: Place | null
}

/** What can make a caution pending again: an access, a safety part, or the engine having gone from stopped to running. */
export type Trigger = AccessId | SafetyPartId | 'running'

/** A question to the lead. */
export interface Question {
  readonly questionId: QuestionId
  readonly eventId: EventId
  readonly at: string
  readonly askedBy: PersonId
  /** Where the walk stood when it was asked. */
  readonly node: Place
  readonly text: string
  readonly photoIds: readonly PhotoId[]
  readonly answer: {
    readonly eventId: EventId
    readonly at: string
    readonly answeredBy: PersonId
    readonly text: string
    readonly photoIds: readonly PhotoId[]
    readonly goTo: Place | null
  } | null
}

/** A note, or a flag on a node when `flagged` names one. */
export interface Note {
  readonly eventId: EventId
  readonly at: string
  readonly by: PersonId
  readonly node: Place
  readonly flagged: boolean
  readonly text: string
  readonly photoIds: readonly PhotoId[]
}

/** A check noted in a free walk. */
export interface NotedCheck {
  readonly eventId: EventId
  readonly at: string
  readonly title: string
  readonly found: string
  readonly photoIds: readonly PhotoId[]
}

/** A cause that turned out not to be it, and how that showed. */
export interface RuledOut {
  readonly causeId: CauseId
  readonly eventId: EventId
  readonly how: 'run-failed' | 'cause-not-proven'
}

/** How a cause was proven: by the finding of its proof, by a second look, or, in a free walk, by the word of the person. */
export type ProofTaken =
  | { readonly by: 'finding'; readonly eventId: EventId }
  | { readonly by: 'sight'; readonly note: string; readonly photoIds: readonly PhotoId[] }
  | { readonly by: 'word'; readonly note: string | null }

/** A cause by its id in the library; a free walk may name one that no library holds yet, by title. */
export interface ProvenCause {
  readonly causeId: CauseId | null
  readonly title: string | null
  readonly proof: ProofTaken
  readonly eventId: EventId
}

/** What was done to put the machine right. */
export type Repair = EventOf<'repair-done'>['payload']

/** The lists that can be ticked off. */
export type TickList = EventOf<'ticked'>['payload']['list']

/** How a walk ended. */
export type WalkResult = EventOf<'closed'>['payload']['result']

/** How the walk came to the page on which it stands. */
export interface Arrival {
  /** The event that brought it here. */
  readonly seq: number
  /** Returning jumps passed over on the way because their chart is not there yet. */
  readonly missing: readonly { readonly jump: Place; readonly chartId: ChartId | null }[]
}

/** What is true of every walk that was started, whatever its phase. */
export interface WalkRecord {
  readonly walkId: WalkId
  readonly kind: 'bench' | 'practice' | 'free'
  readonly lastSeq: number
  readonly startedAt: string
  readonly startedBy: PersonId
  readonly start: Place
  readonly machine: Machine
  readonly limits: SpecLimits
  readonly pins: Readonly<Record<ChartId, number>>

  /** Who has the walk in hand. Events of any other device are forks. */
  readonly holder: { readonly personId: PersonId; readonly deviceId: DeviceId }
  /** To whom it was handed over and who has not taken it yet. */
  readonly handedTo: PersonId | null
  readonly isPaused: boolean

  /** Where the walk stands, or where it last stood. */
  readonly node: Place
  readonly calls: readonly Place[]
  readonly arrival: Arrival
  readonly trail: readonly TrailEntry[]
  readonly noticed: readonly Noticed[]
  readonly ruledOut: readonly RuledOut[]
  /** Suspects that were named out of turn. */
  readonly named: readonly CauseId[]

  readonly metal: Metal
  readonly cautionsRead: Readonly<Record<CautionId, CautionRead>>
  /** The event at which a trigger last changed. */
  readonly changedAt: { readonly [trigger in Trigger]?: number }

  /** Bench minutes used: the chart's minutes of what was recorded, each opening with its closing charged once. Never falls. */
  readonly minutesUsed: number
  /** Minutes by the clock in which nobody works (cooling down). */
  readonly waitMinutes: number
  /** Seconds that the device measured. */
  readonly secondsMeasured: number

  /** Work for the way out, in the order in which it came up. */
  readonly serviceList: readonly ServiceItemId[]
  /** Items put on or taken off the list by hand; these win over what findings say. */
  readonly serviceByHand: { readonly added: readonly ServiceItemId[]; readonly dropped: readonly ServiceItemId[] }
  readonly contributing: readonly CauseId[]
  readonly ticks: Readonly<Record<TickList, readonly string[]>>
  readonly questions: readonly Question[]
  readonly notes: readonly Note[]
  readonly notedChecks: readonly NotedCheck[]
}

/** What each phase adds to the record. */
export type Phase =
  | { readonly phase: 'at-node' }
  | { readonly phase: 'at-cause'; readonly causeId: CauseId }
  | { readonly phase: 'proven'; readonly cause: ProvenCause }
  | { readonly phase: 'repaired'; readonly cause: ProvenCause; readonly repair: Repair }
  | { readonly phase: 'run-passed'; readonly cause: ProvenCause; readonly repair: Repair; readonly run: readonly RunItem[] }
  | { readonly phase: 'escalated'; readonly reason: string }
  | { readonly phase: 'held'; readonly causeId: CauseId | null; readonly tagNo: string; readonly why: string }
  | { readonly phase: 'closed'; readonly causeId: CauseId | null; readonly result: WalkResult; readonly why: string | null; readonly last: OpenPhase }
  | { readonly phase: 'abandoned'; readonly why: string; readonly last: OpenPhase }

/** A phase in which the walk still takes events. */
export type OpenPhase = Exclude<Phase, { phase: 'closed' | 'abandoned' }>

/** A walk that was started. */
export type StartedWalk = WalkRecord & Phase
/** A walk that still takes events. */
export type OpenWalk = WalkRecord & OpenPhase
/** A walk: what a log comes to. `new` is a log without a valid beginning. */
export type WalkState = { readonly phase: 'new' } | StartedWalk

/** The walk before its first event. */
export const newWalk: WalkState = { phase: 'new' }

/** Whether a walk still takes events. */
export function isOpen(state: WalkState): state is OpenWalk {
  return state.phase !== 'new' && state.phase !== 'closed' && state.phase !== 'abandoned'
}

/** The lines of the trail that count. */
export function liveTrail(walk: WalkRecord): readonly TrailEntry[] {
  return walk.trail.filter((line) => line.spent === null)
}
