import { useEffect, useRef } from 'react'

import type { Place } from '#shared/lib/ids.ts'
import type { NumberFormat } from '#shared/units/number-format.ts'
import type { ReviewLine } from '#shared/walk/review.ts'
import { Tie } from '#src/components/knots/cord.tsx'
import { StateMark } from '#src/components/ui/state-mark.tsx'
import { isAboutNode, spentWords, toFound, toKnot, toMark, toTitle, toTries } from '#src/features/walk-review/log-lines.ts'
import { formatClock } from '#src/lib/format.ts'

type WalkLogListProps = {
  readonly lines: readonly ReviewLine[]
  readonly format: NumberFormat
  readonly nameOf: (personId: ReviewLine['personId']) => string
  /** Whose walk it is; other names are told with their lines. */
  readonly walker: ReviewLine['personId']
  readonly selected: ReviewLine['eventId'] | null
  readonly onSelect: (line: ReviewLine) => void
}

const columns = 'grid grid-cols-[4rem_minmax(0,1fr)_2.5rem] gap-x-3 sm:grid-cols-[4rem_2.25rem_minmax(0,1fr)_minmax(6rem,9rem)_2.5rem]'

/** The log, knot by knot: each line is a button that shows its node on the chart. */
export function WalkLogList({ lines, ...rest }: WalkLogListProps) {
  return (
    <>
      <div aria-hidden="true" className={`label border-b border-rule py-1 ${columns}`}>
        <span>Time</span>
        <span className="max-sm:hidden">No.</span>
        <span>Found</span>
        <span className="max-sm:hidden" />
        <span className="text-right">Min</span>
      </div>
      <ol role="list" aria-label="Log of the walk">
        {lines.map((line) => (
          <LogLine key={line.eventId} line={line} isSelected={rest.selected === line.eventId} {...rest} />
        ))}
      </ol>
    </>
  )
}

type LogLineProps = Omit<WalkLogListProps, 'lines' | 'selected'> & { readonly line: ReviewLine; readonly isSelected: boolean }

function LogLine({ line, isSelected, format, nameOf, walker, onSelect }: LogLineProps) {
  const row = useRef<HTMLLIElement>(null)
  useEffect(() => {
    if (isSelected) row.current?.scrollIntoView({ block: 'nearest' })
  }, [isSelected])
  const knot = toKnot(line)
  const found = toFound(line, format)
  const tries = toTries(line, format)
  const mark = toMark(line)
  const isSpent = line.spent !== null
  const about = isAboutNode(line)
  return (
    <li
      ref={row}
      className={`relative scroll-my-24 border-b border-hair py-2 before:absolute before:inset-y-0 before:-right-3 before:-left-3 before:-z-1 ${columns} ${isSelected ? 'before:bg-cord-wash [--mark-ground:var(--cord-wash)]' : ''}`}
    >
      {knot !== null && <Tie kind={knot.kind} look={isSelected ? 'current' : knot.look} at="top-5" />}
      <time dateTime={line.at} className="figures pt-0.5 text-small whitespace-nowrap text-ink-2">
        {formatClock(line.at)}
      </time>
      <span className="figures text-ink-2 max-sm:hidden">{about ? line.node.number : ''}</span>
      <span className="min-w-0">
        <button
          type="button"
          aria-pressed={isSelected}
          onClick={() => onSelect(line)}
          className={`block w-full text-left after:absolute after:inset-0 ${isSpent ? 'text-ink-2 line-through' : ''} ${line.type === 'cause-proven' ? 'font-semibold' : ''}`}
        >
          {about && line.node.number !== '' && <span className="figures mr-2 text-ink-2 sm:hidden">{line.node.number}</span>}
          {toTitle(line)}
        </button>
        {found !== null && (
          <span className={`block font-semibold ${line.reading === null ? '' : 'figures'} ${isSpent ? 'line-through decoration-1' : ''}`}>{found}</span>
        )}
        {tries !== null && <span className="figures block text-small text-ink-2">{tries}</span>}
        {line.text !== null && <span className="block text-small break-words whitespace-pre-wrap">{line.text}</span>}
        {line.personId !== walker && <span className="block text-small text-ink-2">{nameOf(line.personId)}</span>}
        {line.spent !== null && <span className="block text-small text-ink-2">{spentWords[line.spent]}</span>}
        {mark !== null && (
          <StateMark state={mark.state} className="text-small sm:hidden">
            {mark.words}
          </StateMark>
        )}
      </span>
      <span className="max-sm:hidden">{mark !== null && <StateMark state={mark.state}>{mark.words}</StateMark>}</span>
      <span className="figures text-right text-ink-2">{line.minutes > 0 ? Math.round(line.minutes * 10) / 10 : ''}</span>
    </li>
  )
}

/** The line that tells most about a node: its finding that counts, else its latest line. */
export function lineOfPlace(lines: readonly ReviewLine[], place: Place): ReviewLine | null {
  const about = lines.filter((line) => line.node.place === place && isAboutNode(line))
  return about.findLast(({ spent }) => spent === null) ?? about.at(-1) ?? lines.findLast((line) => line.node.place === place) ?? null
}
