import { render, screen, waitFor } from '@testing-library/react'
import { userEvent } from '@testing-library/user-event'
import { expect, test, vi } from 'vitest'
import { z } from 'zod'

import { ProblemError } from './api-client.ts'
import { toFieldName, useZodForm } from './use-zod-form.ts'

const body = z.strictObject({ serial: z.string().min(1, 'Write the serial.'), note: z.string() })

function TicketForm({ save }: { readonly save: (sent: z.output<typeof body>) => void }) {
  const form = useZodForm(body, { serial: '', note: '' })
  const { errors } = form.formState
  const onSubmit = (sent: z.output<typeof body>): void => {
    try {
      save(sent)
    } catch (error) {
      form.showProblem(error)
    }
  }
  return (
    <form onSubmit={(event) => void form.handleSubmit(onSubmit)(event)}>
      <input aria-label="Serial" {...form.register('serial')} />
      <p>{errors.serial?.message}</p>
      <p role="alert">{errors.root?.message}</p>
      <button type="submit">Save</button>
    </form>
  )
}

test('the contract judges before anything is sent, and a mended field is free again', async () => {
  const user = userEvent.setup()
  const save = vi.fn()
  render(<TicketForm save={save} />)
  await user.click(screen.getByRole('button', { name: 'Save' }))
  expect(await screen.findByText('Write the serial.')).toBeVisible()
  expect(save).not.toHaveBeenCalled()
  await user.type(screen.getByRole('textbox', { name: 'Serial' }), '4471')
  await waitFor(() => expect(screen.queryByText('Write the serial.')).toBeNull())
  await user.click(screen.getByRole('button', { name: 'Save' }))
  await waitFor(() => expect(save).toHaveBeenCalledWith({ serial: '4471', note: '' }))
})

test('a refusal goes back to the field it names, one that names none stands over the form', async () => {
  const user = userEvent.setup()
  const save = vi.fn()
  render(<TicketForm save={save} />)
  await user.type(screen.getByRole('textbox', { name: 'Serial' }), '4471')
  save.mockImplementationOnce(() => {
    throw new ProblemError(422, 'invalid-input', 'Wrong.', [{ pointer: '#/serial', detail: 'No such serial.' }])
  })
  await user.click(screen.getByRole('button', { name: 'Save' }))
  expect(await screen.findByText('No such serial.')).toBeVisible()
  expect(screen.getByRole('textbox', { name: 'Serial' })).toHaveFocus()
  save.mockImplementationOnce(() => {
    throw new ProblemError(503, 'busy', 'Try again in a moment.', [{ pointer: '#/elsewhere', detail: 'x' }])
  })
  await user.click(screen.getByRole('button', { name: 'Save' }))
  await waitFor(() => expect(screen.getByRole('alert')).toHaveTextContent('Try again in a moment.'))
})

test('a JSON pointer is read as the name of a field (RFC 6901)', () => {
  expect(toFieldName('#/email')).toBe('email')
  expect(toFieldName('/parts/0/title')).toBe('parts.0.title')
  expect(toFieldName('#/a~1b/c~0d')).toBe('a/b.c~d')
})
