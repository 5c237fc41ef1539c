import type { ReactNode } from 'react'

import type { NodeKind } from '#shared/trade/node-kinds.ts'

/** Node kinds, and three knots for what is no node: a jump that comes back, something that waits, a finding that was stepped back from. */
export type KnotKind = NodeKind | 'jump-returns' | 'waiting' | 'spent'
/** `outline`: done or ahead. `current`: where the walk stands, or the leading one. `faint`: not on the route. */
export type KnotLook = 'outline' | 'current' | 'faint'

type Drawing = { readonly width: number; readonly outline: string; readonly inside?: (look: KnotLook) => ReactNode }

const pill = (left: number, top: number, width: number, height: number): string => {
  const r = height / 2
  return `M${left + r} ${top}h${width - height}a${r} ${r} 0 0 1 0 ${height}h${height - width}a${r} ${r} 0 0 1 0 ${-height}z`
}

const diamond = (middle: number, reach: number): string => `M${middle} ${8 - reach} ${middle + reach} 8 ${middle} ${8 + reach} ${middle - reach} 8z`

const circle = (reach: number): string => `M${8 - reach} 8a${reach} ${reach} 0 1 0 ${2 * reach} 0a${reach} ${reach} 0 1 0 ${-2 * reach} 0z`

/** Lines inside a filled knot take the ground's colour. */
const line = (look: KnotLook): string => (look === 'current' ? 'var(--knot-ground, var(--paper))' : 'currentColor')

/** Outlines of ISO 5807 on a 16-high grid (terminator, process, decision, off-page connector, predefined process). */
const drawings: Readonly<Record<KnotKind, Drawing>> = {
  start: { width: 22, outline: pill(1, 3, 20, 10) },
  step: { width: 16, outline: 'M2 2h12v12H2z' },
  check: { width: 16, outline: diamond(8, 7) },
  reading: {
    width: 18,
    outline: diamond(9, 8),
    inside: (look) => <path d="M4.5 8h9M5 6.6v2.8M7 6.6v2.8M9 5.4v5.2M11 6.6v2.8M13 6.6v2.8" fill="none" stroke={line(look)} strokeWidth="1" />,
  },
  proof: {
    width: 18,
    outline: diamond(9, 8),
    inside: (look) => (
      <path d={diamond(9, 4)} fill={look === 'current' ? 'currentColor' : 'none'} stroke="currentColor" strokeWidth={look === 'current' ? 0 : 1.4} />
    ),
  },
  cause: { width: 22, outline: pill(1, 3, 20, 10) },
  jump: { width: 16, outline: 'M2 2h12v7l-6 5.5L2 9z' },
  'jump-returns': {
    width: 20,
    outline: 'M1 3h18v10H1z',
    inside: (look) => <path d="M5 3v10M15 3v10" fill="none" stroke={line(look)} strokeWidth="1.6" />,
  },
  escalate: {
    width: 24,
    outline: pill(1, 2, 22, 12),
    inside: (look) => <path d={pill(4, 5, 16, 6)} fill="none" stroke={line(look)} strokeWidth="1.4" />,
  },
  hold: {
    width: 22,
    outline: pill(1, 2.5, 20, 11),
    inside: (look) => <path d="M5 8h12" fill="none" stroke={line(look)} strokeWidth="3.2" />,
  },
  back: {
    width: 24,
    outline: pill(1, 2, 22, 12),
    inside: (look) => <path d="M16 5v1.6q0 2-2 2H8m2.4-2.7L7.7 8.6l2.7 2.7" fill="none" stroke={line(look)} strokeWidth="1.5" />,
  },
  waiting: { width: 16, outline: circle(6.5) },
  spent: { width: 16, outline: circle(4.5) },
}

type KnotProps = {
  readonly kind: KnotKind
  readonly look?: KnotLook
  /** Height in px, 16 or more. */
  readonly size?: number
  /** What the knot stands for, when nothing beside it says so; without it the knot is decoration. */
  readonly label?: string
  readonly className?: string
}

/** A knot on the cord, in the shape of its node's kind. Its ground hides the line behind it: set --knot-ground on washes. */
export function Knot({ kind, look = 'outline', size = 16, label, className = '' }: KnotProps) {
  const { width, outline, inside } = drawings[kind]
  // A proof keeps its white gap when it is current; a cause is always full.
  const isFilled = (look === 'current' && kind !== 'proof') || kind === 'cause'
  const isFaint = look === 'faint' || kind === 'spent'
  return (
    <svg
      viewBox={`0 0 ${width} 16`}
      width={(size * width) / 16}
      height={size}
      className={`shrink-0 overflow-visible ${isFaint ? 'text-rule' : 'text-cord'} ${className}`}
      {...(label === undefined ? { 'aria-hidden': true } : { role: 'img', 'aria-label': label })}
    >
      <path
        d={outline}
        fill={isFilled ? 'currentColor' : 'var(--knot-ground, var(--paper))'}
        stroke="currentColor"
        strokeWidth={isFaint ? 1.5 : 2}
        vectorEffect="non-scaling-stroke"
      />
      {inside?.(isFilled ? 'current' : look)}
    </svg>
  )
}

/** What each knot is called where its shape alone would have to say it. */
export const knotWords: Readonly<Record<KnotKind, string>> = {
  start: 'Start',
  step: 'Step',
  check: 'Check',
  reading: 'Reading',
  proof: 'Proof',
  cause: 'Cause',
  jump: 'Jump',
  'jump-returns': 'Comes back',
  escalate: 'Ask',
  hold: 'Hold',
  back: 'Back',
  waiting: 'Waiting',
  spent: 'Stepped back',
}
