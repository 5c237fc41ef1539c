import type { SkippedCheck } from '#shared/walk/page.ts'
import { Button } from '#src/components/ui/button.tsx'
import { RuledList, RuledRow, RuledSection } from '#src/components/ui/ruled.tsx'
import { StateMark } from '#src/components/ui/state-mark.tsx'
import { usePlayer } from '#src/features/walk-player/player-context.ts'
import { skipWords } from '#src/lib/walk-words.ts'

/** The checks that got no answer, shown once more before the lead is asked, each with the way back to it. */
export function SkippedList({ skipped }: { readonly skipped: readonly SkippedCheck[] }) {
  const { stepBack, tap } = usePlayer()
  if (skipped.length === 0) return null
  return (
    <RuledSection title="Without an answer" className="mt-6">
      <RuledList>
        {skipped.map(({ node, why, note, eventId }) => (
          <RuledRow key={eventId} className="flex flex-wrap items-center justify-between gap-x-4 gap-y-1">
            <span className="grid min-w-0 flex-1 basis-56">
              <span>
                {node.number !== '' && <span className="figures mr-2 text-ink-2">{node.number}</span>}
                {node.title}
              </span>
              <StateMark state="open" className="text-small">
                {skipWords[why]}
                {note !== null && `: ${note}`}
              </StateMark>
            </span>
            <Button onClick={() => tap(() => stepBack(eventId, `Back at: ${node.title}`))}>Go back to it</Button>
          </RuledRow>
        ))}
      </RuledList>
    </RuledSection>
  )
}
