import { formatNumber } from '#shared/units/format-value.ts'
import type { OutcomeChoice } from '#shared/walk/page.ts'
import { Balloon } from '#src/components/knots/balloon.tsx'
import { Button } from '#src/components/ui/button.tsx'
import { AnswerKey } from '#src/features/walk-player/parts/answer-list.tsx'
import { OutcomeButton } from '#src/features/walk-player/parts/outcome-button.tsx'
import { usePlayer } from '#src/features/walk-player/player-context.ts'
import { useTapGuard } from '#src/features/walk-player/tap-guard.ts'
import type { ReadingEntry } from '#src/features/walk-player/use-reading-entry.ts'
import { toTypedValue } from '#src/features/walk-player/use-reading-entry.ts'
import { announce } from '#src/lib/announce.ts'

type ValueAnswersProps = {
  readonly question: string
  readonly entry: ReadingEntry
  readonly outcomes: readonly OutcomeChoice[]
  /** What stands under an outcome that the person picks, or that a proof's value leads to. */
  readonly wordsOf?: (choice: OutcomeChoice) => string | undefined
  readonly onRecord: (choice: OutcomeChoice, judgedBy: 'limits' | 'hand') => void
}

/** What the values lead to: Record where the limits judge, the outcomes where the person has to pick, and buttons for what no value says. */
export function ValueAnswers({ question, entry, outcomes, wordsOf, onRecord }: ValueAnswersProps) {
  const { pageKey } = usePlayer()
  const tap = useTapGuard(pageKey)
  const picks = toPicks(entry, outcomes)
  if (picks !== null) {
    return (
      <div role="group" aria-label={question} className="grid gap-3">
        {picks.map((choice) => {
          const words = wordsOf?.(choice)
          const pick = (): void => tap(() => onRecord(choice, 'hand'))
          return (
            <div key={choice.outcome}>
              <OutcomeButton numeral={choice.balloon} title={choice.title} {...(words === undefined ? {} : { words })} onPress={pick} />
              <AnswerKey numeral={choice.balloon} words={choice.title} run={pick} />
            </div>
          )
        })}
      </div>
    )
  }
  const buttons = entry.judging.proof === null ? outcomes.filter(({ isBanded }) => !isBanded) : []
  return (
    <div role="group" aria-label={question} className="grid grid-cols-6 gap-2">
      {buttons.map((choice) => {
        const press = (): void => tap(() => onRecord(choice, 'hand'))
        return (
          <div key={choice.outcome} className="col-span-3 grid sm:col-span-2">
            <Button size="large" onClick={press} className="min-h-16 px-2! leading-6">
              {choice.balloon !== null && <Balloon numeral={choice.balloon} size="small" />}
              {choice.title}
            </Button>
            <AnswerKey numeral={choice.balloon} words={choice.title} run={press} />
          </div>
        )
      })}
      <RecordButton entry={entry} outcomes={outcomes} onRecord={onRecord} className={toRecordSpan(buttons.length)} />
    </div>
  )
}

function toRecordSpan(buttons: number): string {
  if (buttons === 0) return 'col-span-6'
  return buttons % 2 === 1 ? 'col-span-3 sm:col-span-4' : 'col-span-6 sm:col-span-2'
}

/** The outcomes that the person picks from; `null` while the limits judge by themselves. */
function toPicks({ verdict }: ReadingEntry, outcomes: readonly OutcomeChoice[]): readonly OutcomeChoice[] | null {
  switch (verdict.kind) {
    case 'by-hand':
    case 'was-so-before':
      return outcomes
    case 'unsettled': {
      const buttons = outcomes.filter(({ isBanded }) => !isBanded)
      return buttons.length === 0 ? outcomes : buttons
    }
    case 'not-confirmed':
      return outcomes.filter(({ confirms }) => !confirms)
    case 'no-value':
    case 'more':
    case 'outcome':
      return null
  }
}

type RecordProps = Pick<ValueAnswersProps, 'entry' | 'outcomes' | 'onRecord'> & { readonly className: string }

function RecordButton({ entry, outcomes, onRecord, className }: RecordProps) {
  const { format } = usePlayer()
  const act = useRecordAct(entry, outcomes, onRecord)
  const isReady = entry.typed?.ok === true || entry.verdict.kind === 'outcome'
  const shown = isReady && entry.value !== null ? ` ${formatNumber(entry.value, format)}` : ''
  return (
    <Button
      type="submit"
      look="primary"
      size="large"
      aria-disabled={!isReady}
      onClick={(event) => (event.preventDefault(), act())}
      className={`min-h-16 text-body ${className}`}
    >
      {isReady && entry.verdict.kind === 'more' ? `Take${shown}` : `Record${shown}`}
    </Button>
  )
}

/** Record: keeps a try, records what the limits say, or tells why neither can be done. */
export function useRecordAct(entry: ReadingEntry, outcomes: readonly OutcomeChoice[], onRecord: ValueAnswersProps['onRecord']): () => void {
  const { pageKey } = usePlayer()
  const tap = useTapGuard(pageKey)
  return () => {
    const { verdict } = entry
    if (verdict.kind === 'more' && entry.typed?.ok === true) {
      tap(entry.take)
      return
    }
    const choice = verdict.kind === 'outcome' ? outcomes.find(({ outcome }) => outcome === verdict.outcome) : undefined
    if (choice !== undefined) {
      tap(() => onRecord(choice, 'limits'))
      return
    }
    const read = toTypedValue(entry)
    announce(read.ok ? 'Pick what the value means.' : read.error.words)
  }
}
