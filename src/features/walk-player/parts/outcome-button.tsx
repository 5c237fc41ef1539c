import type { ReactNode } from 'react'

import { Balloon } from '#src/components/knots/balloon.tsx'
import { Branch } from '#src/components/knots/cord.tsx'

type OutcomeButtonProps = {
  /** 1 to 9, and 0 for no answer; the same numeral is the key. */
  readonly numeral: number | null
  readonly title: string
  /** A second line: what tapping it means beyond the answer. */
  readonly words?: ReactNode
  /** `leading`: the one that the value points to, or that was answered before. `open`: no answer. */
  readonly look?: 'plain' | 'leading' | 'open'
  readonly disabled?: boolean
  readonly expanded?: boolean
  readonly onPress: () => void
}

const looks = {
  plain: 'border border-rule bg-card',
  leading: 'border-2 border-cord bg-card',
  open: 'border border-dashed border-rule bg-transparent',
} as const

/** An outcome: as wide as the page and as high as a gloved thumb, hung on the cord. Acts on release. */
export function OutcomeButton({ numeral, title, words, look = 'plain', disabled = false, expanded, onPress }: OutcomeButtonProps) {
  return (
    <div className="relative">
      {/* In two columns the answers stand away from the cord. */}
      <span className="lg:hidden">
        <Branch look={look === 'open' ? 'dashed' : 'solid'} />
      </span>
      <button
        type="button"
        onClick={onPress}
        aria-disabled={disabled || undefined}
        aria-expanded={expanded}
        className={`flex min-h-18 md:min-h-22 w-full items-center gap-4 rounded-control px-4 py-2 text-left transition-colors select-none hover:border-ink active:bg-cord-wash sm:gap-5 sm:px-5 ${looks[look]} ${disabled ? 'border-dashed text-ink-2' : ''}`}
      >
        {numeral !== null && <Balloon numeral={numeral} look={look === 'open' ? 'open' : 'plain'} />}{' '}
        {/* The spaces are for ears: number, outcome and what it means are three things. */}
        <span className="grid min-w-0 gap-0.5">
          <span className={`text-body leading-7 ${look === 'open' ? 'text-ink-2' : look === 'leading' ? 'font-semibold' : 'font-medium'}`}>{title}</span>{' '}
          {words !== undefined && <span className="text-small leading-5 text-ink-2">{words}</span>}
        </span>
      </button>
    </div>
  )
}
