import type { ReactNode } from 'react'

export type MarkState = 'good' | 'bad' | 'care' | 'info' | 'open'

const colours: Readonly<Record<MarkState, string>> = {
  good: 'text-good',
  bad: 'text-bad',
  care: 'text-care',
  info: 'text-info',
  open: 'text-open',
}

const capsInk: Readonly<Record<MarkState, string>> = {
  good: '[--label-ink:var(--good)]',
  bad: '[--label-ink:var(--bad)]',
  care: '[--label-ink:var(--care)]',
  info: '[--label-ink:var(--info)]',
  open: '[--label-ink:var(--open)]',
}

const hollow = 'var(--mark-ground, var(--paper))'

/** Shape first: solid square, solid diamond, hexagon, circle with i, hollow circle. */
const shapes: Readonly<Record<MarkState, ReactNode>> = {
  good: (
    <>
      <path d="M1 1h14v14H1z" fill="currentColor" />
      <path d="m4.2 8.3 2.7 2.7 4.9-5.6" fill="none" stroke={hollow} strokeWidth="1.9" />
    </>
  ),
  bad: (
    <>
      <path d="M8 0l8 8-8 8-8-8z" fill="currentColor" />
      <path d="m5.6 5.6 4.8 4.8m0-4.8-4.8 4.8" fill="none" stroke={hollow} strokeWidth="1.8" />
    </>
  ),
  care: (
    <>
      <path d="M4.2 1.2h7.6L15.8 8l-4 6.8H4.2L.2 8z" fill="currentColor" />
      <path d="M4.8 8h6.4" fill="none" stroke={hollow} strokeWidth="2" />
    </>
  ),
  info: (
    <>
      <circle cx="8" cy="8" r="7" fill="none" stroke="currentColor" strokeWidth="1.6" />
      <path d="M8 7.2v4.4M8 4.2v1.7" fill="none" stroke="currentColor" strokeWidth="1.8" />
    </>
  ),
  open: <circle cx="8" cy="8" r="6.6" fill="none" stroke="currentColor" strokeWidth="1.8" />,
}

type StateMarkProps = {
  readonly state: MarkState
  /** The word beside the shape: a state is never shown without one. */
  readonly children: ReactNode
  /** `caps`: condensed capitals, as in a bar. `words`: running text. */
  readonly look?: 'words' | 'caps'
  readonly className?: string
}

/** A state as shape, word and colour, in that order of weight. */
export function StateMark({ state, children, look = 'words', className = '' }: StateMarkProps) {
  // The label's own ink gives way to the state's colour.
  const type = look === 'caps' ? `label ${capsInk[state]}` : 'font-medium'
  return (
    <span className={`inline-flex items-baseline gap-1.5 ${colours[state]} ${type} ${className}`}>
      <StateShape state={state} />
      <span>{children}</span>
    </span>
  )
}

/** The shape alone, for places where the word stands beside it already (a badge with a count). Colour is the text's own. */
export function StateShape({ state, className = 'size-[0.9em] translate-y-[0.08em]' }: { readonly state: MarkState; readonly className?: string }) {
  return (
    <svg viewBox="0 0 16 16" aria-hidden="true" className={`inline-block shrink-0 overflow-visible ${className}`}>
      {shapes[state]}
    </svg>
  )
}
