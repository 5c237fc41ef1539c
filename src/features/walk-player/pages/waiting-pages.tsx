import { useState } from 'react'

import type { PausedPage as Page, WalkPage } from '#shared/walk/page.ts'
import { hasRole } from '#shared/trade/roles.ts'
import { ButtonLink } from '#src/components/ui/button.tsx'
import { ActList } from '#src/features/walk-player/parts/act-list.tsx'
import { NoteField, toLengthWords } from '#src/features/walk-player/parts/note-field.tsx'
import { PageHead, Sheet } from '#src/features/walk-player/parts/page-parts.tsx'
import { usePlayer } from '#src/features/walk-player/player-context.ts'
import { paths } from '#src/lib/paths.ts'

/** What waits on the page below, in words. */
function toWaitingWords(page: WalkPage): string | null {
  if (page.kind === 'caution') return page.guards.title
  if (page.kind === 'proven' || page.kind === 'run') return page.cause.title
  return 'node' in page ? page.node.title : null
}

/** Paused: the page that waits, and the way on. */
export function PausedPage({ page }: { readonly page: Page }) {
  const { walk, record, nameOf, person } = usePlayer()
  const waiting = toWaitingWords(page.under)
  const isMine = walk.holder.personId === person.id
  return (
    <Sheet
      what={
        <>
          <PageHead knot="waiting" over={['Paused']} title={walk.handedTo === null ? 'This walk is paused' : `Handed over to ${nameOf(walk.handedTo)}`} />
          {waiting !== null && <p className="mt-3">Next: {waiting}</p>}
        </>
      }
      answers={
        isMine ? (
          <ActList
            label="Paused"
            acts={[{ key: 'on', title: 'Go on', look: 'leading', onPress: () => record([{ type: 'resumed', payload: {} }], 'Going on.') }]}
          />
        ) : null
      }
    />
  )
}

/** The walk is in other hands, or on another device: nobody goes on here by accident. */
export function OtherHandsPage({ page }: { readonly page: WalkPage }) {
  const { walk, person, record, nameOf } = usePlayer()
  const [why, setWhy] = useState(walk.handedTo === person.id ? 'Handed over' : '')
  const [error, setError] = useState<string | undefined>()
  const { personId } = walk.holder
  const isMine = personId === person.id
  const mayTake = walk.handedTo === person.id || hasRole(person.role, 'lead')
  const waiting = toWaitingWords(page.kind === 'paused' ? page.under : page)
  const take = (): void => {
    const wrong = why.trim() === '' ? 'Write why first: it stands in the log.' : toLengthWords(why)
    setError(wrong)
    if (wrong === undefined) record([{ type: 'taken-over', payload: { from: personId, why: why.trim() } }], 'Taken over.')
  }
  const title = isMine ? 'This walk is in hand on another device' : `${nameOf(personId)} has this walk in hand`
  return (
    <Sheet
      what={
        <>
          <PageHead knot="waiting" over={['In other hands']} title={title} />
          {waiting !== null && <p className="mt-3">It stands at: {waiting}</p>}
          <p className="mt-3">
            {isMine
              ? 'If you go on here, what is still being entered there is set aside, not lost.'
              : mayTake
                ? 'If you take it over, what they still enter is set aside, not lost.'
                : 'Have it handed over to you, or ask the lead. You can read along in its log.'}
          </p>
          {!isMine && mayTake && (
            <div className="mt-5">
              <NoteField label="Why you take it over" value={why} onChange={setWhy} error={error} rows={2} />
            </div>
          )}
        </>
      }
      answers={
        isMine ? (
          <ActList
            label="Go on here"
            acts={[{ key: 'here', title: 'Go on here', look: 'leading', onPress: () => record([{ type: 'resumed', payload: {} }], 'Going on here.') }]}
          />
        ) : mayTake ? (
          <ActList label="Take it over" acts={[{ key: 'take', title: 'Take it over', look: 'leading', onPress: take }]} />
        ) : (
          <ButtonLink to={paths.walkReview(walk.walkId)} size="large" className="w-full">
            Read its log
          </ButtonLink>
        )
      }
    />
  )
}
