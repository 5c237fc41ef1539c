import type { ReactNode } from 'react'
import { useRef, useState } from 'react'
import { z } from 'zod'

import { formatValue } from '#shared/units/format-value.ts'
import { wasSoBefore } from '#shared/walk/judging.ts'
import type { OutcomeChoice, ProofPage as Page } from '#shared/walk/page.ts'
import type { Answer } from '#shared/walk/state.ts'
import { StateMark } from '#src/components/ui/state-mark.tsx'
import { AnswerList, NoAnswerList, toOfferedAnswer } from '#src/features/walk-player/parts/answer-list.tsx'
import { NoteField, toLengthWords } from '#src/features/walk-player/parts/note-field.tsx'
import { OfferedValue } from '#src/features/walk-player/parts/offered-value.tsx'
import { OutcomeButton } from '#src/features/walk-player/parts/outcome-button.tsx'
import { DoFirst, NodeHelp, NodeReasons, PageHead, Sheet, toMachineWords, toMinutesWords } from '#src/features/walk-player/parts/page-parts.tsx'
import { ReadingEntry } from '#src/features/walk-player/parts/reading-entry.tsx'
import { Timer } from '#src/features/walk-player/parts/timer.tsx'
import { useRecordAct, ValueAnswers } from '#src/features/walk-player/parts/value-answers.tsx'
import { usePlayer } from '#src/features/walk-player/player-context.ts'
import { useScratch } from '#src/features/walk-player/scratch.ts'
import type { Given } from '#src/features/walk-player/use-answering.ts'
import { useAnswering } from '#src/features/walk-player/use-answering.ts'
import type { ReadingEntry as Entry } from '#src/features/walk-player/use-reading-entry.ts'
import { toValueMark, useReadingEntry } from '#src/features/walk-player/use-reading-entry.ts'
import { announce } from '#src/lib/announce.ts'

/** The value or answer that was taken on this page before the change, and the way to take it again. */
export type TakenBefore = { readonly payload: NonNullable<Given['before']>; readonly onTakeAgain: () => void; readonly onRecorded: () => void }

type ProofPageProps = { readonly page: Page; readonly taken?: TakenBefore }

/** A proof: one change, then the same look again. Before, changed and after stand under each other. */
export function ProofPage({ page, taken }: ProofPageProps) {
  const { judging } = page
  if (judging === null) return <ProofByLook page={page} {...(taken && { taken })} />
  return <ProofByValue page={page} judging={judging} {...(taken && { taken })} />
}

function ProofByValue({ page, judging, taken }: ProofPageProps & { readonly judging: NonNullable<Page['judging']> }) {
  const { format, noAnswer } = usePlayer()
  const entry = useReadingEntry(page.node.place, judging)
  const { answer, skip } = useAnswering(page)
  const onRecord = (choice: OutcomeChoice, judgedBy: 'limits' | 'hand'): void => {
    const { measured } = entry
    const value = measured.value === undefined || measured.unit === undefined ? '' : `${formatValue(measured.value, measured.unit, format)}, `
    if (!answer({ choice, judgedBy, measured, said: `${value}${choice.title}`, ...(taken && { before: taken.payload }) })) return
    entry.forget()
    taken?.onRecorded()
  }
  const act = useRecordAct(entry, page.outcomes, onRecord)
  const wordsOf = (choice: OutcomeChoice): string | undefined => toProofWords(page, choice)
  return (
    <Sheet
      what={<ProofWhat page={page} taken={taken} stage="after" />}
      answers={
        noAnswer.isOpen ? (
          <NoAnswerList question={page.node.title} noAnswer={page.noAnswer} onPick={skip} onClose={noAnswer.toggle} />
        ) : (
          <div className="grid gap-1">
            <OfferedValue page={page} />
            <p className="label">After</p>
            {page.before !== null && wasSoBefore(judging) && (
              <p className="text-small">
                Before the change it was “{page.before.title}” already, so the value alone proves nothing. Type it, then say what the change did.
              </p>
            )}
            <ReadingEntry entry={entry} label={`After: ${page.node.title}`} onEnter={act}>
              <JudgedProof entry={entry} outcomes={page.outcomes} wordsOf={wordsOf} onPress={act}>
                <ValueAnswers question={page.node.title} entry={entry} outcomes={page.outcomes} wordsOf={wordsOf} onRecord={onRecord} />
              </JudgedProof>
            </ReadingEntry>
          </div>
        )
      }
      later={<NodeReasons node={page.node} />}
    />
  )
}

type JudgedProofProps = {
  readonly entry: Entry
  readonly outcomes: readonly OutcomeChoice[]
  readonly wordsOf: (choice: OutcomeChoice) => string | undefined
  readonly onPress: () => void
  readonly children: ReactNode
}

/** The outcome that the value leads to, as the one button that records it; until there is one, what the value still wants. */
function JudgedProof({ entry, outcomes, wordsOf, onPress, children }: JudgedProofProps) {
  const { format } = usePlayer()
  const { verdict, value, unit } = entry
  const choice = verdict.kind === 'outcome' ? outcomes.find(({ outcome }) => outcome === verdict.outcome) : undefined
  if (choice === undefined || value === null) return children
  const words = [`Record ${formatValue(value, unit, format)}`, wordsOf(choice)].filter(Boolean).join(' · ')
  return <OutcomeButton numeral={choice.balloon} title={choice.title} words={words} look="leading" onPress={onPress} />
}

function ProofByLook({ page, taken }: ProofPageProps) {
  const { walk } = usePlayer()
  const { answer, skip } = useAnswering(page)
  const [note, setNote] = useScratch(walk.walkId, `note.${page.node.place}`, z.string())
  const [error, setError] = useState<string | undefined>()
  const field = useRef<HTMLTextAreaElement>(null)
  const text = note ?? ''
  const press = (choice: OutcomeChoice): void => {
    const reuses = page.offered?.answer.outcome === choice.outcome && text.trim() === '' ? page.offered : null
    if (reuses !== null) {
      answer({ choice, reuses })
      return
    }
    const wrong =
      toLengthWords(text) ?? (page.needsNote && choice.confirms && text.trim() === '' ? 'Write what the second look showed: it is the proof.' : undefined)
    setError(wrong)
    if (wrong !== undefined) {
      announce(wrong)
      field.current?.focus()
      return
    }
    if (!answer({ choice, note: text, ...(taken && { before: taken.payload }) })) return
    setNote(null)
    taken?.onRecorded()
  }
  return (
    <Sheet
      what={
        <>
          <ProofWhat page={page} taken={taken} stage="after" />
          {page.needsNote && (
            <div className="mt-5">
              <NoteField
                ref={field}
                label="What the second look showed"
                hint="Look again in good light, then write what is there. The hand-back run is its test."
                value={text}
                onChange={(value) => setNote(value === '' ? null : value)}
                error={error}
              />
            </div>
          )}
        </>
      }
      answers={
        <AnswerList
          question={page.node.title}
          answers={page.outcomes.map((choice) => ({ ...toOfferedAnswer(choice, page.offered, toProofWords(page, choice)), onPress: () => press(choice) }))}
          noAnswer={page.noAnswer}
          onNoAnswer={skip}
        />
      }
    />
  )
}

/** What an outcome of a proof means for its suspect. */
function toProofWords({ suspect }: Page, choice: OutcomeChoice): string | undefined {
  if (suspect === null) return undefined
  return choice.confirms ? `proves it: ${toLowerFirst(suspect.title)}` : undefined
}

function toLowerFirst(text: string): string {
  return text.charAt(0).toLowerCase() + text.slice(1)
}

function ProofWhat({ page, taken, stage }: { readonly page: Page; readonly taken: TakenBefore | undefined; readonly stage: string }) {
  const { walk } = usePlayer()
  const { node, entering, suspect, before, change, afterwards } = page
  const isRuledOut = suspect !== null && walk.ruledOut.some(({ causeId }) => causeId === suspect.causeId)
  return (
    <>
      <DoFirst entering={entering} lines={taken === undefined ? page.lines : []} />
      <PageHead
        knot="proof"
        stage={stage}
        over={[
          'Prove it',
          suspect?.title ?? null,
          isRuledOut ? 'ruled out before' : null,
          toMinutesWords(node.minutes, entering.minutes),
          toMachineWords(entering.machine),
        ]}
        title={node.title}
      />
      <dl className="mt-4 border-t-3 border-ink [&>div]:border-b [&>div]:border-hair">
        {before !== null && (
          <ProofRow lead="Before">
            <AnswerWords answer={before.answer} title={before.title} page={page} />
            {taken !== undefined && (
              <button type="button" onClick={taken.onTakeAgain} className="min-h-14 px-2 text-small text-cord underline underline-offset-4">
                Take it again
              </button>
            )}
          </ProofRow>
        )}
        {change !== null && (
          <ProofRow lead="Changed">
            <span>{change}</span>
            {afterwards !== null && <span className="text-small text-ink-2">{afterwards === 'put-back' ? 'put it back afterwards' : 'keep it so'}</span>}
          </ProofRow>
        )}
      </dl>
      <NodeHelp node={node} isShort={page.judging !== null} />
      {node.timer !== null && node.timer !== undefined && <Timer timer={node.timer} />}
    </>
  )
}

function ProofRow({ lead, children }: { readonly lead: string; readonly children: ReactNode }) {
  return (
    <div className="grid grid-cols-[4.5rem_1fr] items-center gap-x-3 py-2 md:grid-cols-[7rem_1fr]">
      <dt className="label">{lead}</dt>
      <dd className="flex flex-wrap items-center justify-between gap-x-2">{children}</dd>
    </div>
  )
}

/** An answer in words: the value with its mark, or the outcome. */
function AnswerWords({ answer, title, page }: { readonly answer: Answer; readonly title: string; readonly page: Page }) {
  const { format } = usePlayer()
  const { value, unit } = answer
  if (value === null || unit === null) return <span className="font-medium">{title}</span>
  const mark = page.judging === null ? null : toValueMark(page.judging, value, unit)
  return (
    <>
      <span className="figures text-[1.25rem] leading-8 md:text-[1.5rem]">{formatValue(value, unit, format)}</span>
      <StateMark state={mark?.state ?? 'open'} className="text-[0.9375rem] md:text-[1.125rem]">
        {mark?.words ?? title}
      </StateMark>
    </>
  )
}
