import { render, screen } from '@testing-library/react'
import { userEvent } from '@testing-library/user-event'
import type { FormEvent } from 'react'
import { expect, test, vi } from 'vitest'

import { Button } from './button.tsx'

test('a busy button says what it does, keeps the focus and takes no second press', async () => {
  const user = userEvent.setup()
  const onSubmit = vi.fn((event: FormEvent) => event.preventDefault())
  const { rerender } = render(
    <form onSubmit={onSubmit}>
      <Button type="submit">Record</Button>
    </form>,
  )
  await user.click(screen.getByRole('button', { name: 'Record' }))
  rerender(
    <form onSubmit={onSubmit}>
      <Button type="submit" busy="Recording">
        Record
      </Button>
    </form>,
  )
  const button = screen.getByRole('button', { name: 'Recording' })
  expect(button).toHaveFocus()
  expect(button).toHaveAttribute('aria-disabled', 'true')
  await user.click(button)
  await user.keyboard('{Enter}')
  expect(onSubmit).toHaveBeenCalledOnce()
})

test('a button inside a form sends nothing unless it is told to', async () => {
  const onSubmit = vi.fn()
  render(
    <form onSubmit={onSubmit}>
      <Button>Note</Button>
    </form>,
  )
  await userEvent.setup().click(screen.getByRole('button', { name: 'Note' }))
  expect(onSubmit).not.toHaveBeenCalled()
})
