import { useState } from 'react'

import type { EscalatedPage as Page, QuestionWords } from '#shared/walk/page.ts'
import { Button } from '#src/components/ui/button.tsx'
import { RuledList, RuledRow, RuledSection } from '#src/components/ui/ruled.tsx'
import { StateMark } from '#src/components/ui/state-mark.tsx'
import { CloseActs } from '#src/features/walk-player/parts/close-acts.tsx'
import { PageHead, Sheet } from '#src/features/walk-player/parts/page-parts.tsx'
import { SkippedList } from '#src/features/walk-player/parts/skipped-list.tsx'
import { usePlayer } from '#src/features/walk-player/player-context.ts'

/** The lead is asked: the walk waits for an answer, a step back, or is closed. */
export function EscalatedPage({ page }: { readonly page: Page }) {
  const isAsked = page.questions.some(({ answer }) => answer === null)
  return (
    <Sheet
      what={
        <>
          <PageHead
            knot="escalate"
            over={[isAsked ? 'Waiting' : 'The walk stops here', page.at.title]}
            title={isAsked ? 'The lead is asked' : 'Ask the lead how to go on'}
          />
          <p className="mt-3">{page.reasonWords}</p>
          <p className="mt-2 text-ink-2">Leave the machine as it stands. {isAsked ? 'The answer appears here by itself.' : 'Nobody is asked yet.'}</p>
          <QuestionList questions={page.questions} />
          {page.ruledOut.length > 0 && (
            <RuledSection title="Ruled out" className="mt-6">
              <RuledList>
                {page.ruledOut.map(({ cause, how }, index) => (
                  <RuledRow key={`${cause.causeId ?? cause.title}-${index}`} className="flex flex-wrap items-center justify-between gap-x-4">
                    <span className="line-through decoration-1">{cause.title}</span>
                    <span className="text-small text-ink-2">{how === 'run-failed' ? 'the run failed' : 'not proven'}</span>
                  </RuledRow>
                ))}
              </RuledList>
            </RuledSection>
          )}
          <SkippedList skipped={page.skipped} />
        </>
      }
      answers={
        <div className="grid gap-4">
          {!isAsked && <AskNow />}
          <CloseUnanswered page={page} />
        </div>
      }
    />
  )
}

function AskNow() {
  const { openPanel, tap } = usePlayer()
  return (
    <Button look="primary" size="large" onClick={() => tap(() => openPanel('ask'))} className="min-h-18 w-full text-body md:min-h-22">
      Ask the lead
    </Button>
  )
}

/** The ends stand behind a press of their own; while they are not to be seen, their keys do not act either. */
function CloseUnanswered({ page }: { readonly page: Page }) {
  const [isOpen, setOpen] = useState(false)
  return (
    <details open={isOpen} onToggle={(event) => setOpen(event.currentTarget.open)} className="border-t border-hair">
      <summary className="flex min-h-14 items-center font-medium text-cord underline underline-offset-4">Close it without an answer</summary>
      {isOpen && <CloseActs results={page.results} leads={false} />}
    </details>
  )
}

/** Questions to the lead, with their answers as soon as they are there. */
export function QuestionList({ questions }: { readonly questions: readonly QuestionWords[] }) {
  if (questions.length === 0) return null
  return (
    <RuledSection title="Questions" className="mt-6">
      <RuledList>
        {questions.map(({ questionId, text, answer, goTo }) => (
          <RuledRow key={questionId}>
            <p className="whitespace-pre-wrap">{text}</p>
            {answer === null ? (
              <StateMark state="info" className="text-small">
                waiting for the lead
              </StateMark>
            ) : (
              <p className="mt-1 border-l-4 border-info pl-3 whitespace-pre-wrap">
                {answer}
                {goTo !== null && (
                  <span className="block text-small text-ink-2">Go on at {goTo.number === '' ? goTo.title : `${goTo.number} ${goTo.title}`}</span>
                )}
              </p>
            )}
          </RuledRow>
        ))}
      </RuledList>
    </RuledSection>
  )
}
