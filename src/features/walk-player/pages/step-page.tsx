import type { StepPage as Page } from '#shared/walk/page.ts'
import { Button } from '#src/components/ui/button.tsx'
import { DoFirst, NodeHelp, PageHead, Sheet, toKindWords, toMachineWords, toMinutesWords } from '#src/features/walk-player/parts/page-parts.tsx'
import { Timer } from '#src/features/walk-player/parts/timer.tsx'
import { AnswerKey } from '#src/features/walk-player/parts/answer-list.tsx'
import { usePlayer } from '#src/features/walk-player/player-context.ts'

/** A step on a page of its own: it has a timer, a caution, or puts something out of action. */
export function StepPage({ page }: { readonly page: Page }) {
  const { node, entering } = page
  const { record, seconds, tap } = usePlayer()
  const done = (): void => tap(() => record([{ type: 'step-done', payload: { node: node.place, seconds: seconds() } }], `Done: ${node.title}`))
  return (
    <Sheet
      what={
        <>
          <DoFirst entering={entering} lines={[]} />
          <PageHead
            knot="step"
            over={[toKindWords('step', node.number), toMinutesWords(node.minutes, entering.minutes), toMachineWords(entering.machine)]}
            title={node.title}
          />
          <NodeHelp node={node} />
          {node.timer !== null && node.timer !== undefined && <Timer timer={node.timer} />}
        </>
      }
      answers={
        <>
          <Button look="primary" size="large" onClick={done} className="min-h-18 w-full text-body md:min-h-22">
            Done
          </Button>
          <AnswerKey numeral={1} words="Done" run={done} />
        </>
      }
    />
  )
}
