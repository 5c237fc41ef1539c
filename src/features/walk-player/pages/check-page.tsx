import type { CheckPage as Page, OfferedAnswer, OutcomeChoice } from '#shared/walk/page.ts'
import type { Answer } from '#src/features/walk-player/parts/answer-list.tsx'
import { AnswerList, toOutcomeWords } from '#src/features/walk-player/parts/answer-list.tsx'
import { DoFirst, NodeHelp, PageHead, Sheet, toKindWords, toMachineWords, toMinutesWords } from '#src/features/walk-player/parts/page-parts.tsx'
import { Timer } from '#src/features/walk-player/parts/timer.tsx'
import { useAnswering } from '#src/features/walk-player/use-answering.ts'

/** A check: look, answer. */
export function CheckPage({ page }: { readonly page: Page }) {
  const { node, entering, lines, offered } = page
  const { answer, skip } = useAnswering(page)
  return (
    <Sheet
      what={
        <>
          <DoFirst entering={entering} lines={lines} />
          <PageHead
            knot="check"
            over={[toKindWords('check', node.number), toMinutesWords(node.minutes, entering.minutes), toMachineWords(entering.machine)]}
            title={node.title}
          />
          <NodeHelp node={node} />
          {node.timer !== null && node.timer !== undefined && <Timer timer={node.timer} />}
        </>
      }
      answers={
        <AnswerList
          question={node.title}
          answers={page.outcomes.map((choice) =>
            toAnswer(choice, offered, () => answer({ choice, reuses: offered?.answer.outcome === choice.outcome ? offered : null })),
          )}
          noAnswer={page.noAnswer}
          onNoAnswer={skip}
        />
      }
    />
  )
}

/** An outcome as a button; the one that was answered before says so, and one tap keeps it. */
function toAnswer(choice: OutcomeChoice, offered: OfferedAnswer | null, onPress: () => void): Answer {
  const isOffered = offered?.answer.outcome === choice.outcome
  const words = isOffered ? toOfferedWords(offered) : toOutcomeWords(choice)
  return {
    key: choice.outcome,
    numeral: choice.balloon,
    title: choice.title,
    look: isOffered ? 'leading' : 'plain',
    onPress,
    ...(words === undefined ? {} : { words }),
  }
}

/** Where an offered answer comes from. */
export function toOfferedWords({ from }: OfferedAnswer): string {
  switch (from) {
    case 'noticed':
      return 'you noticed this on the way: tap to keep it'
    case 'stepped-back':
      return 'your answer before you stepped back: tap to keep it'
  }
}
