import type { OutcomeChoice, OfferedAnswer, NodeWords, StepLineWords } from '#shared/walk/page.ts'
import type { EventOf } from '#shared/walk/events.ts'
import { usePlayer } from '#src/features/walk-player/player-context.ts'
import type { SkipWhy } from '#src/lib/walk-words.ts'
import { skipWords } from '#src/lib/walk-words.ts'
import type { EventDraft } from '#src/lib/walk-log.ts'

type FindingPayload = EventOf<'finding-recorded'>['payload']

/** A page with an answer to record. */
type Asking = { readonly node: NodeWords; readonly lines: readonly StepLineWords[] }

/** An answer as the page gives it; what was measured comes along where something was. */
export type Given = {
  readonly choice: Pick<OutcomeChoice, 'outcome' | 'title'>
  readonly measured?: Pick<FindingPayload, 'value' | 'values' | 'unit' | 'typed' | 'limits'>
  readonly judgedBy?: FindingPayload['judgedBy']
  readonly before?: FindingPayload['before']
  readonly reuses?: OfferedAnswer | null
  readonly note?: string
  /** What the undo row says instead of the outcome's title. */
  readonly said?: string
}

/** Records what a page was answered, with the steps that stood on it. */
export function useAnswering(page: Asking): {
  /** False when it was refused. */ readonly answer: (given: Given) => boolean
  readonly skip: (why: SkipWhy) => void
} {
  const { record, seconds } = usePlayer()
  const steps = (): EventDraft[] => page.lines.map(({ place }) => ({ type: 'step-done', payload: { node: place, seconds: 0 } }))

  const answer = (given: Given): boolean => {
    const { choice, measured, judgedBy = 'hand', before, reuses = null, note = '', said = choice.title } = given
    const payload: FindingPayload = {
      node: page.node.place,
      outcome: choice.outcome,
      ...measured,
      judgedBy,
      ...(before === undefined ? {} : { before }),
      ...(reuses === null ? {} : { reuses: reuses.eventId }),
      ...(note.trim() === '' ? {} : { note: note.trim() }),
      photoIds: [],
      seconds: seconds(),
    }
    return record([...steps(), { type: 'finding-recorded', payload }], `Recorded: ${said}.`)
  }

  const skip = (why: SkipWhy): void => {
    // The steps on the page were for this check alone: with it they fall away.
    record([{ type: 'check-skipped', payload: { node: page.node.place, why } }], `No answer: ${skipWords[why].toLowerCase()}.`)
  }

  return { answer, skip }
}
