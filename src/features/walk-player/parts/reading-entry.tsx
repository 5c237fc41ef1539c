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
    <div className="flex items-center justify-between gap-x-4 text-ink-2">
      {tries.length > 0 && (
        <span className="flex flex-wrap gap-x-3">
          {tries.map((each, index) => (
            <button key={index} type="button" onClick={() => dropTry(index)} className="min-h-14 whitespace-nowrap hover:text-ink">
              {ordinals[index] ?? `No. ${index + 1}`} try {formatNumber(each.value, format)}
              <span aria-hidden="true" className="ml-2 text-cord">
                ×
              </span>
              <span className="for-ears">, drop it</span>
            </button>
          ))}
        </span>
      )}
      <span className="ml-auto text-right leading-5">{toTriesWords(verdict, tries.length, repeat, within)}</span>
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
