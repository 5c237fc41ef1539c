import { z } from 'zod'

import { isOpen } from '#shared/walk/state.ts'
import { nameAt } from '#shared/walk/words.ts'
import { Button } from '#src/components/ui/button.tsx'
import { Notice } from '#src/components/ui/notice.tsx'
import { usePlayer } from '#src/features/walk-player/player-context.ts'
import { useScratch } from '#src/features/walk-player/scratch.ts'
import { focusHeading } from '#src/lib/focus-heading.ts'

/** The lead's latest answer, on the page until it was read there. */
export function Answered() {
  const { walk, charts, nameOf } = usePlayer()
  const [readId, setReadId] = useScratch(walk.walkId, 'answer-read', z.string())
  const question = isOpen(walk) ? walk.questions.findLast(({ answer }) => answer !== null) : undefined
  const answer = question?.answer
  // An escalated walk lists its questions with their answers already.
  if (question === undefined || answer == null || walk.phase === 'escalated' || answer.eventId === readId) return null
  return (
    <Notice state="info" title={`${nameOf(answer.answeredBy)} answers`} role="status" className="mt-4">
      <p className="text-small text-ink-2">{question.text}</p>
      <p className="whitespace-pre-wrap">{answer.text}</p>
      {answer.goTo !== null && <p className="text-small">Go on at: {nameAt(charts, walk, answer.goTo).title}</p>}
      <Button
        className="mt-2"
        onClick={() => {
          focusHeading()
          setReadId(answer.eventId)
        }}
      >
        Understood
      </Button>
    </Notice>
  )
}
