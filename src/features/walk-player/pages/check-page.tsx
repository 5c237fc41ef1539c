import type { CheckPage as Page } from '#shared/walk/page.ts'
import { AnswerList, toOfferedAnswer, toOutcomeWords } from '#src/features/walk-player/parts/answer-list.tsx'
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
          answers={page.outcomes.map((choice) => ({
            ...toOfferedAnswer(choice, offered, toOutcomeWords(choice)),
            onPress: () => answer({ choice, reuses: offered?.answer.outcome === choice.outcome ? offered : null }),
          }))}
          noAnswer={page.noAnswer}
          onNoAnswer={skip}
        />
      }
    />
  )
}
