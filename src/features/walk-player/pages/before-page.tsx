import { z } from 'zod'

import { outcomeIdSchema } from '#shared/lib/ids.ts'
import { formatValue } from '#shared/units/format-value.ts'
import { unitSchema } from '#shared/units/limits.ts'
import { heldAgainst } from '#shared/walk/judging.ts'
import type { BeforePage as Page, OutcomeChoice } from '#shared/walk/page.ts'
import { AnswerList, NoAnswerList } from '#src/features/walk-player/parts/answer-list.tsx'
import { OfferedValue } from '#src/features/walk-player/parts/offered-value.tsx'
import { DoFirst, NodeHelp, NodeReasons, PageHead, Sheet, toMachineWords, toMinutesWords } from '#src/features/walk-player/parts/page-parts.tsx'
import { ReadingEntry } from '#src/features/walk-player/parts/reading-entry.tsx'
import { Timer } from '#src/features/walk-player/parts/timer.tsx'
import { useRecordAct, ValueAnswers } from '#src/features/walk-player/parts/value-answers.tsx'
import { ProofPage } from '#src/features/walk-player/pages/proof-page.tsx'
import { usePlayer } from '#src/features/walk-player/player-context.ts'
import { useScratch } from '#src/features/walk-player/scratch.ts'
import type { SkipWhy } from '#src/lib/walk-words.ts'
import { useAnswering } from '#src/features/walk-player/use-answering.ts'
import { useReadingEntry } from '#src/features/walk-player/use-reading-entry.ts'
import { announce } from '#src/lib/announce.ts'

const takenSchema = z.strictObject({
  outcome: outcomeIdSchema,
  title: z.string(),
  measured: z.strictObject({ value: z.number(), unit: unitSchema }).nullable(),
})
type Taken = z.infer<typeof takenSchema>

/**
 * What a proof compares with, taken before anything is changed. The answer stays on this device until the proof's own finding
 * carries it, and then the proof's page is shown with it.
 */
export function BeforePage({ page }: { readonly page: Page }) {
  const { walk, format } = usePlayer()
  const [taken, setTaken] = useScratch(walk.walkId, `before.${page.proof.node.place}`, takenSchema)
  if (taken === null) return <TakeBefore page={page} onTaken={setTaken} />
  const { outcome, title, measured } = taken
  const answer = { outcome, value: measured?.value ?? null, unit: measured?.unit ?? null }
  const proof = { ...page.proof, before: { node: page.node, answer, title }, judging: heldAgainst(page.proof.judging, answer) }
  const takeAgain = (): void => {
    announce(`Taken back: ${toTakenWords(taken, format)}.`)
    setTaken(null)
  }
  return <ProofPage page={proof} taken={{ payload: { outcome, ...measured }, onTakeAgain: takeAgain, onRecorded: () => setTaken(null) }} />
}

function toTakenWords({ title, measured }: Taken, format: Parameters<typeof formatValue>[2]): string {
  return measured === null ? title : formatValue(measured.value, measured.unit, format)
}

type TakeBeforeProps = { readonly page: Page; readonly onTaken: (taken: Taken) => void }

function TakeBefore({ page, onTaken }: TakeBeforeProps) {
  const { skip } = useAnswering(page.proof)
  return page.judging === null ? (
    <BeforeByLook page={page} onTaken={onTaken} skip={skip} />
  ) : (
    <BeforeByValue page={page} judging={page.judging} onTaken={onTaken} skip={skip} />
  )
}

type StageProps = TakeBeforeProps & { readonly skip: (why: SkipWhy) => void }

function BeforeByLook({ page, onTaken, skip }: StageProps) {
  return (
    <Sheet
      what={<BeforeWhat page={page} />}
      answers={
        <div className="grid gap-3">
          <OfferedValue page={page.proof} />
          <AnswerList
            question={page.node.title}
            answers={page.outcomes.map(({ outcome, balloon, title }) => ({
              key: outcome,
              numeral: balloon,
              title,
              onPress: () => onTaken({ outcome, title, measured: null }),
            }))}
            noAnswer={page.noAnswer}
            onNoAnswer={skip}
          />
        </div>
      }
    />
  )
}

function BeforeByValue({ page, judging, onTaken, skip }: StageProps & { readonly judging: NonNullable<Page['judging']> }) {
  const { noAnswer } = usePlayer()
  const entry = useReadingEntry(`before.${page.proof.node.place}`, judging)
  const onRecord = ({ outcome, title }: OutcomeChoice): void => {
    const { value, unit } = entry.measured
    onTaken({ outcome, title, measured: value === undefined || unit === undefined ? null : { value, unit } })
    entry.forget()
  }
  const act = useRecordAct(entry, page.outcomes, onRecord)
  return (
    <Sheet
      what={<BeforeWhat page={page} />}
      answers={
        noAnswer.isOpen ? (
          <NoAnswerList question={page.node.title} noAnswer={page.noAnswer} onPick={skip} onClose={noAnswer.toggle} />
        ) : (
          <div className="grid gap-3">
            <OfferedValue page={page.proof} />
            <ReadingEntry entry={entry} label={page.node.title} onEnter={act}>
              <ValueAnswers question={page.node.title} entry={entry} outcomes={page.outcomes} onRecord={onRecord} />
            </ReadingEntry>
          </div>
        )
      }
      later={<NodeReasons node={page.node} />}
    />
  )
}

function BeforeWhat({ page }: { readonly page: Page }) {
  const { node, entering, proof } = page
  return (
    <>
      <DoFirst entering={entering} lines={proof.lines} />
      <PageHead
        knot={page.judging === null ? 'check' : 'reading'}
        stage="before"
        over={['Prove it', 'before the change', toMinutesWords(node.minutes, entering.minutes), toMachineWords(entering.machine)]}
        title={node.title}
        tab={`Before: ${node.title}`}
      />
      <NodeHelp node={node} showGood={page.judging === null} isShort={page.judging !== null} />
      {node.timer !== null && node.timer !== undefined && <Timer timer={node.timer} />}
      <p className="mt-4 border-t border-hair pt-3 text-small text-ink-2">
        Nothing is changed yet. Next: {proof.change ?? proof.node.title}, then the same again.
      </p>
    </>
  )
}
