import type { ReactNode } from 'react'

import { Button } from './button.tsx'

type UndoRowProps = {
  /** What was done: "Stepped back to check 5". */
  readonly children: ReactNode
  readonly onUndo?: (() => void) | undefined
  readonly busy?: boolean
  readonly onDismiss?: () => void
}

/** What was just done, under the header, with its way back; it stands until the next act instead of asking before this one. */
export function UndoRow({ children, onUndo, busy = false, onDismiss }: UndoRowProps) {
  return (
    <div role="status" className="flex flex-wrap items-center justify-between gap-x-4 gap-y-1 border-b border-rule bg-cord-wash px-3 py-1">
      <span className="min-w-0 py-1">{children}</span>
      <span className="flex">
        {onUndo !== undefined && (
          <Button look="plain" busy={busy && 'Undoing'} onClick={onUndo}>
            Undo
          </Button>
        )}
        {onDismiss !== undefined && (
          <Button look="plain" onClick={onDismiss}>
            Close
          </Button>
        )}
      </span>
    </div>
  )
}
