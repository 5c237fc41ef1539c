import type { ReactNode } from 'react'
import { useState } from 'react'

import type { NoAnswer, OfferedAnswer, OutcomeChoice } from '#shared/walk/page.ts'
import { OutcomeButton } from '#src/features/walk-player/parts/outcome-button.tsx'
import { usePlayer } from '#src/features/walk-player/player-context.ts'
import { useTapGuard } from '#src/features/walk-player/tap-guard.ts'
import type { SkipWhy } from '#src/lib/walk-words.ts'
import { skipWords } from '#src/lib/walk-words.ts'
import { toOfferedWords } from '#src/features/walk-player/words.ts'
import { useShortcut } from '#src/lib/shortcuts.ts'

export type Answer = {
  readonly key: string
  readonly numeral: number | null
  readonly title: string
  readonly words?: ReactNode
  readonly look?: 'plain' | 'leading'
  readonly disabled?: boolean
  readonly onPress: () => void
}

type AnswerListProps = {
  /** The question, which names the group. */
  readonly question: string
  readonly answers: readonly Answer[]
  readonly noAnswer: NoAnswer
  readonly onNoAnswer: (why: SkipWhy) => void
}

/** The outcomes of a page with their balloons, and (0) no answer, which opens its three reasons in their place. */
export function AnswerList({ question, answers, noAnswer, onNoAnswer }: AnswerListProps) {
  const { pageKey } = usePlayer()
  const [openKey, setOpenKey] = useState<string | null>(null)
  const isOpen = openKey === pageKey
  return isOpen ? (
    <NoAnswerList question={question} noAnswer={noAnswer} onPick={onNoAnswer} onClose={() => setOpenKey(null)} />
  ) : (
    <OutcomeList question={question} answers={answers} onNoAnswer={() => setOpenKey(pageKey)} />
  )
}

function OutcomeList({ question, answers, onNoAnswer }: { readonly question: string; readonly answers: readonly Answer[]; readonly onNoAnswer: () => void }) {
  const { pageKey } = usePlayer()
  const tap = useTapGuard(`${pageKey} outcomes`)
  return (
    <div role="group" aria-label={question} className="grid gap-3">
      {answers.map((answer) => (
        <AnswerButton key={answer.key} answer={answer} tap={tap} />
      ))}
      <OutcomeButton
        numeral={0}
        title="No answer"
        words="not sure · can’t do this · could not reproduce"
        look="open"
        expanded={false}
        onPress={() => tap(onNoAnswer)}
      />
      <AnswerKey numeral={0} words="No answer" run={() => tap(onNoAnswer)} />
    </div>
  )
}

function AnswerButton({ answer, tap }: { readonly answer: Answer; readonly tap: (act: () => void) => void }) {
  const { key: _, onPress, ...rest } = answer
  const press = (): void => {
    if (answer.disabled !== true) tap(onPress)
  }
  return (
    <>
      <OutcomeButton {...rest} onPress={press} />
      <AnswerKey numeral={answer.numeral} words={answer.title} run={press} />
    </>
  )
}

/** The key of a balloon. */
export function AnswerKey({ numeral, words, run }: { readonly numeral: number | null; readonly words: string; readonly run: () => void }) {
  useShortcut(numeral === null ? null : String(numeral), words, run)
  return null
}

const reasons: readonly SkipWhy[] = ['not-sure', 'cannot', 'not-reproduced']

type NoAnswerListProps = {
  readonly question: string
  readonly noAnswer: NoAnswer
  readonly onPick: (why: SkipWhy) => void
  readonly onClose: () => void
}

/** Why there is no answer; each reason says where the walk goes from there. */
export function NoAnswerList({ question, noAnswer, onPick, onClose }: NoAnswerListProps) {
  const { pageKey } = usePlayer()
  const tap = useTapGuard(`${pageKey} no answer`)
  const { ifSkipped, endsWalk } = noAnswer
  return (
    <div role="group" aria-label={`No answer to: ${question}`} className="grid gap-3">
      <div>
        <p className="label">No answer: why?</p>
        <p className="text-small text-ink-2">
          {ifSkipped === null
            ? 'Without an answer the chart ends here: the lead is asked.'
            : `The walk goes on as “${ifSkipped.title}”; this is shown again before the lead is asked.`}
        </p>
      </div>
      {reasons.map((why, index) => {
        const words = why === 'not-reproduced' && endsWalk ? 'nothing to find on a machine that runs right: the walk ends here' : undefined
        const pick = (): void => tap(() => onPick(why))
        return (
          <div key={why}>
            <OutcomeButton numeral={index + 1} title={skipWords[why]} {...(words === undefined ? {} : { words })} onPress={pick} />
            <AnswerKey numeral={index + 1} words={skipWords[why]} run={pick} />
          </div>
        )
      })}
      <OutcomeButton numeral={0} title="Back to the answers" look="open" expanded onPress={() => tap(onClose)} />
      <AnswerKey numeral={0} words="Back to the answers" run={() => tap(onClose)} />
    </div>
  )
}

/** What tapping an outcome means beyond the answer. */
export function toOutcomeWords(choice: OutcomeChoice): string | undefined {
  if (choice.isServiceable) return choice.serviceItem === null ? 'serviceable: the walk goes on' : `serviceable: “${choice.serviceItem}” joins the list`
  return undefined
}

/** What the button of an outcome says; the one that was answered before says so, and one tap keeps it. */
export function toOfferedAnswer(choice: OutcomeChoice, offered: OfferedAnswer | null, words: string | undefined): Omit<Answer, 'onPress'> {
  const isOffered = offered?.answer.outcome === choice.outcome
  const said = isOffered ? toOfferedWords(offered) : words
  return {
    key: choice.outcome,
    numeral: choice.balloon,
    title: choice.title,
    look: isOffered ? 'leading' : 'plain',
    ...(said === undefined ? {} : { words: said }),
  }
}
