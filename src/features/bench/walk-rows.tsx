import type { ReactNode } from 'react'

import type { WalkRow } from '#shared/api/walks.ts'
import { Tie } from '#src/components/knots/cord.tsx'
import { ButtonLink } from '#src/components/ui/button.tsx'
import { RuledList, RuledRow } from '#src/components/ui/ruled.tsx'
import { StateMark } from '#src/components/ui/state-mark.tsx'
import { TextLink } from '#src/components/ui/text-link.tsx'
import { formatMinutes, formatSince } from '#src/lib/format.ts'
import { paths } from '#src/lib/paths.ts'

export function WalkRows({ children }: { readonly children: ReactNode }) {
  return <RuledList className="text-[1.125rem] leading-7">{children}</RuledList>
}

type OpenWalkRowProps = {
  readonly walk: WalkRow
  /** The one that was touched last: its button leads. */
  readonly isFirst: boolean
  /** `question`: waits for the lead's answer. `other`: in somebody else's hands. */
  readonly as?: 'mine' | 'question' | 'other'
}

/** A walk that is open: machine and symptom, where it stands, minutes used, and the way on. */
export function OpenWalkRow({ walk, isFirst, as = 'mine' }: OpenWalkRowProps) {
  const isMine = as === 'mine'
  return (
    <RuledRow className="grid grid-cols-[minmax(0,1fr)_auto] items-center gap-x-4 gap-y-1 py-3! md:grid-cols-[minmax(0,5fr)_minmax(0,4fr)_6rem_auto]">
      <Tie kind={walk.isPaused ? 'waiting' : 'check'} look={isFirst && isMine ? 'current' : 'outline'} />
      <span className="grid min-w-0">
        <span className="leading-6 font-semibold">{walk.machineTitle}</span>
        <span className="text-small leading-5 text-ink-2">
          {isMine ? walk.chartTitle.toLowerCase() : `${walk.chartTitle.toLowerCase()} · ${walk.heldBy.name}`}
        </span>
      </span>
      <span className="text-small leading-5 text-ink-2 max-md:col-start-1 max-md:row-start-2">{toStanding(walk)}</span>
      <span className="figures text-small whitespace-nowrap max-md:hidden md:text-[1.125rem]">{formatMinutes(walk.minutesUsed)}</span>
      <ButtonLink
        to={isMine ? paths.walk(walk.id) : paths.walkReview(walk.id)}
        look={isFirst && isMine ? 'primary' : 'quiet'}
        className="min-w-28 max-md:col-start-2 max-md:row-span-2 max-md:row-start-1"
      >
        {isMine ? 'Go on' : as === 'question' ? 'Answer' : 'Look'}
        <span className="for-ears">: {walk.machineTitle}</span>
      </ButtonLink>
    </RuledRow>
  )
}

/** "paused · asked the lead · check 6 · compression", as far as it is so. */
function toStanding({ isPaused, hasQuestion, standsAt, minutesUsed }: WalkRow): ReactNode {
  const words = [isPaused ? 'paused' : null, hasQuestion && !standsAt.startsWith('ask the lead') ? 'asked the lead' : null, standsAt].filter(Boolean).join(' · ')
  return (
    <>
      {words}
      <span className="md:hidden"> · {formatMinutes(minutesUsed)}</span>
    </>
  )
}

/** A walk that is over: what it came to, and its log. */
export function ClosedWalkRow({ walk }: { readonly walk: WalkRow }) {
  return (
    <RuledRow className="flex flex-wrap items-center justify-between gap-x-6 gap-y-1">
      <Tie kind={walk.causeTitle === null ? 'spent' : 'cause'} />
      <span className="grid min-w-0 flex-1 basis-56">
        <TextLink to={paths.walkReview(walk.id)} className="truncate py-0.5 font-medium">
          {walk.machineTitle}
        </TextLink>
        <span className="truncate text-small text-ink-2">{walk.chartTitle.toLowerCase()}</span>
      </span>
      <span className="flex-1 basis-56 text-small">{walk.causeTitle === null ? <StateMark state="open">{walk.standsAt}</StateMark> : walk.causeTitle}</span>
      <span className="text-small text-ink-2">{formatSince(walk.lastEventAt)}</span>
    </RuledRow>
  )
}
