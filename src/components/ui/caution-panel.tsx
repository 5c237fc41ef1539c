import type { ReactNode } from 'react'
import { useId } from 'react'

import type { SignalWord } from '#shared/trade/signal-words.ts'

const strips: Readonly<Record<SignalWord, string>> = {
  DANGER: 'bg-danger-strip text-on-danger-strip',
  WARNING: 'bg-warning-strip text-on-warning-strip',
  CAUTION: 'bg-caution-strip text-on-caution-strip',
  NOTICE: 'bg-notice-strip text-on-notice-strip',
}

type CautionPanelProps = {
  readonly word: SignalWord
  readonly children: ReactNode
  readonly className?: string
}

/**
 * A caution under its signal word: the safety colour fills the head strip and nothing else; a triangle stands before every
 * word that speaks of people (ANSI Z535.4-2007, 4.14), none before NOTICE.
 */
export function CautionPanel({ word, children, className = '' }: CautionPanelProps) {
  const id = useId()
  return (
    <section aria-labelledby={id} className={`border-2 border-ink bg-card text-ink [--mark-ground:var(--card)] ${className}`}>
      <h2
        id={id}
        className={`flex min-h-10 items-center gap-2.5 border-b border-ink px-4 py-1 font-condensed text-[1.375rem] leading-7 font-semibold tracking-[0.06em] ${strips[word]}`}
      >
        {word !== 'NOTICE' && <SafetyTriangle />}
        {word}
      </h2>
      <div className="px-4 py-4">{children}</div>
    </section>
  )
}

function SafetyTriangle() {
  return (
    <svg viewBox="0 0 28 24" aria-hidden="true" className="h-6 w-7 shrink-0">
      <path d="M14 1.8 26.6 22.6H1.4z" fill="none" stroke="currentColor" strokeWidth="2.2" strokeLinejoin="round" />
      <path d="M14 8.6v7.2M14 17.6v2.4" fill="none" stroke="currentColor" strokeWidth="2.4" />
    </svg>
  )
}

/** One part of a caution's text under its lead word: what can happen, then, so. */
export function CautionPart({ lead, children, strong = false }: { readonly lead: string; readonly children: ReactNode; readonly strong?: boolean }) {
  return (
    <div className="pb-3 last:pb-0">
      <p className="label">{lead}</p>
      <p className={strong ? 'font-semibold' : ''}>{children}</p>
    </div>
  )
}
