import type { RefusalCode } from '#shared/walk/refusals.ts'
import { refusalWords } from '#shared/walk/refusals.ts'
import { Button } from '#src/components/ui/button.tsx'
import { Notice } from '#src/components/ui/notice.tsx'
import { usePlayer } from '#src/features/walk-player/player-context.ts'
import { toCount } from '#src/features/walk-player/words.ts'
import { toEventWords } from '#src/lib/walk-words.ts'
import { focusHeading } from '#src/lib/focus-heading.ts'
import { formatClock } from '#src/lib/format.ts'
import type { SetAside } from '#src/lib/walk-log.ts'

/** Taps that did not make it into the log, told one by one: they stand beside it, nothing is dropped silently. */
export function SetAsideNotice({ setAside, onRead }: { readonly setAside: readonly SetAside[]; readonly onRead: () => void }) {
  const { charts, walk, format } = usePlayer()
  return (
    <Notice state="care" title={`${toCount(setAside.length, 'entry was', 'entries were')} set aside`} role="alert" className="mt-4">
      <p>{toReason(setAside)} This is where the walk stands now. What was set aside is kept beside the log:</p>
      <ul role="list" className="my-2 text-small">
        {setAside.map(({ event }) => (
          <li key={event.id} className="border-b border-hair py-1">
            <span className="figures text-ink-2">{formatClock(event.at)}</span> {toEventWords({ charts, walk, format }, event)}
          </li>
        ))}
      </ul>
      <Button
        onClick={() => {
          focusHeading()
          onRead()
        }}
      >
        Understood
      </Button>
    </Notice>
  )
}

/** Why: a first event that was refused says so itself; else the log had moved on without this device. */
function toReason([first]: readonly SetAside[]): string {
  const isRefused = first !== undefined && first.status === 'refused' && Object.hasOwn(refusalWords, first.code)
  return isRefused ? refusalWords[first.code as RefusalCode] : 'The walk went on elsewhere meanwhile.'
}
