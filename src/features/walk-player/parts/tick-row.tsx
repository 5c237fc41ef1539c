import type { ReactNode } from 'react'

type TickRowProps = {
  readonly title: ReactNode
  readonly words?: ReactNode
  readonly isOn: boolean
  readonly onToggle: (on: boolean) => void
  /** What stands at the row's right end, outside its target. */
  readonly end?: ReactNode
}

/** A line of a list that is ticked off: the whole row is the target. */
export function TickRow({ title, words, isOn, onToggle, end }: TickRowProps) {
  return (
    <li className="relative flex items-stretch gap-2 border-b border-hair">
      <label className="flex min-h-(--row) min-w-0 flex-1 cursor-pointer items-center gap-4 py-2 hover:bg-cord-wash">
        <span className="relative flex size-8 shrink-0">
          <input
            type="checkbox"
            checked={isOn}
            onChange={(event) => onToggle(event.target.checked)}
            className="peer size-8 appearance-none rounded-control border-2 border-rule bg-card checked:border-good checked:bg-good"
          />
          <svg viewBox="0 0 16 16" aria-hidden="true" className="pointer-events-none absolute inset-1.5 hidden text-card peer-checked:block">
            <path d="m2.5 8.5 3.5 3.5 7.5-8.5" fill="none" stroke="currentColor" strokeWidth="2.4" />
          </svg>
        </span>
        <span className="grid min-w-0">
          <span className={isOn ? 'text-ink-2' : ''}>{title}</span>
          {words !== undefined && <span className="text-small text-ink-2">{words}</span>}
        </span>
      </label>
      {end}
    </li>
  )
}
