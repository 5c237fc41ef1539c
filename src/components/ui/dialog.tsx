import type { ReactNode } from 'react'
import { Dialog as AriaDialog, Heading, Modal, ModalOverlay } from 'react-aria-components'

type DialogProps = {
  readonly title: string
  readonly isOpen: boolean
  readonly onClose: () => void
  readonly children: ReactNode
  /** Asks for an answer before anything else (something that cannot be undone). */
  readonly role?: 'dialog' | 'alertdialog'
}

/**
 * A layer over a dimmed page: only for what cannot be undone, and for lists that are looked up and left (keys).
 * What can be undone is done, and offers its undo. Brings react-aria-components along: import it from lazy screens only.
 */
export function Dialog({ title, isOpen, onClose, children, role = 'dialog' }: DialogProps) {
  return (
    <ModalOverlay
      isOpen={isOpen}
      onOpenChange={(open) => {
        if (!open) onClose()
      }}
      isDismissable={role === 'dialog'}
      className="fixed inset-0 z-20 grid place-items-center overflow-y-auto bg-[rgb(0_0_0/0.55)] p-4"
    >
      <Modal className="w-full max-w-form border border-rule bg-card [--knot-ground:var(--card)] [--mark-ground:var(--card)]">
        <AriaDialog role={role} className="grid gap-4 p-5 outline-none">
          <Heading slot="title" className="title">
            {title}
          </Heading>
          {children}
        </AriaDialog>
      </Modal>
    </ModalOverlay>
  )
}

/** The row of acts at the foot of a dialog; the safe one first. */
export function DialogActs({ children }: { readonly children: ReactNode }) {
  return <div className="flex flex-wrap justify-end gap-3 pt-2">{children}</div>
}
