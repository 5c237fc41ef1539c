import { formatValue } from '#shared/units/format-value.ts'
import type { OutcomeChoice, ReadingPage as Page } from '#shared/walk/page.ts'
import { NoAnswerList, toOutcomeWords } from '#src/features/walk-player/parts/answer-list.tsx'
import { OfferedValue } from '#src/features/walk-player/parts/offered-value.tsx'
import { DoFirst, NodeHelp, NodeReasons, PageHead, Sheet, toKindWords, toMachineWords, toMinutesWords } from '#src/features/walk-player/parts/page-parts.tsx'
import { ReadingEntry } from '#src/features/walk-player/parts/reading-entry.tsx'
import { Timer } from '#src/features/walk-player/parts/timer.tsx'
import { ValueAnswers, useRecordAct } from '#src/features/walk-player/parts/value-answers.tsx'
import { usePlayer } from '#src/features/walk-player/player-context.ts'
import { useAnswering } from '#src/features/walk-player/use-answering.ts'
import { useReadingEntry } from '#src/features/walk-player/use-reading-entry.ts'

/** A reading: a measured value, judged at once by the limits of this machine. */
export function ReadingPage({ page }: { readonly page: Page }) {
  const { node, entering, lines, outcomes, judging } = page
  const { format, noAnswer } = usePlayer()
  const entry = useReadingEntry(node.place, judging)
  const { answer, skip } = useAnswering(page)
  const onRecord = (choice: OutcomeChoice, judgedBy: 'limits' | 'hand'): void => {
    const { measured } = entry
    const said =
      measured.value === undefined || measured.unit === undefined ? choice.title : `${formatValue(measured.value, measured.unit, format)}, ${choice.title}`
    if (answer({ choice, judgedBy, measured, said })) entry.forget()
  }
  const act = useRecordAct(entry, outcomes, onRecord)
  return (
    <Sheet
      what={
        <>
          <DoFirst entering={entering} lines={lines} />
          <PageHead
            knot="reading"
            over={[toKindWords('reading', node.number), toMinutesWords(node.minutes, entering.minutes), toMachineWords(entering.machine)]}
            title={node.title}
          />
          <NodeHelp node={node} showGood={judging.limits === null} isShort />
          {node.timer !== null && node.timer !== undefined && <Timer timer={node.timer} />}
        </>
      }
      answers={
        noAnswer.isOpen ? (
          <NoAnswerList question={node.title} noAnswer={page.noAnswer} onPick={skip} onClose={noAnswer.toggle} />
        ) : (
          <div className="grid gap-3">
            <OfferedValue page={page} />
            <ReadingEntry entry={entry} label={node.title} onEnter={act}>
              <ValueAnswers question={node.title} entry={entry} outcomes={outcomes} wordsOf={toOutcomeWords} onRecord={onRecord} />
            </ReadingEntry>
          </div>
        )
      }
      later={<NodeReasons node={node} />}
    />
  )
}
