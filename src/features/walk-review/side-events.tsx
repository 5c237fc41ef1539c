import { useQuery } from '@tanstack/react-query'

import type { PersonId, WalkId } from '#shared/lib/ids.ts'
import type { NumberFormat } from '#shared/units/number-format.ts'
import type { PinnedCharts } from '#shared/walk/pinned-charts.ts'
import type { RefusalCode } from '#shared/walk/refusals.ts'
import { refusalWords } from '#shared/walk/refusals.ts'
import type { StartedWalk } from '#shared/walk/state.ts'
import { walkQueries } from '#src/api/walks.ts'
import { RuledList, RuledRow, RuledSection } from '#src/components/ui/ruled.tsx'
import { StateMark } from '#src/components/ui/state-mark.tsx'
import { formatMoment } from '#src/lib/format.ts'
import { toEventWords } from '#src/lib/walk-words.ts'

type SideEventsProps = {
  readonly walkId: WalkId
  readonly charts: PinnedCharts
  readonly walk: StartedWalk
  readonly format: NumberFormat
  readonly nameOf: (personId: PersonId) => string
}

/** Entries that did not make it into the log, in words: nobody's tap is lost. */
export function SideEvents({ walkId, charts, walk, format, nameOf }: SideEventsProps) {
  const { data } = useQuery(walkQueries.sideEvents(walkId))
  if (data === undefined || data.sideEvents.length === 0) return null
  return (
    <RuledSection title="Set aside beside the log" className="mt-8">
      <RuledList>
        {data.sideEvents.map(({ event, code, receivedAt }) => (
          <RuledRow key={event.id}>
            <p className="break-words">{toEventWords({ charts, walk, format }, event)}</p>
            <p className="flex flex-wrap gap-x-4 text-small text-ink-2">
              <StateMark state="care">{toWhy(code)}</StateMark>
              <span>
                {nameOf(event.personId)}, {formatMoment(receivedAt)}
              </span>
            </p>
          </RuledRow>
        ))}
      </RuledList>
    </RuledSection>
  )
}

/** Why an entry was set aside, in a few words. */
function toWhy(code: string): string {
  if (code === 'other-device' || code === 'other-person' || code === 'wrong-seq') return 'the walk went on elsewhere meanwhile'
  return Object.hasOwn(refusalWords, code) ? refusalWords[code as RefusalCode] : 'came after an entry that was set aside'
}
