import type { ReactNode } from 'react'

import { formatNumber } from '#shared/units/format-value.ts'
import { ValueEntry } from '#src/features/walk-player/parts/value-entry.tsx'
import { usePlayer } from '#src/features/walk-player/player-context.ts'
import type { ReadingEntry as Entry } from '#src/features/walk-player/use-reading-entry.ts'
import { toValueMark } from '#src/features/walk-player/use-reading-entry.ts'

type ReadingEntryProps = {
  readonly entry: Entry
  readonly label: string
  readonly onEnter: () => void
  readonly children: ReactNode
}

/** The value of a reading, with the tries before it. */
export function ReadingEntry({ entry, label, onEnter, children }: ReadingEntryProps) {
  const { judging, value, unit } = entry
  return (
    <ValueEntry
      label={label}
      quantity={judging.reading.quantity}
      text={entry.text}
      onText={entry.setText}
      unit={unit}
      onUnit={entry.setUnit}
      typed={entry.typed}
      value={value}
      limits={judging.limits}
      mark={value === null ? null : toValueMark(judging, value, unit)}
      onEnter={onEnter}
      under={<Tries entry={entry} />}
    >
      {children}
    </ValueEntry>
  )
}

const ordinals = ['First', 'Second', 'Third', 'Fourth', 'Fifth', 'Sixth', 'Seventh', 'Eighth', 'Ninth'] as const

function Tries({ entry }: { readonly entry: Entry }) {
  const { format } = usePlayer()
  const { judging, tries, verdict, dropTry } = entry
  const { repeat } = judging
  if (repeat === null) return null
  const within = repeat.within === 0 ? 'equal' : `within ${formatNumber(repeat.within, format)}`
  return (
    <div className="flex flex-wrap items-baseline justify-between gap-x-4 text-ink-2">
      <span>
        {tries.map((each, index) => (
          <span key={index} className="mr-3 whitespace-nowrap">
            {ordinals[index] ?? `No. ${index + 1}`} try {formatNumber(each.value, format)}
            <button type="button" onClick={() => dropTry(index)} className="ml-1 min-h-8 min-w-8 text-cord underline underline-offset-2">
              <span aria-hidden="true">×</span>
              <span className="for-ears">Drop this try</span>
            </button>
          </span>
        ))}
      </span>
      <span>{toTriesWords(verdict, tries.length, repeat, within)}</span>
    </div>
  )
}

function toTriesWords(verdict: Entry['verdict'], taken: number, repeat: NonNullable<Entry['judging']['repeat']>, within: string): string {
  switch (verdict.kind) {
    case 'more':
      return taken > 0 && verdict.wanted === 1 ? `one more ${within} settles it` : `then ${verdict.wanted === 1 ? 'one' : verdict.wanted} more ${within}`
    case 'no-value':
      return taken > 0 ? `one more ${within} settles it` : `repeat until ${repeat.equal} are ${within}, ${repeat.atMost} tries at most`
    case 'unsettled':
      return `not settled in ${repeat.atMost} tries: say so below`
    default:
      return 'settled'
  }
}
