import { render, screen, waitFor } from '@testing-library/react'
import { userEvent } from '@testing-library/user-event'
import { useState } from 'react'
import { expect, test } from 'vitest'

import { Button } from './button.tsx'
import { Dialog, DialogActs } from './dialog.tsx'

function Desk({ role }: { readonly role: 'dialog' | 'alertdialog' }) {
  const [isOpen, setOpen] = useState(false)
  return (
    <>
      <Button onClick={() => setOpen(true)}>Delete</Button>
      <Dialog title="Delete the draft?" role={role} isOpen={isOpen} onClose={() => setOpen(false)}>
        <p>It cannot be brought back.</p>
        <DialogActs>
          <Button onClick={() => setOpen(false)}>Keep it</Button>
        </DialogActs>
      </Dialog>
    </>
  )
}

test('a dialog is called by its title, holds the focus, closes with Escape and gives the focus back', async () => {
  const user = userEvent.setup()
  render(<Desk role="dialog" />)
  await user.click(screen.getByRole('button', { name: 'Delete' }))
  const dialog = await screen.findByRole('dialog', { name: 'Delete the draft?' })
  expect(dialog).toContainElement(document.activeElement as HTMLElement)
  await user.keyboard('{Escape}')
  expect(screen.queryByRole('dialog')).toBeNull()
  await waitFor(() => expect(screen.getByRole('button', { name: 'Delete' })).toHaveFocus())
})

test('one that asks for an answer is an alert dialog', async () => {
  const user = userEvent.setup()
  render(<Desk role="alertdialog" />)
  await user.click(screen.getByRole('button', { name: 'Delete' }))
  expect(await screen.findByRole('alertdialog', { name: 'Delete the draft?' })).toBeVisible()
  await user.click(screen.getByRole('button', { name: 'Keep it' }))
  expect(screen.queryByRole('alertdialog')).toBeNull()
})
