import type { ReactNode } from 'react'

type EmptyStateProps = {
  /** What belongs here. */
  readonly title: string
  readonly children?: ReactNode
  /** The first act. */
  readonly act?: ReactNode
}

/** An empty list says what belongs there and holds the first act. */
export function EmptyState({ title, children, act }: EmptyStateProps) {
  return (
    <div className="grid justify-items-start gap-2 border-y border-hair py-6">
      <p className="font-semibold">{title}</p>
      {children !== undefined && <div className="max-w-words text-ink-2">{children}</div>}
      {act !== undefined && <div className="pt-2">{act}</div>}
    </div>
  )
}
