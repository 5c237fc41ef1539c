import type { ReactNode } from 'react'

import type { MarkState } from './state-mark.tsx'
import { StateShape } from './state-mark.tsx'

const edges: Readonly<Record<MarkState, string>> = {
  good: 'border-good text-good',
  bad: 'border-bad text-bad',
  care: 'border-care text-care',
  info: 'border-info text-info',
  open: 'border-open text-open',
}

type NoticeProps = {
  readonly state: MarkState
  /** What happened, in one line. */
  readonly title: string
  /** What is safe and what to do. */
  readonly children?: ReactNode
  readonly className?: string
  /** `alert` for what has just gone wrong; nothing for what merely stands on the page. */
  readonly role?: 'alert' | 'status'
}

/** A ruled remark in the flow of the page: a thick rule, the shape, words. */
export function Notice({ state, title, children, className = '', role }: NoticeProps) {
  return (
    <div role={role} className={`border-l-4 py-1 pl-3 ${edges[state]} ${className}`}>
      <p className="flex items-baseline gap-2 font-semibold">
        <StateShape state={state} />
        <span>{title}</span>
      </p>
      {children !== undefined && <div className="max-w-words text-ink">{children}</div>}
    </div>
  )
}
