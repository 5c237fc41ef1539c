import type { DeviceId, EventId, OutcomeId, PersonId, PhotoId, WalkId } from '#shared/lib/ids.ts'
import type { SpecLimit } from '#shared/units/limits.ts'
import type { Unit } from '#shared/units/quantities.ts'
import type { EventOf, WalkEvent, WalkEventType } from '#shared/walk/events.ts'
import { heldAgainst, judgeTries, takenOnce, type Judging } from '#shared/walk/judging.ts'
import type { BeforePage, CausePage, CautionPage, CheckPage, OfferedAnswer, ProofPage, ReadingPage, StepPage } from '#shared/walk/page.ts'

/** An event before it has an envelope: what was done. */
export type EventDraft = { [Type in WalkEventType]: { readonly type: Type; readonly payload: EventOf<Type>['payload'] } }[WalkEventType]

/** What the device puts round a draft. */
export interface Envelope {
  readonly id: EventId
  readonly walkId: WalkId
  readonly seq: number
  /** Device time, ISO 8601 in UTC. */
  readonly at: string
  readonly deviceId: DeviceId
  readonly personId: PersonId
}

/** A draft in its envelope. */
export function toEvent(envelope: Envelope, draft: EventDraft): WalkEvent {
  // Type and payload of a draft belong together; spreading hides that from the compiler.
  return { ...envelope, ...draft } as WalkEvent
}

/** What the person found on a page: an outcome by hand, or values with their unit, the last one counting. */
export interface PageAnswer {
  /** Missing where the values tell the outcome by themselves. */
  readonly outcome?: OutcomeId
  readonly values?: readonly number[]
  readonly unit?: Unit
  /** What the fingers typed, kept as it was. */
  readonly typed?: string
  readonly note?: string
  readonly photoIds?: readonly PhotoId[]
  readonly seconds: number
}

/** A page that takes an answer. */
export type AnswerPage = CheckPage | ReadingPage | ProofPage

/** All pending cautions of a page, read in one event. */
export function acknowledge({ guards, cautionIds }: CautionPage): EventDraft {
  return { type: 'caution-acknowledged', payload: { node: guards.place, cautionIds: [...cautionIds] } }
}

/** The step of a page of its own, done. */
export function finishStep({ node }: StepPage, seconds: number): EventDraft {
  return { type: 'step-done', payload: { node: node.place, seconds } }
}

/**
 * The batch that answers a page: `step-done` for the steps that stand on it, then the finding. `null` while the values do not tell an outcome
 * and none was picked. `before` is the answer to the `before` page of a proof.
 */
export function answerPage(
  page: AnswerPage,
  answer: PageAnswer,
  before?: NonNullable<EventOf<'finding-recorded'>['payload']['before']>,
): readonly EventDraft[] | null {
  const asked = page.kind === 'check' ? null : page.judging
  const judging = before === undefined ? asked : heldAgainst(asked, before)
  const judged = outcomeOf(judging, answer)
  const outcome = answer.outcome ?? judged
  if (outcome === null) return null
  const finding: EventDraft = {
    type: 'finding-recorded',
    payload: {
      node: page.node.place,
      outcome,
      ...valueFields(answer),
      ...(answer.values !== undefined && answer.values.length > 1 ? { values: [...answer.values] } : {}),
      ...(outcome === judged ? { judgedBy: 'limits' as const, ...limitsField(judging?.limits) } : { judgedBy: 'hand' as const }),
      ...(before ? { before } : {}),
      ...(answer.note?.trim() ? { note: answer.note } : {}),
      photoIds: [...(answer.photoIds ?? [])],
      seconds: answer.seconds,
    },
  }
  return [...linesDone(page), finding]
}

/** The answer to a `before` page, as the proof's finding carries it; `null` while the values do not tell an outcome and none was picked. */
export function answerBefore(page: BeforePage, answer: PageAnswer): EventOf<'finding-recorded'>['payload']['before'] | null {
  const outcome = answer.outcome ?? outcomeOf(page.judging, answer)
  return outcome === null ? null : { outcome, ...valueFields(answer) }
}

/** The offered answer, recorded again with one tap. */
export function answerAgain(page: AnswerPage, offered: OfferedAnswer, seconds: number): readonly EventDraft[] {
  const { outcome, value, unit } = offered.answer
  const judging = page.kind === 'check' ? null : heldAgainst(takenOnce(page.judging), offered.heldAgainst)
  const isJudged = outcomeOf(judging, fromAnswer(value, unit)) === outcome
  const payload: EventOf<'finding-recorded'>['payload'] = {
    node: page.node.place,
    outcome,
    ...valueFields(fromAnswer(value, unit)),
    ...(isJudged ? { judgedBy: 'limits' as const, ...limitsField(judging?.limits) } : { judgedBy: 'hand' as const }),
    reuses: offered.eventId,
    ...(offered.note === null ? {} : { note: offered.note }),
    photoIds: [],
    seconds,
  }
  return [...linesDone(page), { type: 'finding-recorded', payload }]
}

/** The check of a page, left without an answer. */
export function skipPage(page: AnswerPage | BeforePage, why: EventOf<'check-skipped'>['payload']['why'], note?: string): EventDraft {
  const place = page.kind === 'before' ? page.proof.node.place : page.node.place
  return { type: 'check-skipped', payload: { node: place, why, ...(note?.trim() ? { note } : {}) } }
}

/** The cause of a page, proven: by the finding of its proof, or by a second look with a note where it has none. `null` while that note is missing. */
export function proveCause({ cause, proofEventId }: CausePage, sight?: { readonly note: string; readonly photoIds: readonly PhotoId[] }): EventDraft | null {
  if (cause.causeId === null) return null
  if (proofEventId !== null) return { type: 'cause-proven', payload: { causeId: cause.causeId, proofEventId } }
  return sight?.note.trim() ? { type: 'cause-proven', payload: { causeId: cause.causeId, sight: { note: sight.note, photoIds: [...sight.photoIds] } } } : null
}

function linesDone(page: AnswerPage): readonly EventDraft[] {
  return page.lines.map(({ place }) => ({ type: 'step-done', payload: { node: place, seconds: 0 } }))
}

function fromAnswer(value: number | null, unit: Unit | null): PageAnswer {
  return { ...(value === null ? {} : { values: [value] }), ...(unit === null ? {} : { unit }), seconds: 0 }
}

function outcomeOf(judging: Judging | null, { values, unit }: PageAnswer): OutcomeId | null {
  const verdict = judging && values && unit !== undefined ? judgeTries(judging, values, unit) : null
  return verdict?.kind === 'outcome' ? verdict.outcome : null
}

function valueFields({ values, unit, typed }: PageAnswer) {
  const value = values?.at(-1)
  if (value === undefined) return {}
  return { value, ...(unit === undefined ? {} : { unit }), ...(typed === undefined ? {} : { typed }) }
}

function limitsField(limits: SpecLimit | null | undefined) {
  return limits ? { limits } : {}
}
