import type { Cause, ChartNode } from '#shared/chart/document.ts'
import type {
  AccessId,
  CauseId,
  CautionId,
  ChartId,
  EventId,
  NodeId,
  OutcomeId,
  PhotoId,
  Place,
  QuestionId,
  SafetyPartId,
  ServiceItemId,
} from '#shared/lib/ids.ts'
import type { RunListItem } from '#shared/trade/hand-back-run.ts'
import type { Harm, SignalWord } from '#shared/trade/signal-words.ts'
import type { SpecLimit } from '#shared/units/limits.ts'
import type { RunItem } from './events.ts'
import type { Judging } from './judging.ts'
import type { Answer, Repair, RuledOut, Trigger, WalkResult } from './state.ts'

/** A node as pages, knots and the review name it. */
export interface NodeName {
  readonly place: Place
  readonly chartId: ChartId
  readonly chartTitle: string
  readonly kind: ChartNode['kind']
  /** The number on pages and pictures ("9b"); empty for a start. */
  readonly number: string
  readonly title: string
}

/** What a node tells the person who stands at it. `minutes` are its own bench minutes, access apart. */
export interface NodeWords extends NodeName {
  readonly do: string | null
  readonly good: string | null
  readonly why: string | null
  readonly picture: ChartNode['picture'] | null
  readonly tools: readonly string[]
  readonly timer: ChartNode['timer'] | null
  readonly minutes: number
}

/** A cause as pages name it. */
export interface CauseWords {
  readonly causeId: CauseId | null
  readonly title: string
  readonly system: Cause['system'] | null
  readonly isUnsafe: boolean
}

/** An access that recording the page opens; minutes are those of opening and closing it. */
export interface AccessOpening {
  readonly accessId: AccessId
  readonly title: string
  readonly minutes: number
  readonly waitMinutes: number
  readonly trap: string | null
}

/** What recording the page does to the machine, in the order in which it happens. */
export interface Entering {
  readonly opens: readonly AccessOpening[]
  readonly closes: readonly { readonly accessId: AccessId; readonly title: string }[]
  /** Bench minutes of the openings together. */
  readonly minutes: number
  /** Minutes by the clock in which nobody works. */
  readonly waitMinutes: number
  /** The state of the engine while the page is done; `null` when the chart leaves it as it is. */
  readonly machine: 'running' | 'stopped' | null
  readonly defeats: readonly SafetyPartId[]
  readonly restores: readonly SafetyPartId[]
}

/** A line "do first" on the page of the check that it prepares. */
export type StepLineWords = NodeWords

/** An outcome with its balloon. */
export interface OutcomeChoice {
  readonly outcome: OutcomeId
  /** 1 to 9, in the order of the chart; the same numeral is the key. `null` past the ninth. */
  readonly balloon: number | null
  readonly title: string
  readonly isNormal: boolean
  readonly isServiceable: boolean
  /** Of a reproducing check: whether this outcome reproduces the symptom. */
  readonly isReproduced: boolean
  /** Of a proof: whether this outcome confirms the suspect. */
  readonly confirms: boolean
  /** The service item that this outcome puts on the list. */
  readonly serviceItem: string | null
  /** Of a reading: whether measured values lead to it. Those that none leads to are buttons. */
  readonly isBanded: boolean
}

/** An answer that is already there, to be recorded again with one tap. */
export interface OfferedAnswer {
  /** What `reuses` names. */
  readonly eventId: EventId
  readonly answer: Answer
  readonly title: string
  readonly from: 'noticed' | 'stepped-back'
  readonly at: string
  readonly note: string | null
  /** What a proof was held against for it; `heldAgainst` of the judging tells what its value says. */
  readonly heldAgainst: Answer | null
}

/** The way that an unanswered check follows; `null` when the chart knows none and the walk ends by asking the lead. */
export interface IfSkipped {
  readonly outcome: OutcomeId
  readonly title: string
}

/** Where the answers "not sure", "can't do this" and "could not reproduce" lead. */
export interface NoAnswer {
  readonly ifSkipped: IfSkipped | null
  /** Whether "could not reproduce" ends the walk here, at the check that reproduces. */
  readonly endsWalk: boolean
}

/** What every page to be answered shows. */
interface Asking {
  readonly node: NodeWords
  /** Steps to be done first; their `step-done` travel in the batch of the answer. */
  readonly lines: readonly StepLineWords[]
  readonly entering: Entering
  readonly outcomes: readonly OutcomeChoice[]
  readonly offered: OfferedAnswer | null
  readonly noAnswer: NoAnswer
}

/** Cautions that wait to be read before a page is shown. One event, `caution-acknowledged`, takes them all. */
export interface CautionPage {
  readonly kind: 'caution'
  /** The node whose page they guard; what the event names. */
  readonly guards: NodeName
  readonly cautionIds: readonly CautionId[]
  /** The highest of the words. */
  readonly word: SignalWord
  readonly cautions: readonly CautionWords[]
  /** Whether the machine can't be made safe by skipping the check (a step can only be asked about). */
  readonly canSkip: boolean
}

/** One caution on its page, and what makes it pending again; `again` is empty the first time. */
export interface CautionWords {
  readonly cautionId: CautionId
  readonly word: SignalWord
  readonly harm: Harm
  readonly hazard: string
  readonly consequence: string | null
  readonly avoid: string
  readonly again: readonly Trigger[]
}

/** A check: look, answer. */
export interface CheckPage extends Asking {
  readonly kind: 'check'
}
/** A reading: a measured value against limits; outcomes that no value leads to stand beside it as buttons. */
export interface ReadingPage extends Asking {
  readonly kind: 'reading'
  readonly judging: Judging
}

/** What a proof compares with, taken before the change. */
export interface BeforeWords {
  readonly node: NodeName
  readonly answer: Answer
  readonly title: string
}
/** A proof: one change, then the same look again. */
export interface ProofPage extends Asking {
  readonly kind: 'proof'
  readonly suspect: CauseWords | null
  readonly by: 'isolation' | 'put-right' | 'sight'
  readonly change: string | null
  readonly afterwards: 'put-back' | 'keep' | null
  readonly compares: NodeName | null
  /** What was found before the change; `null` when the proof compares with nothing, or its `before` page has still to take it. */
  readonly before: BeforeWords | null
  /** How the value after the change is judged; `null` when no value is asked for. By hand, where `before` is within what confirms already. */
  readonly judging: Judging | null
  /** Whether confirming takes a note: what the second look saw. */
  readonly needsNote: boolean
}
/**
 * The page that a proof takes first, when what it compares with has no finding yet: the compared reading or check, before anything is
 * changed. Its answer goes nowhere by itself; it travels as `before` of the proof's finding.
 */
export interface BeforePage {
  readonly kind: 'before'
  readonly node: NodeWords
  readonly entering: Entering
  readonly outcomes: readonly OutcomeChoice[]
  readonly judging: Judging | null
  readonly noAnswer: NoAnswer
  /**
   * The proof's own page, shown next, with its `before` still to be filled in, and its judging still to be `heldAgainst` that. Was the proof answered before a step back, `proof.offered` is that
   * answer with all that was taken for it: it can be recorded again at once, from here.
   */
  readonly proof: ProofPage
}

/** A step on a page of its own. */
export interface StepPage {
  readonly kind: 'step'
  readonly node: NodeWords
  readonly entering: Entering
}

/** A jump that lets the person pick the symptom. */
export interface PickPage {
  readonly kind: 'pick'
  readonly node: NodeWords
  /** Starts of the charts that the walk already holds; the shop's other charts are offered by the bench. */
  readonly starts: readonly StartChoice[]
}
/** One symptom to pick. */
export interface StartChoice {
  readonly chartId: ChartId
  readonly version: number
  readonly startId: NodeId
  readonly title: string
  readonly chartTitle: string
}

/** A check that got no answer, with the event that a step back to it names. */
export interface SkippedCheck {
  readonly node: NodeName
  readonly why: 'not-sure' | 'cannot' | 'not-reproduced'
  readonly note: string | null
  readonly eventId: EventId
}

/** The end of the chart's knowledge: what was skipped is shown once more before the lead is asked. */
export interface AskPage {
  readonly kind: 'ask'
  readonly node: NodeWords
  readonly reason: string
  readonly reasonWords: string
  readonly skipped: readonly SkippedCheck[]
}
/** Not safe to hand back: the tag number and why. */
export interface HoldPage {
  readonly kind: 'hold'
  readonly node: NodeWords
  readonly cause: CauseWords | null
}

/** A suspect that the walk has come to. */
export interface CausePage {
  readonly kind: 'cause'
  readonly node: NodeWords
  readonly cause: CauseWords
  /** The finding that confirms it, to be named by `cause-proven`; `null` when it takes a second look with a note. */
  readonly proofEventId: EventId | null
  readonly proof: NodeName | null
}

/** What puts a cause right. */
export interface Fix {
  readonly text: string
  readonly minutes: number | null
  /** Ids are those of the `fix` list: `remedy`, then `part-1`, `part-2` … */
  readonly items: readonly { readonly id: string; readonly title: string; readonly quantity: number | null; readonly isTicked: boolean }[]
}
/** One item of the service list. */
export interface ServiceWords {
  readonly serviceItemId: ServiceItemId
  readonly title: string
  readonly minutes: number | null
  readonly isTicked: boolean
  /** Put on the list by hand, not by a finding. */
  readonly byHand: boolean
}
/** What may have led to a cause. */
export interface ContributingChoice {
  readonly causeId: CauseId
  readonly title: string
  readonly advice: string | null
  readonly isSet: boolean
}

/** The cause is proven: fix, what led to it, service list. */
export interface ProvenPage {
  readonly kind: 'proven'
  readonly cause: CauseWords
  readonly proof: NodeName | null
  readonly fix: Fix | null
  readonly contributing: readonly ContributingChoice[]
  readonly service: readonly ServiceWords[]
  /** Service items of the charts that are not on the list. */
  readonly serviceChoices: readonly { readonly serviceItemId: ServiceItemId; readonly title: string }[]
  /** An unsafe cause that stays unrepaired can only be held. */
  readonly canCloseUnrepaired: boolean
}
/** One item of the hand-back run. */
export interface RunWords extends RunListItem {
  readonly isTicked: boolean
  readonly limits: SpecLimit | null
}
/** The hand-back run. */
export interface RunPage {
  readonly kind: 'run'
  readonly cause: CauseWords
  readonly items: readonly RunWords[]
  readonly isComplete: boolean
  /** Safety parts still out of action: to be put back before the run. */
  readonly defeated: readonly SafetyPartId[]
  readonly service: readonly ServiceWords[]
}
/** The run is passed; the walk can be closed. */
export interface RunPassedPage {
  readonly kind: 'run-passed'
  readonly cause: CauseWords
  readonly repair: Repair
  readonly run: readonly RunItem[]
  readonly contributing: readonly ContributingChoice[]
  readonly results: readonly WalkResult[]
}

/** A question to the lead, as pages show it. */
export interface QuestionWords {
  readonly questionId: QuestionId
  readonly text: string
  readonly photoIds: readonly PhotoId[]
  readonly answer: string | null
  readonly goTo: NodeName | null
}
/** The lead is asked; the walk waits for an answer, a step back, or is closed. */
export interface EscalatedPage {
  readonly kind: 'escalated'
  readonly reason: string
  readonly reasonWords: string
  readonly at: NodeName
  readonly skipped: readonly SkippedCheck[]
  readonly ruledOut: readonly { readonly cause: CauseWords; readonly how: RuledOut['how'] }[]
  readonly questions: readonly QuestionWords[]
  readonly results: readonly WalkResult[]
}
/** Held: tagged, not to be used. */
export interface HeldPage {
  readonly kind: 'held'
  readonly tagNo: string
  readonly why: string
  readonly cause: CauseWords | null
  readonly defeated: readonly SafetyPartId[]
  readonly results: readonly WalkResult[]
}
/** A free walk: checks and findings are noted while fixing. */
export interface FreePage {
  readonly kind: 'free'
  readonly node: NodeWords
  readonly checks: readonly { readonly title: string; readonly found: string }[]
}
/** The walk is over. */
export interface ClosedPage {
  readonly kind: 'closed'
  readonly result: WalkResult
  readonly why: string | null
  readonly cause: CauseWords | null
}
/** The walk was given up. */
export interface AbandonedPage {
  readonly kind: 'abandoned'
  readonly why: string
}
/** Paused: the page that waits below it. */
export interface PausedPage {
  readonly kind: 'paused'
  readonly under: WalkPage
  /** Handed over and not taken yet. */
  readonly isHandedOver: boolean
}
/** The walk's charts lack what it stands on; told instead of a page. */
export interface LostPage {
  readonly kind: 'lost'
  readonly place: Place
}

/** What the player shows. Every page can be drawn, and every tap on it sent, without knowing any rule of the walk. */
export type WalkPage =
  | { readonly kind: 'not-started' }
  | CautionPage
  | CheckPage
  | ReadingPage
  | BeforePage
  | ProofPage
  | StepPage
  | PickPage
  | AskPage
  | HoldPage
  | CausePage
  | ProvenPage
  | RunPage
  | RunPassedPage
  | EscalatedPage
  | HeldPage
  | FreePage
  | ClosedPage
  | AbandonedPage
  | PausedPage
  | LostPage
