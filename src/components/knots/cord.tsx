import type { ComponentProps, ReactNode } from 'react'

import type { KnotKind, KnotLook } from './knot.tsx'
import { Knot } from './knot.tsx'

/** A surface with the cord as its left margin. What stands in it begins at the gutter; `Tie` ties knots to the line. */
export function Cord({ className = '', ...rest }: ComponentProps<'div'>) {
  return <div {...rest} className={`corded ${className}`} />
}

type TieProps = {
  readonly kind: KnotKind
  readonly look?: KnotLook
  readonly size?: number
  readonly label?: string
  /** Where on the row the knot sits, as a class: 'top-1/2' (the middle) or the middle of the first line ('top-4'). */
  readonly at?: string
}

/** Ties a knot to the cord, level with the row it is in. The row must be `relative` and begin at the gutter (`Cord`). */
export function Tie({ at = 'top-1/2', size = 18, ...knot }: TieProps) {
  return (
    <span className={`pointer-events-none absolute left-[calc(var(--cord-x)-var(--cord-gutter))] flex -translate-1/2 ${at}`}>
      <Knot {...knot} size={size} />
    </span>
  )
}

/** The short line that runs from the cord to an outcome; dashed for "no answer". The parent is `relative` and begins at the gutter. */
export function Branch({ look = 'solid' }: { readonly look?: 'solid' | 'dashed' }) {
  const line = look === 'dashed' ? 'border-dashed border-rule' : 'border-cord'
  return (
    <span
      aria-hidden="true"
      className={`pointer-events-none absolute top-1/2 right-full w-[calc(var(--cord-gutter)-var(--cord-x))] -translate-y-px border-t-2 ${line}`}
    />
  )
}

type TrailKnot = { readonly key: string; readonly kind: KnotKind; readonly look?: KnotLook; readonly label: string }

/** The trail of a walk as a row of knots on a short cord, oldest first. */
export function Trail({ knots, words, size = 18 }: { readonly knots: readonly TrailKnot[]; readonly words: string; readonly size?: number }): ReactNode {
  return (
    <ol aria-label={words} className="flex flex-wrap items-center gap-y-1">
      {knots.map(({ key, label, ...knot }) => (
        // Each knot brings its own bit of line, so that a trail that wraps stays whole.
        <li
          key={key}
          className="relative flex px-1 before:absolute before:inset-x-0 before:top-1/2 before:-translate-y-px before:border-t-2 before:border-cord"
        >
          <Knot {...knot} label={label} size={size} className="relative" />
        </li>
      ))}
    </ol>
  )
}
