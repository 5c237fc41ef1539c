import type { AbandonedPage, ClosedPage } from '#shared/walk/page.ts'
import { ButtonLink } from '#src/components/ui/button.tsx'
import { RuledPairs } from '#src/components/ui/ruled.tsx'
import { PageHead, Sheet } from '#src/features/walk-player/parts/page-parts.tsx'
import { usePlayer } from '#src/features/walk-player/player-context.ts'
import { resultWords } from '#src/lib/walk-words.ts'
import { formatMinutes } from '#src/lib/format.ts'
import { paths } from '#src/lib/paths.ts'

/** The walk is over: what it came to, and where to go from here. */
export function EndedPage({ page }: { readonly page: ClosedPage | AbandonedPage }) {
  const { walk } = usePlayer()
  const isClosed = page.kind === 'closed'
  const title = isClosed ? resultWords[page.result] : 'Given up'
  return (
    <Sheet
      what={
        <>
          <PageHead knot={isClosed && page.cause !== null ? 'cause' : 'back'} over={[isClosed ? 'Closed' : 'Given up']} title={title} />
          <RuledPairs
            className="mt-4"
            pairs={[
              ...(isClosed && page.cause !== null ? [{ name: 'Cause', value: page.cause.title }] : []),
              ...(page.why === null ? [] : [{ name: 'Why', value: page.why }]),
              { name: 'Minutes used', value: formatMinutes(walk.minutesUsed) },
            ]}
          />
        </>
      }
      answers={
        <div className="grid gap-3">
          <ButtonLink to={paths.bench()} look="primary" size="large" className="min-h-18">
            To the bench
          </ButtonLink>
          <ButtonLink to={paths.walkReview(walk.walkId)} size="large" className="min-h-18">
            The log of this walk
          </ButtonLink>
        </div>
      }
    />
  )
}
